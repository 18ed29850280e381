/** Who acts, from where, in which request. Passed explicitly: commands know no request and no global. */
import { randomUUID } from 'node:crypto';
import type { StudyRole, WorkspaceRole } from '$lib/contracts/people';

export type { StudyRole, WorkspaceRole };

export interface ActorMembership {
  workspaceId: string;
  workspaceName: string;
  role: WorkspaceRole;
}

export interface Actor {
  userId: string;
  name: string;
  email: string;
  memberships: readonly ActorMembership[];
  /** How the person came in; 'system' is a seed or a command line acting as that person. */
  via: 'session' | 'token' | 'system';
  /** What a token may do; a session may do both. */
  scopes: readonly ('read' | 'write')[];
}

export interface Context {
  actor: Actor | null;
  requestId: string;
  ip: string;
  now(): Date;
}

/** A context outside any request: for the seed, the command line and tests. */
export function systemContext(actor: Actor | null = null, now: () => Date = () => new Date()): Context {
  return { actor, requestId: randomUUID(), ip: '', now };
}
