import { StudyQuestion } from '$lib/contracts/study';
import { emptyContent } from '$lib/study';
import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { withTransaction } from '../db/transaction';
import { refusal } from '../errors';
import { authorize, can, requireActor } from '../policies/ability';
import { parseInput } from '../studies/parseInput';
import { writeFirstRevision } from '../studies/writeFirstRevision';

/**
 * Starts a study from its question, owned by whoever asks it. Without `workspaceId` it goes to the first workspace in
 * which the actor may start one.
 */
export async function createStudy(
  context: Context,
  input: { workspaceId?: string; question: unknown }
): Promise<{ studyId: string }> {
  const actor = requireActor(context.actor);
  const workspaceId =
    input.workspaceId ??
    actor.memberships.find(({ workspaceId: id }) => can(actor, 'study.create', { kind: 'workspace', workspaceId: id }))
      ?.workspaceId ??
    actor.memberships[0]?.workspaceId;
  if (workspaceId === undefined) {
    throw refusal('policy.forbidden', { message: 'You are in no workspace: ask its administrator to invite you.' });
  }
  authorize(actor, 'study.create', { kind: 'workspace', workspaceId });
  const question = parseInput(StudyQuestion, input.question, 'question');
  const content = emptyContent(question);
  return withTransaction(async (transaction) => {
    const study = await writeFirstRevision(context, transaction, {
      workspaceId,
      ownerId: actor.userId,
      originId: null,
      question,
      content,
      summary: 'Question stated.'
    });
    await recordAudit(context, transaction, {
      act: 'study.create',
      subjectType: 'study',
      subjectId: study.id,
      studyId: study.id,
      workspaceId,
      details: { title: question.title, fingerprint: study.fingerprint }
    });
    return { studyId: study.id };
  });
}
