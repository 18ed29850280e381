/** The one policy of the product: who may do what. Pure; the rows it speaks of are looked up by its callers. */
import type { Actor, StudyRole, WorkspaceRole } from '../context';
import { refusal, type AppError } from '../errors';

export const STUDY_ACTS = [
  'study.read',
  'study.edit',
  'study.duplicate',
  'study.archive',
  'study.restore',
  'study.delete',
  'study.share',
  'study.comment',
  'study.resolve',
  'study.export'
] as const;
export const WORKSPACE_ACTS = [
  'workspace.read',
  'workspace.manageMembers',
  'workspace.readAudit',
  'workspace.readMail',
  'study.list',
  'study.create'
] as const;
export const TOKEN_ACTS = ['token.manage'] as const;

export type StudyAct = (typeof STUDY_ACTS)[number];
export type WorkspaceAct = (typeof WORKSPACE_ACTS)[number];
export type TokenAct = (typeof TOKEN_ACTS)[number];
export type Act = StudyAct | WorkspaceAct | TokenAct;

export interface StudySubject {
  kind: 'study';
  workspaceId: string;
  ownerId: string;
  /** The study's shares, or at least those of the actor. */
  shares: readonly { userId: string; role: StudyRole }[];
  /** Who opened the thread in question; its opener may close it. */
  openerId?: string | null;
}
export interface WorkspaceSubject {
  kind: 'workspace';
  workspaceId: string;
}
/** The tokens and sign-ins of one person. */
export interface TokenSubject {
  kind: 'token';
  userId: string;
}
export type Subject = StudySubject | WorkspaceSubject | TokenSubject;

type Standing = 'administrator' | 'owner' | 'contributor' | 'reviewer' | 'observer' | 'colleague' | 'onlooker';

/** What each standing towards a study allows. A colleague is an ecologist, an onlooker an observer, of the study's workspace. */
const STUDY_ALLOWS: Record<Standing, readonly StudyAct[]> = {
  administrator: STUDY_ACTS.filter((act) => act !== 'study.duplicate'),
  owner: STUDY_ACTS.filter((act) => act !== 'study.duplicate'),
  contributor: ['study.read', 'study.edit', 'study.comment', 'study.resolve', 'study.export'],
  reviewer: ['study.read', 'study.comment', 'study.export'],
  observer: ['study.read', 'study.export'],
  colleague: ['study.read', 'study.comment', 'study.export'],
  onlooker: ['study.read', 'study.export']
};

const WORKSPACE_ALLOWS: Record<WorkspaceRole, readonly WorkspaceAct[]> = {
  administrator: WORKSPACE_ACTS,
  ecologist: ['workspace.read', 'study.list', 'study.create'],
  reviewer: ['workspace.read', 'study.list'],
  observer: ['workspace.read', 'study.list']
};

/** Acts that a token with the scope `read` may do. */
const READING: readonly Act[] = [
  'study.read',
  'study.export',
  'study.list',
  'workspace.read',
  'workspace.readAudit',
  'workspace.readMail'
];

function roleIn(actor: Actor, workspaceId: string): WorkspaceRole | null {
  return actor.memberships.find((membership) => membership.workspaceId === workspaceId)?.role ?? null;
}

/** Every standing the actor has towards a study; they add up. */
function standings(actor: Actor, study: StudySubject): Standing[] {
  const found: Standing[] = study.shares.filter((share) => share.userId === actor.userId).map((share) => share.role);
  const role = roleIn(actor, study.workspaceId);
  // Somebody who has left the workspace no longer owns what they left there.
  if (role !== null && study.ownerId === actor.userId) found.push('owner');
  if (role === 'administrator') found.push('administrator');
  if (role === 'ecologist') found.push('colleague');
  if (role === 'observer') found.push('onlooker');
  return found;
}

function canStudy(actor: Actor, act: StudyAct, study: StudySubject): boolean {
  const allows = (wanted: StudyAct) => standings(actor, study).some((s) => STUDY_ALLOWS[s].includes(wanted));
  if (act === 'study.duplicate') {
    return allows('study.read') && can(actor, 'study.create', { kind: 'workspace', workspaceId: study.workspaceId });
  }
  if (act === 'study.resolve' && study.openerId === actor.userId) return allows('study.comment');
  return allows(act);
}

/** Whether the actor may do the act to the subject. An act that does not belong to the subject's kind is never allowed. */
export function can(actor: Actor | null, act: Act, subject: Subject): boolean {
  if (!actor) return false;
  if (!actor.scopes.includes(READING.includes(act) ? 'read' : 'write')) return false;
  switch (subject.kind) {
    case 'study':
      return includes(STUDY_ACTS, act) && canStudy(actor, act, subject);
    case 'workspace': {
      const role = roleIn(actor, subject.workspaceId);
      return role !== null && includes(WORKSPACE_ACTS, act) && WORKSPACE_ALLOWS[role].includes(act);
    }
    case 'token':
      // A token must not be able to outlive itself by making another.
      return act === 'token.manage' && actor.via !== 'token' && actor.userId === subject.userId;
  }
}

function includes<T extends string>(list: readonly T[], value: string): value is T {
  return (list as readonly string[]).includes(value);
}

function refusalOf(actor: Actor, act: Act, subject: Subject): AppError {
  if (subject.kind === 'token') return refusal('token.notFound');
  const read = subject.kind === 'study' ? 'study.read' : 'workspace.read';
  const notFound = subject.kind === 'study' ? 'study.notFound' : 'workspace.notFound';
  const asPerson: Actor = { ...actor, scopes: ['read', 'write'] };
  if (!can(actor, read, subject)) return refusal(notFound);
  return refusal(can(asPerson, act, subject) ? 'auth.scope' : 'policy.forbidden');
}

/**
 * Throws unless the actor may do the act: 401 when nobody is signed in, 404 when the subject may not even be read,
 * 403 otherwise. Returns the actor, now known not to be null.
 */
export function authorize(actor: Actor | null, act: Act, subject: Subject): Actor {
  if (!actor) throw refusal('auth.required');
  if (!can(actor, act, subject)) throw refusalOf(actor, act, subject);
  return actor;
}

/** Throws 401 unless somebody is signed in, and returns them. */
export function requireActor(actor: Actor | null): Actor {
  if (!actor) throw refusal('auth.required');
  return actor;
}

/** Every act the actor may do to the subject, for a screen to show or hide its buttons by. */
export function abilitiesOf(actor: Actor | null, subject: StudySubject): StudyAct[];
export function abilitiesOf(actor: Actor | null, subject: WorkspaceSubject): WorkspaceAct[];
export function abilitiesOf(actor: Actor | null, subject: StudySubject | WorkspaceSubject): Act[] {
  const acts: readonly Act[] = subject.kind === 'study' ? STUDY_ACTS : WORKSPACE_ACTS;
  return acts.filter((act) => can(actor, act, subject));
}

/**
 * Which studies a list may hold: all of `workspaceIds`, those the actor owns in `ownWorkspaceIds`, and those shared
 * with them. The same rule as `study.read`, in the form a query needs.
 */
export function readableStudies(actor: Actor): { workspaceIds: string[]; ownWorkspaceIds: string[]; userId: string } {
  const ids = (roles: WorkspaceRole[]) =>
    actor.memberships
      .filter((membership) => roles.includes(membership.role))
      .map((membership) => membership.workspaceId);
  return {
    workspaceIds: ids(['administrator', 'ecologist', 'observer']),
    ownWorkspaceIds: ids(['reviewer']),
    userId: actor.userId
  };
}
