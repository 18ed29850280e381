import type { WorkspaceRole } from '$lib/contracts/people';
import { countTry } from '../api/rateLimit';
import type { Context } from '../context';
import { Membership } from '../db/models/Membership';
import { User } from '../db/models/User';
import { withTransaction } from '../db/transaction';
import { invalid } from '../errors';
import { authorize, requireActor } from '../policies/ability';
import { inviteByEmail } from './inviteByEmail';

/** An administrator invites somebody into the workspace. Throws 403/404 by policy, 422 on `email` for a member. */
export async function inviteMember(
  context: Context,
  input: { workspaceId: string; email: string; role: WorkspaceRole }
): Promise<void> {
  const { workspaceId, email, role } = input;
  authorize(context.actor, 'workspace.manageMembers', { kind: 'workspace', workspaceId });
  const user = await User.findOne({ where: { email } });
  if (user && (await Membership.count({ where: { workspaceId, userId: user.id } })) > 0) {
    throw invalid('email', 'This person is a member already; change the role in the list below.');
  }
  await countTry('invitation', requireActor(context.actor).userId);
  await withTransaction((transaction) =>
    inviteByEmail(context, transaction, { email, workspaceId, workspaceRole: role })
  );
}
