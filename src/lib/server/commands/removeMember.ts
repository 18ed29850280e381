import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { withTransaction } from '../db/transaction';
import { refusal } from '../errors';
import { authorize } from '../policies/ability';
import { holdMembership } from './changeMemberRole';

/**
 * Takes a person out of the workspace. Their studies stay with it, and what is shared with them by name stays shared.
 * Throws 403/404 by policy, 404 for no member, 409 for the last administrator.
 */
export async function removeMember(context: Context, input: { workspaceId: string; userId: string }): Promise<void> {
  const { workspaceId, userId } = input;
  authorize(context.actor, 'workspace.manageMembers', { kind: 'workspace', workspaceId });
  await withTransaction(async (transaction) => {
    const { membership, isLast } = await holdMembership(workspaceId, userId, transaction);
    if (isLast) throw refusal('member.last');
    await membership.destroy({ transaction });
    await recordAudit(context, transaction, {
      act: 'member.remove',
      subjectType: 'user',
      subjectId: userId,
      workspaceId,
      details: { role: membership.role }
    });
  });
}
