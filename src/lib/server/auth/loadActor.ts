import type { Transaction } from 'sequelize';
import type { Actor } from '../context';
import { Membership } from '../db/models/Membership';
import { User } from '../db/models/User';
import { Workspace } from '../db/models/Workspace';

/** A person as an actor, with their memberships as of now; null when there is no such person. */
export async function loadActor(
  userId: string,
  via: Actor['via'],
  scopes: Actor['scopes'] = ['read', 'write'],
  transaction?: Transaction
): Promise<Actor | null> {
  const user = await User.findByPk(userId, {
    attributes: ['id', 'name', 'email'],
    include: [
      { model: Membership, as: 'memberships', include: [{ model: Workspace, as: 'workspace', attributes: ['name'] }] }
    ],
    order: [[{ model: Membership, as: 'memberships' }, 'createdAt', 'ASC']],
    transaction
  });
  if (!user) return null;
  return {
    userId: user.id,
    name: user.name,
    email: user.email,
    memberships: (user.memberships ?? []).map(({ workspaceId, role, workspace }) => ({
      workspaceId,
      role,
      workspaceName: workspace?.name ?? ''
    })),
    via,
    scopes
  };
}
