import type { Transaction } from 'sequelize';
import { Reading } from '../db/models/Reading';
import { StudyRevision } from '../db/models/StudyRevision';
import { StudyShare } from '../db/models/StudyShare';
import { Thread } from '../db/models/Thread';
import type { ReadText, Surroundings } from './assess';

/** The latest reading of each part that has one. */
export async function latestReadings(studyId: string, transaction?: Transaction): Promise<Reading[]> {
  const all = await Reading.findAll({
    where: { studyId },
    order: [['createdAt', 'DESC']],
    limit: 50,
    transaction
  });
  return all.filter((reading, index) => all.findIndex(({ part }) => part === reading.part) === index);
}

/** What the parts of a study lean on beside its text: what was read from which revision, comments, reviewers. */
export async function surroundingsOf(studyId: string, transaction?: Transaction): Promise<Required<Surroundings>> {
  // One after another: inside a transaction there is only one connection to ask.
  const readings = await latestReadings(studyId, transaction);
  const open = await Thread.count({ where: { studyId, state: 'open' }, transaction });
  const total = await Thread.count({ where: { studyId }, transaction });
  const reviewers = await StudyShare.count({ where: { studyId, role: 'reviewer' }, transaction });
  const numbers = readings.map(({ revision }) => revision);
  const texts = numbers.length ? await StudyRevision.findAll({ where: { studyId, number: numbers }, transaction }) : [];
  const read = readings.flatMap(({ part, revision }): ReadText[] => {
    const text = texts.find(({ number }) => number === revision);
    return text ? [{ part, revision, question: text.question, content: text.content }] : [];
  });
  return { readings: read, comments: { open, total }, reviewers };
}
