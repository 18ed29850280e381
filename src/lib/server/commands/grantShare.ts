import type { Transaction } from 'sequelize';
import type { StudyRole } from '$lib/contracts/study';
import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { Study } from '../db/models/Study';
import { StudyShare } from '../db/models/StudyShare';
import { refreshParts } from '../studies/refreshParts';

const REACH: readonly StudyRole[] = ['observer', 'reviewer', 'contributor'];

export interface Grant {
  studyId: string;
  userId: string;
  role: StudyRole;
  /** Who decided it, where that is not the actor: an invitation is accepted by the person it was sent to. */
  sharedById?: string;
}

/**
 * Gives a person a role in a study, inside the transaction of the act that decided it (a share, or an invitation being
 * accepted). Decides no permission itself: its callers have. An invitation accepted late never takes away what the person
 * was given in the meantime. Does nothing for the owner or for a study that is gone.
 */
export async function grantShare(context: Context, transaction: Transaction, grant: Grant): Promise<void> {
  const { studyId, userId, role } = grant;
  const study = await Study.findByPk(studyId, { transaction, lock: transaction.LOCK.UPDATE });
  if (!study || study.ownerId === userId) return;
  const held = await StudyShare.findOne({ where: { studyId, userId }, transaction });
  if (held && REACH.indexOf(held.role) >= REACH.indexOf(role)) return;
  const before = held?.role ?? null;
  if (held) await held.update({ role }, { transaction });
  else {
    const sharedById = grant.sharedById ?? context.actor?.userId ?? null;
    await StudyShare.create({ studyId, userId, role, sharedById }, { transaction });
  }
  await refreshParts(study, transaction);
  await recordAudit(context, transaction, {
    act: 'study.share',
    subjectType: 'user',
    subjectId: userId,
    studyId,
    workspaceId: study.workspaceId,
    details: { role, before }
  });
}
