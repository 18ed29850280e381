/** People for tests, each as the context that commands want. */
import { randomBytes } from 'node:crypto';
import { loadActor } from '$lib/server/auth/loadActor';
import { newToken } from '$lib/server/auth/tokens';
import { systemContext, type Context, type WorkspaceRole } from '$lib/server/context';
import { ApiToken } from '$lib/server/db/models/ApiToken';
import { Membership } from '$lib/server/db/models/Membership';
import { User } from '$lib/server/db/models/User';
import { Workspace } from '$lib/server/db/models/Workspace';

export interface Someone {
  userId: string;
  email: string;
  context: Context;
}

export async function buildWorkspace(name = 'Test agency'): Promise<string> {
  return (await Workspace.create({ name })).id;
}

/** Somebody with a role in a workspace, or in none. The password is never asked for, so it is none. */
export async function buildSomeone(place: { workspaceId: string; role: WorkspaceRole } | null): Promise<Someone> {
  const email = `p${randomBytes(6).toString('hex')}@agency.example`;
  const user = await User.create({ email, name: place ? `Test ${place.role}` : 'Test outsider', passwordHash: '-' });
  if (place) await Membership.create({ ...place, userId: user.id });
  const actor = await loadActor(user.id, 'session');
  return { userId: user.id, email, context: systemContext(actor) };
}

/** A bearer token of a person, good for an hour. */
export async function buildToken(userId: string, scopes: ('read' | 'write')[] = ['read', 'write']): Promise<string> {
  const { secret, tokenHash, last4 } = newToken();
  await ApiToken.create({
    userId,
    name: 'test',
    tokenHash,
    last4,
    scopes,
    expiresAt: new Date(Date.now() + 3_600_000)
  });
  return secret;
}

/** One person for each standing towards a study of `owner`, in one workspace; `outsider` is in another. */
export async function buildTeam() {
  const workspaceId = await buildWorkspace();
  const elsewhere = await buildWorkspace('Another agency');
  const [owner, administrator, colleague, reviewer, observer, outsider, nobody] = await Promise.all([
    buildSomeone({ workspaceId, role: 'ecologist' }),
    buildSomeone({ workspaceId, role: 'administrator' }),
    buildSomeone({ workspaceId, role: 'ecologist' }),
    buildSomeone({ workspaceId, role: 'reviewer' }),
    buildSomeone({ workspaceId, role: 'observer' }),
    buildSomeone({ workspaceId: elsewhere, role: 'ecologist' }),
    buildSomeone(null)
  ]);
  return { workspaceId, owner, administrator, colleague, reviewer, observer, outsider, nobody };
}
export type Team = Awaited<ReturnType<typeof buildTeam>>;
