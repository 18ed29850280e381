import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { withTransaction } from '../db/transaction';
import { openStudy, requireOpen } from '../studies/access';
import { refreshParts } from '../studies/refreshParts';
import { findThread } from './replyToThread';

/** Closes a thread, or opens it again: by whoever opened it, or by those who may edit the study. */
export async function resolveThread(
  context: Context,
  input: { studyId: string; threadId: string; resolved: boolean }
): Promise<void> {
  // Reading first: an outsider must not learn whether the thread exists.
  await openStudy(context, input.studyId, 'study.read');
  const thread = await findThread(input.studyId, input.threadId);
  const { study, actor } = await openStudy(context, input.studyId, 'study.resolve', { openerId: thread.openerId });
  requireOpen(study);
  await withTransaction(async (transaction) => {
    await thread.reload({ transaction, lock: transaction.LOCK.UPDATE });
    if ((thread.state === 'resolved') === input.resolved) return;
    await thread.update(
      input.resolved
        ? { state: 'resolved', resolvedById: actor.userId, resolvedAt: context.now() }
        : { state: 'open', resolvedById: null, resolvedAt: null },
      { transaction }
    );
    await study.reload({ transaction, lock: transaction.LOCK.UPDATE });
    await refreshParts(study, transaction);
    await recordAudit(context, transaction, {
      act: input.resolved ? 'study.resolve' : 'study.reopen',
      subjectType: 'thread',
      subjectId: thread.id,
      studyId: study.id,
      workspaceId: study.workspaceId,
      details: { number: thread.number }
    });
  });
}
