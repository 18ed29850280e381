import type { Transaction } from 'sequelize';
import type { WorkspaceRole } from '$lib/contracts/people';
import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { Membership } from '../db/models/Membership';
import { withTransaction } from '../db/transaction';
import { refusal } from '../errors';
import { isUuid } from '../isUuid';
import { authorize } from '../policies/ability';

/**
 * The membership of a person in a workspace, with every administrator's row held, so that two administrators who step
 * down at the same moment cannot leave the workspace without one. Throws 404.
 */
export async function holdMembership(workspaceId: string, userId: string, transaction: Transaction) {
  const administrators = await Membership.findAll({
    where: { workspaceId, role: 'administrator' },
    order: [['id', 'ASC']],
    lock: transaction.LOCK.UPDATE,
    transaction
  });
  const membership = isUuid(userId)
    ? await Membership.findOne({ where: { workspaceId, userId }, lock: transaction.LOCK.UPDATE, transaction })
    : null;
  if (!membership) throw refusal('member.notFound');
  const isLast = membership.role === 'administrator' && administrators.length === 1;
  return { membership, isLast };
}

/** Gives a member another role. Throws 403/404 by policy, 404 for no member, 409 for the last administrator. */
export async function changeMemberRole(
  context: Context,
  input: { workspaceId: string; userId: string; role: WorkspaceRole }
): Promise<void> {
  const { workspaceId, userId, role } = input;
  authorize(context.actor, 'workspace.manageMembers', { kind: 'workspace', workspaceId });
  await withTransaction(async (transaction) => {
    const { membership, isLast } = await holdMembership(workspaceId, userId, transaction);
    const before = membership.role;
    if (before === role) return;
    if (isLast) throw refusal('member.last');
    await membership.update({ role }, { transaction });
    await recordAudit(context, transaction, {
      act: 'member.changeRole',
      subjectType: 'user',
      subjectId: userId,
      workspaceId,
      details: { role: { before, after: role } }
    });
  });
}
