/** People for tests: each call makes everything it needs, under names nobody else has. */
import { randomUUID } from 'node:crypto';
import type { TokenScope, WorkspaceRole } from '$lib/contracts/people';
import { loadActor } from '$lib/server/auth/loadActor';
import { hashPassword } from '$lib/server/auth/passwords';
import { startSession } from '$lib/server/auth/sessions';
import { mintToken } from '$lib/server/commands/mintToken';
import { systemContext, type Actor, type Context } from '$lib/server/context';
import { Membership } from '$lib/server/db/models/Membership';
import { User } from '$lib/server/db/models/User';
import { Workspace } from '$lib/server/db/models/Workspace';

export const PASSWORD = 'reed and water and wind';
let passwordHash: Promise<string> | null = null;

/** A person; the password is PASSWORD. */
export async function buildUser(part: { email?: string; name?: string } = {}): Promise<User> {
  passwordHash ??= hashPassword(PASSWORD);
  const id = randomUUID().slice(0, 8);
  return User.create({
    email: `person-${id}@agency.example`,
    name: `Person ${id}`,
    passwordHash: await passwordHash,
    ...part
  });
}

/** A workspace without members. */
export function buildWorkspace(part: { name?: string } = {}): Promise<Workspace> {
  return Workspace.create({ name: `Workspace ${randomUUID().slice(0, 8)}`, ...part });
}

/** A membership, with the person and the workspace it needs where they are not given. */
export async function buildMembership(
  part: { userId?: string; workspaceId?: string; role?: WorkspaceRole } = {}
): Promise<Membership> {
  const userId = part.userId ?? (await buildUser()).id;
  const workspaceId = part.workspaceId ?? (await buildWorkspace()).id;
  return Membership.create({ userId, workspaceId, role: part.role ?? 'ecologist' });
}

/** A person as an actor, as of now. */
export async function actorOf(userId: string, via: Actor['via'] = 'session', scopes?: Actor['scopes']): Promise<Actor> {
  return (await loadActor(userId, via, scopes))!;
}

/** A context in which the person acts. */
export async function contextFor(userId: string | null, now?: () => Date): Promise<Context> {
  return { ...systemContext(userId === null ? null : await actorOf(userId), now), ip: '192.0.2.1' };
}

/** A new person with that role in the workspace (a new one unless given), and the context in which they act. */
export async function buildMember(
  role: WorkspaceRole,
  workspaceId?: string
): Promise<{ user: User; workspaceId: string; context: Context }> {
  const user = await buildUser();
  const membership = await buildMembership({ userId: user.id, role, ...(workspaceId ? { workspaceId } : {}) });
  return { user, workspaceId: membership.workspaceId, context: await contextFor(user.id) };
}

/** The `name=value` cookie of a new session of the person. */
export async function cookieOf(userId: string): Promise<string> {
  const { name, value } = await startSession(userId, { ip: '192.0.2.1', userAgent: 'test' });
  return `${name}=${value}`;
}

/** The secret of a new API token of the person. */
export async function tokenOf(userId: string, scope: TokenScope = 'write'): Promise<string> {
  const { secret } = await mintToken(await contextFor(userId), { name: 'test', scope, days: 1 });
  return secret;
}
