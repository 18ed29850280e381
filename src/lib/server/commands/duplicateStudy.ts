import { StudyQuestion } from '$lib/contracts/study';
import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { withTransaction } from '../db/transaction';
import { openStudy, readRevision } from '../studies/access';
import { parseInput } from '../studies/parseInput';
import { writeFirstRevision } from '../studies/writeFirstRevision';

/** Copies the latest revision into a study of the actor's own, without its history, comments, shares and readings. */
export async function duplicateStudy(
  context: Context,
  input: { studyId: string; title?: string }
): Promise<{ studyId: string }> {
  const { study: origin, actor } = await openStudy(context, input.studyId, 'study.duplicate');
  const revision = await readRevision(origin);
  const title = input.title ?? `Copy of ${revision.question.title}`.slice(0, 120);
  const question = parseInput(StudyQuestion, { ...revision.question, title });
  return withTransaction(async (transaction) => {
    const study = await writeFirstRevision(context, transaction, {
      workspaceId: origin.workspaceId,
      ownerId: actor.userId,
      originId: origin.id,
      question,
      content: revision.content,
      summary: `Copied from revision ${revision.number} of “${revision.question.title}”.`
    });
    await recordAudit(context, transaction, {
      act: 'study.duplicate',
      subjectType: 'study',
      subjectId: study.id,
      studyId: study.id,
      workspaceId: study.workspaceId,
      details: { originId: origin.id, originRevision: revision.number, title }
    });
    return { studyId: study.id };
  });
}
