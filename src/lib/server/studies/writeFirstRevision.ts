import { randomUUID } from 'node:crypto';
import type { Transaction } from 'sequelize';
import type { StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import type { Context } from '../context';
import { Study } from '../db/models/Study';
import { StudyRevision } from '../db/models/StudyRevision';
import { fingerprintOf } from './fingerprint';
import { listFields } from './listFields';

interface First {
  workspaceId: string;
  ownerId: string;
  originId: string | null;
  question: StudyQuestion;
  content: StudyContent;
  summary: string;
}

/** Writes a study's row and its revision 1 in the caller's transaction. */
export async function writeFirstRevision(context: Context, transaction: Transaction, first: First): Promise<Study> {
  const { question, content, summary, ownerId } = first;
  const id = randomUUID();
  const fingerprint = fingerprintOf({ question, content });
  const now = context.now();
  const study = await Study.create(
    {
      id,
      workspaceId: first.workspaceId,
      ownerId,
      originId: first.originId,
      ...listFields({ question, content, fingerprint, around: {} }),
      createdAt: now,
      changedAt: now
    },
    { transaction }
  );
  await StudyRevision.create(
    { studyId: id, number: 1, question, content, fingerprint, summary, authorId: ownerId, createdAt: now },
    { transaction }
  );
  return study;
}
