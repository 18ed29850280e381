import { NewThread } from '$lib/contracts/comment';
import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { Comment } from '../db/models/Comment';
import { Thread } from '../db/models/Thread';
import { withTransaction } from '../db/transaction';
import { openStudy, readRevision, requireLiving, requireOpen } from '../studies/access';
import { parseInput } from '../studies/parseInput';
import { quoteAnchor } from '../studies/quoteAnchor';
import { refreshParts } from '../studies/refreshParts';

/**
 * Opens a thread on a rate, a point, a part or the study, with its first comment. What the anchored thing reads now is
 * quoted from the server's own record, so that a later change can be told.
 */
export async function openThread(
  context: Context,
  input: { studyId: string; anchor: unknown; kind: unknown; body: unknown }
): Promise<{ threadId: string; number: number }> {
  const { study, actor } = await openStudy(context, input.studyId, 'study.comment');
  requireOpen(study);
  const { anchor, kind, body } = parseInput(NewThread, { anchor: input.anchor, kind: input.kind, body: input.body });
  const revision = await readRevision(study);
  const anchorQuote = quoteAnchor(anchor, revision.question, revision.content);
  return withTransaction(async (transaction) => {
    // The study's row is the queue in which two new threads get different numbers.
    await study.reload({ transaction, lock: transaction.LOCK.UPDATE });
    requireLiving(study);
    const last = await Thread.max<number | null, Thread>('number', { where: { studyId: study.id }, transaction });
    const thread = await Thread.create(
      {
        studyId: study.id,
        number: (last ?? 0) + 1,
        anchorKind: anchor.kind,
        anchorKey: anchor.kind === 'study' ? '' : anchor.key,
        anchorQuote,
        anchorRevision: revision.number,
        openerId: actor.userId
      },
      { transaction }
    );
    const comment = await Comment.create(
      { threadId: thread.id, authorId: actor.userId, kind, body, revision: revision.number },
      { transaction }
    );
    await refreshParts(study, transaction);
    await recordAudit(context, transaction, {
      act: 'study.comment',
      subjectType: 'thread',
      subjectId: thread.id,
      studyId: study.id,
      workspaceId: study.workspaceId,
      details: { anchor, kind, commentId: comment.id, number: thread.number }
    });
    return { threadId: thread.id, number: thread.number };
  });
}
