import { describe, expect, it } from 'vitest';
import { WORKSPACE_ROLES, type StudyRole, type WorkspaceRole } from '$lib/contracts/people';
import type { Actor } from '../context';
import { AppError } from '../errors';
import {
  abilitiesOf,
  authorize,
  can,
  readableStudies,
  STUDY_ACTS,
  WORKSPACE_ACTS,
  type StudyAct,
  type StudySubject,
  type WorkspaceAct
} from './ability';

const HERE = 'workspace-here';
const ELSEWHERE = 'workspace-elsewhere';
const ME = 'person-me';

function person(role: WorkspaceRole | null, part: Partial<Actor> = {}): Actor {
  const memberships = role ? [{ workspaceId: HERE, workspaceName: 'Here', role }] : [];
  return {
    userId: ME,
    name: 'Me',
    email: 'me@here.example',
    memberships,
    via: 'session',
    scopes: ['read', 'write'],
    ...part
  };
}

function study(part: Partial<StudySubject> = {}): StudySubject {
  return { kind: 'study', workspaceId: HERE, ownerId: 'somebody', shares: [], ...part };
}

const shared = (role: StudyRole) => study({ shares: [{ userId: ME, role }] });
const owned = study({ ownerId: ME });

/** Each row: who, towards which study, and the acts they may do, written out rather than computed. */
const READ_EXPORT: StudyAct[] = ['study.read', 'study.export'];
const READ_COMMENT: StudyAct[] = ['study.read', 'study.comment', 'study.export'];
const CONTRIBUTE: StudyAct[] = ['study.read', 'study.edit', 'study.comment', 'study.resolve', 'study.export'];
const KEEP: StudyAct[] = [...CONTRIBUTE, 'study.archive', 'study.restore', 'study.delete', 'study.share'];
const EVERYTHING: StudyAct[] = [...KEEP, 'study.duplicate'];
const andDuplicate = (acts: StudyAct[]): StudyAct[] => [...acts, 'study.duplicate'];

const STUDIES: [string, Actor | null, StudySubject, StudyAct[]][] = [
  ['nobody, a study', null, study(), []],
  ['a stranger, a study', person(null), study(), []],
  ['a stranger with the study shared as contributor', person(null), shared('contributor'), CONTRIBUTE],
  ['a stranger with the study shared as reviewer', person(null), shared('reviewer'), READ_COMMENT],
  ['a stranger with the study shared as observer', person(null), shared('observer'), READ_EXPORT],
  ['a former member, the study they once owned', person(null), owned, []],
  ['an administrator, a study', person('administrator'), study(), EVERYTHING],
  ['an administrator with the study shared as observer', person('administrator'), shared('observer'), EVERYTHING],
  ['an administrator, a study of another workspace', person('administrator'), study({ workspaceId: ELSEWHERE }), []],
  ['an ecologist, a colleague’s study', person('ecologist'), study(), andDuplicate(READ_COMMENT)],
  ['an ecologist, their own study', person('ecologist'), owned, EVERYTHING],
  [
    'an ecologist with the study shared as contributor',
    person('ecologist'),
    shared('contributor'),
    andDuplicate(CONTRIBUTE)
  ],
  [
    'an ecologist with the study shared as reviewer',
    person('ecologist'),
    shared('reviewer'),
    andDuplicate(READ_COMMENT)
  ],
  [
    'an ecologist with the study shared as observer',
    person('ecologist'),
    shared('observer'),
    andDuplicate(READ_COMMENT)
  ],
  ['an ecologist, a study of another workspace', person('ecologist'), study({ workspaceId: ELSEWHERE }), []],
  ['a reviewer, a study not shared with them', person('reviewer'), study(), []],
  ['a reviewer with the study shared as reviewer', person('reviewer'), shared('reviewer'), READ_COMMENT],
  ['a reviewer with the study shared as contributor', person('reviewer'), shared('contributor'), CONTRIBUTE],
  ['a reviewer with the study shared as observer', person('reviewer'), shared('observer'), READ_EXPORT],
  ['a reviewer, a study they own', person('reviewer'), owned, KEEP],
  ['an observer, a study', person('observer'), study(), READ_EXPORT],
  ['an observer with the study shared as reviewer', person('observer'), shared('reviewer'), READ_COMMENT],
  ['an observer with the study shared as contributor', person('observer'), shared('contributor'), CONTRIBUTE],
  [
    'an observer, a study shared with somebody else',
    person('observer'),
    study({ shares: [{ userId: 'x', role: 'contributor' }] }),
    READ_EXPORT
  ]
];

