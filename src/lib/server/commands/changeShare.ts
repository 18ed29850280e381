import { z } from 'zod';
import { studyRoles } from '$lib/contracts/study';
import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { StudyShare } from '../db/models/StudyShare';
import { withTransaction } from '../db/transaction';
import { refusal } from '../errors';
import { isUuid } from '../isUuid';
import { openStudy } from '../studies/access';
import { parseInput } from '../studies/parseInput';
import { refreshParts } from '../studies/refreshParts';

const Role = z.enum(studyRoles, { error: 'Choose contributor, reviewer or observer.' });

/** Gives somebody who has a share of the study another role in it. */
export async function changeShare(
  context: Context,
  input: { studyId: string; userId: string; role: string }
): Promise<void> {
  const { study } = await openStudy(context, input.studyId, 'study.share');
  const role = parseInput(Role, input.role, 'role');
  await withTransaction(async (transaction) => {
    await study.reload({ transaction, lock: transaction.LOCK.UPDATE });
    const share = await findShare(study.id, input.userId, transaction);
    const before = share.role;
    if (before === role) return;
    await share.update({ role }, { transaction });
    await refreshParts(study, transaction);
    await recordAudit(context, transaction, {
      act: 'study.changeShare',
      subjectType: 'user',
      subjectId: share.userId,
      studyId: study.id,
      workspaceId: study.workspaceId,
      details: { before, role }
    });
  });
}

/** The share of one person, or 404. */
export async function findShare(
  studyId: string,
  userId: string,
  transaction: Parameters<Parameters<typeof withTransaction>[0]>[0]
): Promise<StudyShare> {
  const share = isUuid(userId) ? await StudyShare.findOne({ where: { studyId, userId }, transaction }) : null;
  if (!share) throw refusal('share.notFound');
  return share;
}
