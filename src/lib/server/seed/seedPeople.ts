/** The people of the demo: an invented agency, one person for each role, one password. */
import type { WorkspaceRole } from '$lib/contracts/people';
import { recordAudit } from '../audit/record';
import { hashPassword } from '../auth/passwords';
import { loadActor } from '../auth/loadActor';
import { systemContext, type Actor } from '../context';
import { Membership } from '../db/models/Membership';
import { User } from '../db/models/User';
import { Workspace } from '../db/models/Workspace';
import { withTransaction } from '../db/transaction';

export const DEMO_WORKSPACE = 'Quillmere Levels';
export const DEMO_PASSWORD = 'reed-and-water-2026';
export const DEMO_ROLES: readonly WorkspaceRole[] = ['administrator', 'ecologist', 'reviewer', 'observer'];

export const demoEmail = (role: WorkspaceRole): string => `${role}@quillmere.example`;

export interface DemoPeople {
  workspaceId: string;
  /** Each person as an actor, so that commands can be called in their name. */
  actors: Record<WorkspaceRole, Actor>;
}

/** Makes the demo's people where they are missing, leaves those that are there as they are, and returns them. */
export async function seedPeople(): Promise<DemoPeople> {
  const context = systemContext();
  const ids = await withTransaction(async (transaction) => {
    const found = await User.findOne({ where: { email: demoEmail('administrator') }, transaction });
    const membership =
      found && (await Membership.findOne({ where: { userId: found.id }, order: [['createdAt', 'ASC']], transaction }));
    const workspaceId =
      membership?.workspaceId ?? (await Workspace.create({ name: DEMO_WORKSPACE }, { transaction })).id;
    const userIds = new Map<WorkspaceRole, string>();
    for (const role of DEMO_ROLES) {
      const known = await User.findOne({ where: { email: demoEmail(role) }, transaction });
      const user =
        known ??
        (await User.create(
          { email: demoEmail(role), name: `Quillmere ${role}`, passwordHash: await hashPassword(DEMO_PASSWORD) },
          { transaction }
        ));
      userIds.set(role, user.id);
      if (known) continue;
      await Membership.create({ workspaceId, userId: user.id, role }, { transaction });
      await recordAudit(context, transaction, {
        act: 'member.join',
        subjectType: 'user',
        subjectId: user.id,
        workspaceId,
        details: { email: user.email, role }
      });
    }
    return { workspaceId, userIds };
  });

  const actorOf = async (role: WorkspaceRole): Promise<Actor> => {
    const actor = await loadActor(ids.userIds.get(role) ?? '', 'system');
    if (!actor) throw new Error(`The demo's ${role} could not be read back.`);
    return actor;
  };
  return {
    workspaceId: ids.workspaceId,
    actors: {
      administrator: await actorOf('administrator'),
      ecologist: await actorOf('ecologist'),
      reviewer: await actorOf('reviewer'),
      observer: await actorOf('observer')
    }
  };
}
