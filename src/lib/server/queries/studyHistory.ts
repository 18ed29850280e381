import type { StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import type { Change, PersonName } from '$lib/contracts/views';
import type { Context } from '../context';
import { Study } from '../db/models/Study';
import { StudyRevision } from '../db/models/StudyRevision';
import { AppError } from '../errors';
import type { StudyAct } from '../policies/ability';
import { openStudy, readRevision } from '../studies/access';
import { changesBetween } from '../studies/changes';
import { peopleByName } from './peopleByName';

export interface RevisionLine {
  number: number;
  /** What changed, in plain words. */
  summary: string;
  author: PersonName;
  at: string;
  fingerprint: string;
  isCurrent: boolean;
}
export interface HistoryView {
  studyId: string;
  revisions: RevisionLine[];
  origin: { id: string; title: string } | null;
  abilities: StudyAct[];
}

/** Every revision of a study, newest first. */
export async function studyHistory(context: Context, studyId: string): Promise<HistoryView> {
  const { study, abilities } = await openStudy(context, studyId, 'study.read');
  const revisions = await StudyRevision.findAll({
    where: { studyId: study.id },
    attributes: ['number', 'summary', 'authorId', 'createdAt', 'fingerprint'],
    order: [['number', 'DESC']]
  });
  const person = await peopleByName(revisions.map(({ authorId }) => authorId));
  return {
    studyId: study.id,
    revisions: revisions.map(({ number, summary, authorId, createdAt, fingerprint }) => ({
      number,
      summary,
      author: person(authorId),
      at: createdAt.toISOString(),
      fingerprint,
      isCurrent: number === study.revision
    })),
    origin: await originOf(context, study),
    abilities
  };
}

/** Where a copy came from, for those who may read that too. */
export async function originOf(context: Context, study: Study): Promise<{ id: string; title: string } | null> {
  if (study.originId === null) return null;
  try {
    const origin = await openStudy(context, study.originId, 'study.read');
    return { id: origin.study.id, title: origin.study.title };
  } catch (thrown) {
    // Gone, or not the reader's to see: either way there is nothing to name.
    if (thrown instanceof AppError) return null;
    throw thrown;
  }
}

export interface RevisionView extends RevisionLine {
  question: StudyQuestion;
  content: StudyContent;
  /** What this revision changed against the one before; empty for the first. */
  changed: Change[];
  /** What has changed from this revision to the latest. */
  since: Change[];
}

/** One revision, whole, with its differences to its neighbour and to the latest. Throws 404 for a number there is not. */
export async function studyRevision(context: Context, studyId: string, number: number): Promise<RevisionView> {
  const { study } = await openStudy(context, studyId, 'study.read');
  const revision = await readRevision(study, number);
  const [before, latest] = await Promise.all([
    number > 1 ? readRevision(study, number - 1) : null,
    number < study.revision ? readRevision(study) : null
  ]);
  const person = await peopleByName([revision.authorId]);
  return {
    number,
    summary: revision.summary,
    author: person(revision.authorId),
    at: revision.createdAt.toISOString(),
    fingerprint: revision.fingerprint,
    isCurrent: latest === null,
    question: revision.question,
    content: revision.content,
    changed: before ? changesBetween(before, revision) : [],
    since: latest ? changesBetween(revision, latest) : []
  };
}
