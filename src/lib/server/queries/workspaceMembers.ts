import { Op } from 'sequelize';
import type { StudyRole, WorkspaceRole } from '$lib/contracts/people';
import type { Context } from '../context';
import { Invitation } from '../db/models/Invitation';
import { Membership } from '../db/models/Membership';
import { User } from '../db/models/User';
import { authorize } from '../policies/ability';

export interface MemberRow {
  userId: string;
  name: string;
  email: string;
  role: WorkspaceRole;
  joinedAt: string;
}
export interface InvitationRow {
  id: string;
  email: string;
  workspaceRole: WorkspaceRole | null;
  studyRole: StudyRole | null;
  invitedBy: string;
  expiresAt: string;
}

/** The members of a workspace by name, and the invitations that are still open. For those who manage members. */
export async function workspaceMembers(
  context: Context,
  workspaceId: string
): Promise<{ members: MemberRow[]; invitations: InvitationRow[] }> {
  authorize(context.actor, 'workspace.manageMembers', { kind: 'workspace', workspaceId });
  const person = ['id', 'name', 'email'];
  const [members, invitations] = await Promise.all([
    Membership.findAll({
      where: { workspaceId },
      include: [{ model: User, as: 'user', attributes: person }],
      order: [[{ model: User, as: 'user' }, 'name', 'ASC']]
    }),
    Invitation.findAll({
      where: { workspaceId, acceptedAt: null, withdrawnAt: null, expiresAt: { [Op.gt]: context.now() } },
      include: [{ model: User, as: 'invitedBy', attributes: person }],
      order: [['createdAt', 'DESC']]
    })
  ]);
  return {
    members: members.map(({ userId, role, createdAt, user }) => ({
      userId,
      role,
      name: user?.name ?? '',
      email: user?.email ?? '',
      joinedAt: createdAt.toISOString()
    })),
    invitations: invitations.map(({ id, email, workspaceRole, studyRole, expiresAt, invitedBy }) => ({
      id,
      email,
      workspaceRole,
      studyRole,
      invitedBy: invitedBy?.name ?? '',
      expiresAt: expiresAt.toISOString()
    }))
  };
}
