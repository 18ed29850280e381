import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { withTransaction } from '../db/transaction';
import { openStudy } from '../studies/access';
import { refreshParts } from '../studies/refreshParts';
import { findShare } from './changeShare';

/** Takes a person's share of a study away. What they wrote in it stays. */
export async function revokeShare(context: Context, input: { studyId: string; userId: string }): Promise<void> {
  const { study } = await openStudy(context, input.studyId, 'study.share');
  await withTransaction(async (transaction) => {
    await study.reload({ transaction, lock: transaction.LOCK.UPDATE });
    const share = await findShare(study.id, input.userId, transaction);
    await share.destroy({ transaction });
    await refreshParts(study, transaction);
    await recordAudit(context, transaction, {
      act: 'study.revokeShare',
      subjectType: 'user',
      subjectId: share.userId,
      studyId: study.id,
      workspaceId: study.workspaceId,
      details: { role: share.role }
    });
  });
}
