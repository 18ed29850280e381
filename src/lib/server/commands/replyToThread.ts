import { NewReply } from '$lib/contracts/comment';
import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { Comment } from '../db/models/Comment';
import { Thread } from '../db/models/Thread';
import { withTransaction } from '../db/transaction';
import { refusal } from '../errors';
import { isUuid } from '../isUuid';
import { openStudy, requireOpen } from '../studies/access';
import { parseInput } from '../studies/parseInput';

/** Adds a comment to an open thread of the study. A resolved thread is opened again first (`resolveThread`). */
export async function replyToThread(
  context: Context,
  input: { studyId: string; threadId: string; kind?: unknown; body: unknown }
): Promise<{ commentId: string }> {
  const { study, actor } = await openStudy(context, input.studyId, 'study.comment');
  requireOpen(study);
  const thread = await findThread(study.id, input.threadId);
  const { kind, body } = parseInput(NewReply, { kind: input.kind, body: input.body });
  return withTransaction(async (transaction) => {
    await thread.reload({ transaction, lock: transaction.LOCK.UPDATE });
    if (thread.state === 'resolved') throw refusal('thread.closed');
    const comment = await Comment.create(
      { threadId: thread.id, authorId: actor.userId, kind, body, revision: study.revision },
      { transaction }
    );
    await recordAudit(context, transaction, {
      act: 'study.reply',
      subjectType: 'thread',
      subjectId: thread.id,
      studyId: study.id,
      workspaceId: study.workspaceId,
      details: { kind, commentId: comment.id, number: thread.number }
    });
    return { commentId: comment.id };
  });
}

/** A thread of that study, or 404. */
export async function findThread(studyId: string, threadId: string): Promise<Thread> {
  const thread = isUuid(threadId) ? await Thread.findOne({ where: { id: threadId, studyId } }) : null;
  if (!thread) throw refusal('thread.notFound');
  return thread;
}