const WORKSPACES: Record<WorkspaceRole, WorkspaceAct[]> = {
  administrator: [
    'workspace.read',
    'workspace.manageMembers',
    'workspace.readAudit',
    'workspace.readMail',
    'study.list',
    'study.create'
  ],
  ecologist: ['workspace.read', 'study.list', 'study.create'],
  reviewer: ['workspace.read', 'study.list'],
  observer: ['workspace.read', 'study.list']
};

function thrownBy(fn: () => unknown): AppError {
  try {
    fn();
  } catch (error) {
    if (error instanceof AppError) return error;
    throw error;
  }
  throw new Error('nothing was thrown');
}

describe.each(STUDIES)('%s', (_who, actor, subject, allowed) => {
  it.each(STUDY_ACTS)('%s', (act) => {
    const may = allowed.includes(act);
    expect(can(actor, act, subject)).toBe(may);
    if (may) return expect(authorize(actor, act, subject)).toBe(actor);
    const status = actor === null ? 401 : allowed.includes('study.read') ? 403 : 404;
    expect(thrownBy(() => authorize(actor, act, subject)).status).toBe(status);
  });

  it('lists the same acts for the screen', () => {
    expect([...abilitiesOf(actor, subject)].sort()).toEqual([...allowed].sort());
  });
});

describe.each(WORKSPACE_ROLES)('a workspace’s %s', (role) => {
  it.each(WORKSPACE_ACTS)('%s', (act) => {
    const may = WORKSPACES[role].includes(act);
    expect(can(person(role), act, { kind: 'workspace', workspaceId: HERE })).toBe(may);
    if (!may)
      expect(thrownBy(() => authorize(person(role), act, { kind: 'workspace', workspaceId: HERE })).status).toBe(403);
  });

  it('finds no other workspace', () => {
    const refused = thrownBy(() =>
      authorize(person(role), 'workspace.read', { kind: 'workspace', workspaceId: ELSEWHERE })
    );
    expect(refused.code).toBe('workspace.notFound');
  });
});

describe('acts and subjects', () => {
  it('lets nobody do a study’s act to a workspace, or the other way round', () => {
    const admin = person('administrator');
    expect(can(admin, 'study.edit', { kind: 'workspace', workspaceId: HERE })).toBe(false);
    expect(can(admin, 'workspace.manageMembers', study())).toBe(false);
    expect(can(admin, 'token.manage', study())).toBe(false);
  });

  it('lets the opener of a thread close it, as long as they may comment', () => {
    expect(can(person('reviewer'), 'study.resolve', { ...shared('reviewer'), openerId: ME })).toBe(true);
    expect(can(person('reviewer'), 'study.resolve', { ...shared('reviewer'), openerId: 'somebody' })).toBe(false);
    expect(can(person('observer'), 'study.resolve', { ...shared('observer'), openerId: ME })).toBe(false);
  });
});

describe('tokens', () => {
  it('are managed by their owner, signed in', () => {
    expect(can(person('ecologist'), 'token.manage', { kind: 'token', userId: ME })).toBe(true);
    expect(can(person('administrator'), 'token.manage', { kind: 'token', userId: 'somebody' })).toBe(false);
    expect(can(person('ecologist', { via: 'token' }), 'token.manage', { kind: 'token', userId: ME })).toBe(false);
  });

  it('that may only read do none of the acts that change something', () => {
    const reader = person('administrator', { via: 'token', scopes: ['read'] });
    expect(abilitiesOf(reader, study())).toEqual(['study.read', 'study.export']);
    expect(thrownBy(() => authorize(reader, 'study.edit', study())).code).toBe('auth.scope');
    expect(thrownBy(() => authorize(person('observer', { scopes: ['read'] }), 'study.edit', study())).code).toBe(
      'policy.forbidden'
    );
  });
});

describe('the list of studies', () => {
  const cases: [WorkspaceRole, StudySubject, boolean][] = WORKSPACE_ROLES.flatMap((role) => [
    [role, study(), role !== 'reviewer'],
    [role, owned, true],
    [role, shared('observer'), true],
    [role, study({ workspaceId: ELSEWHERE }), false]
  ]);

  it.each(cases)('agrees with study.read for %s, %o', (role, subject, readable) => {
    const actor = person(role);
    const scope = readableStudies(actor);
    const listed =
      scope.workspaceIds.includes(subject.workspaceId) ||
      (scope.ownWorkspaceIds.includes(subject.workspaceId) && subject.ownerId === scope.userId) ||
      subject.shares.some((share) => share.userId === scope.userId);
    expect(listed).toBe(readable);
    expect(can(actor, 'study.read', subject)).toBe(readable);
  });
});
