import type { Transaction } from 'sequelize';
import { Reading } from '../db/models/Reading';

/** The latest reading of each part that has one. */
export async function latestReadings(studyId: string, transaction?: Transaction): Promise<Reading[]> {
  const all = await Reading.findAll({ where: { studyId }, order: [['createdAt', 'DESC']], transaction });
  return all.filter((reading, index) => all.findIndex(({ part }) => part === reading.part) === index);
}
