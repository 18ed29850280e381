import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
  actorOf,
  buildMember,
  buildMembership,
  buildUser,
  contextFor,
  cookieOf,
  PASSWORD
} from '../../../../tests/harness/factories/people';
import { resolveSession } from '../auth/sessions';
import { configure } from '../config';
import { systemContext, type Context } from '../context';
import { sequelize } from '../db/connection';
import { AuditEvent } from '../db/models/AuditEvent';
import { Invitation } from '../db/models/Invitation';
import { MailMessage } from '../db/models/MailMessage';
import { Membership } from '../db/models/Membership';
import { PasswordReset } from '../db/models/PasswordReset';
import { Session } from '../db/models/Session';
import { User } from '../db/models/User';
import { withTransaction } from '../db/transaction';
import { AppError, type ErrorCode } from '../errors';
import { startMailbox, stopMailbox } from '../mail/mailbox';
import { recordAudit } from '../audit/record';
import { auditTrail } from '../queries/auditTrail';
import { keptMail } from '../queries/keptMail';
import { openInvitation } from '../queries/openInvitation';
import { ownSessions } from '../queries/ownSessions';
import { ownTokens } from '../queries/ownTokens';
import { workspaceMembers } from '../queries/workspaceMembers';
import { acceptInvitation } from './acceptInvitation';
import { changeMemberRole } from './changeMemberRole';
import { changePassword } from './changePassword';
import { endOwnSession } from './endOwnSession';
import { inviteByEmail } from './inviteByEmail';
import { inviteMember } from './inviteMember';
import { mintToken } from './mintToken';
import { removeMember } from './removeMember';
import { requestPasswordReset } from './requestPasswordReset';
import { openReset, resetPassword } from './resetPassword';
import { revokeToken } from './revokeToken';
import { signIn } from './signIn';
import { withdrawInvitation } from './withdrawInvitation';

const HOUR_MS = 3_600_000;
const NEW_PASSWORD = 'sedge and sphagnum moss';

beforeAll(async () => {
  configure({ smtpUrl: null });
  await startMailbox();
});
afterAll(stopMailbox);

async function refused(work: Promise<unknown>): Promise<AppError> {
  const error = await work.then(
    () => null,
    (thrown: unknown) => thrown
  );
  expect(error).toBeInstanceOf(AppError);
  return error as AppError;
}
const codeOf = async (work: Promise<unknown>): Promise<ErrorCode> => (await refused(work)).code;
const acts = async (subjectId: string) =>
  (await AuditEvent.findAll({ where: { subjectId }, order: [['id', 'ASC']] })).map((row) => row.act);
const later = (context: Context, ms: number): Context => ({ ...context, now: () => new Date(Date.now() + ms) });
const mailTo = (recipient: string) => MailMessage.findAll({ where: { recipient }, order: [['receivedAt', 'DESC']] });

/** The secret in the newest message's link. */
async function linkTo(recipient: string, path: string): Promise<string> {
  const [message] = await mailTo(recipient);
  return new RegExp(`/${path}/(\\S+)`).exec(message?.text ?? '')?.[1] ?? '';
}

const tryToSignIn = (email: string, password: string, ip: string) =>
  signIn({ ...systemContext(), ip }, { email, password, userAgent: 'Firefox/140' });

describe('signing in', () => {
  it('says the same of a wrong password and of an unknown address, and starts no session', async () => {
    const user = await buildUser();
    const wrong = await refused(tryToSignIn(user.email, 'not this one', '192.0.2.10'));
    const unknown = await refused(tryToSignIn('nobody@agency.example', PASSWORD, '192.0.2.10'));
    expect([wrong.code, wrong.status, wrong.message]).toEqual([unknown.code, unknown.status, unknown.message]);
    expect(await Session.count({ where: { userId: user.id } })).toBe(0);
  });

  it('stops after five tries of one address at one account, even with the right password', async () => {
    const user = await buildUser();
    for (let i = 0; i < 5; i += 1)
      expect(await codeOf(tryToSignIn(user.email, 'no', '192.0.2.11'))).toBe('auth.wrongCredentials');
    const error = await refused(tryToSignIn(user.email, PASSWORD, '192.0.2.11'));
    expect(error.status).toBe(429);
    expect(error.retryAfterSeconds).toBeGreaterThan(800);
    await expect(tryToSignIn(user.email, PASSWORD, '192.0.2.12')).resolves.toBeDefined();
  });

  it('forgets the tries of somebody who got in', async () => {
    const user = await buildUser();
    for (let i = 0; i < 4; i += 1) await refused(tryToSignIn(user.email, 'no', '192.0.2.13'));
    await tryToSignIn(user.email, PASSWORD, '192.0.2.13');
    for (let i = 0; i < 4; i += 1)
      expect(await codeOf(tryToSignIn(user.email, 'no', '192.0.2.13'))).toBe('auth.wrongCredentials');
  });

  it('gives a cookie that is known again and of which only a hash is kept', async () => {
    const user = await buildUser();
    const cookie = await tryToSignIn(user.email, PASSWORD, '192.0.2.14');
    expect(cookie.attributes).toMatchObject({ path: '/', httpOnly: true, sameSite: 'lax' });
    expect((await resolveSession(cookie.value))?.actor.userId).toBe(user.id);
    expect(await resolveSession(`${cookie.value}x`)).toBeNull();
    const [row] = await Session.findAll({ where: { userId: user.id } });
    expect(row?.id).not.toContain(cookie.value);
    expect(await acts(user.id)).toEqual(['session.start']);
  });
});

describe('one’s own sessions', () => {
  it('can be ended, one’s own and nobody else’s', async () => {
    const [mine, other] = [await buildUser(), await buildUser()];
    const here = (await cookieOf(mine.id)).split('=')[1]!;
    await cookieOf(mine.id);
    await cookieOf(other.id);
    const context = await contextFor(mine.id);
    const theirs = await ownSessions(await contextFor(other.id), null);
    expect(await codeOf(endOwnSession(context, theirs[0]!.id))).toBe('session.notFound');
    expect(await codeOf(endOwnSession(await contextFor(null), theirs[0]!.id))).toBe('auth.required');
    const sessions = await ownSessions(context, here);
    expect(sessions.map((session) => session.isThis).sort()).toEqual([false, true]);
    await endOwnSession(context, sessions.find((session) => !session.isThis)!.id);
    expect(await Session.count({ where: { userId: mine.id } })).toBe(1);
    expect(await Session.count({ where: { userId: other.id } })).toBe(1);
    expect(await resolveSession(here)).not.toBeNull();
  });
});

describe('a forgotten password', () => {
  it('sends nothing to an address without an account, and does not say so', async () => {
    const { delivery } = await requestPasswordReset(systemContext(), 'nobody-at-all@agency.example');
    await delivery;
    expect(await mailTo('nobody-at-all@agency.example')).toHaveLength(0);
  });

  it('is set anew once, within the hour, and every browser is signed out', async () => {
    const user = await buildUser();
    const context = { ...systemContext(), ip: '192.0.2.20' };
    await cookieOf(user.id);
    await (
      await requestPasswordReset(context, user.email)
    ).delivery;
    const token = await linkTo(user.email, 'reset');
    expect(token).toHaveLength(43);
    expect((await PasswordReset.findOne({ where: { userId: user.id } }))?.tokenHash).not.toBe(token);

    expect(await codeOf(resetPassword(context, 'x'.repeat(43), NEW_PASSWORD))).toBe('reset.notFound');
    expect(await codeOf(resetPassword(later(context, HOUR_MS + 1000), token, NEW_PASSWORD))).toBe('reset.notFound');
    const weak = await refused(resetPassword(context, token, user.email));
    expect(weak.issues[0]?.path).toBe('password');
    const before = (await user.reload()).passwordHash;
    expect(await Session.count({ where: { userId: user.id } })).toBe(1);

    expect(await openReset(context, token)).toEqual({ email: user.email });
    await resetPassword(context, token, NEW_PASSWORD);
    expect((await user.reload()).passwordHash).not.toBe(before);
    expect(await Session.count({ where: { userId: user.id } })).toBe(0);
    expect(await codeOf(resetPassword(context, token, PASSWORD))).toBe('reset.notFound');
    await expect(tryToSignIn(user.email, NEW_PASSWORD, '192.0.2.21')).resolves.toBeDefined();
    expect(await acts(user.id)).toEqual(['password.askReset', 'password.reset', 'session.start']);
    expect((await mailTo(user.email)).map((mail) => mail.subject)).toContain('Your password was changed');
  });
});

describe('changing one’s password', () => {
  it('needs the present one, refuses a weak one, and keeps this browser alone', async () => {
    const user = await buildUser();
    const here = (await cookieOf(user.id)).split('=')[1]!;
    await cookieOf(user.id);
    const context = await contextFor(user.id);
    const change = (currentPassword: string, password: string) =>
      changePassword(context, { currentPassword, password, sessionId: here });
    expect((await refused(change('not this', NEW_PASSWORD))).issues[0]?.path).toBe('currentPassword');
    expect((await refused(change(PASSWORD, 'password1234'))).issues[0]?.path).toBe('password');
    expect(await Session.count({ where: { userId: user.id } })).toBe(2);
    await change(PASSWORD, NEW_PASSWORD);
    expect(await Session.count({ where: { userId: user.id } })).toBe(1);
    expect(await resolveSession(here)).not.toBeNull();
  });
});

describe('a workspace invitation', () => {
  it.each(['ecologist', 'reviewer', 'observer'] as const)('is not sent by its %s', async (role) => {
    const { context, workspaceId } = await buildMember(role);
    const before = await Invitation.count();
    expect((await refused(inviteMember(context, { workspaceId, email: 'a@b.example', role: 'observer' }))).status).toBe(
      403
    );
    expect(await Invitation.count()).toBe(before);
  });

  it('is not sent by a stranger, who learns of no workspace, nor by nobody', async () => {
    const { workspaceId } = await buildMember('administrator');
    const stranger = await contextFor((await buildUser()).id);
    const invite = (context: Context) => inviteMember(context, { workspaceId, email: 'a@b.example', role: 'observer' });
    expect((await refused(invite(stranger))).status).toBe(404);
    expect((await refused(invite(systemContext()))).status).toBe(401);
    expect(await Invitation.count({ where: { workspaceId } })).toBe(0);
  });

  it('names the field when the person is a member already', async () => {
    const { context, workspaceId, user } = await buildMember('administrator');
    const error = await refused(inviteMember(context, { workspaceId, email: user.email, role: 'observer' }));
    expect([error.status, error.issues[0]?.path]).toEqual([422, 'email']);
  });

  it('lets somebody new in, with name and password, once', async () => {
    const { context, workspaceId } = await buildMember('administrator');
    const email = 'newcomer@agency.example';
    await inviteMember(context, { workspaceId, email, role: 'observer' });
    const first = await linkTo(email, 'invitations');
    await inviteMember(context, { workspaceId, email, role: 'reviewer' });
    const token = await linkTo(email, 'invitations');
    const nobody = systemContext();

    expect(await codeOf(acceptInvitation(nobody, first, { name: 'New', password: NEW_PASSWORD }))).toBe(
      'invitation.notFound'
    );
    const expired = later(nobody, 15 * 24 * HOUR_MS);
    expect(await codeOf(acceptInvitation(expired, token, { name: 'New', password: NEW_PASSWORD }))).toBe(
      'invitation.notFound'
    );
    expect((await refused(acceptInvitation(nobody, token, { name: 'New', password: 'short' }))).issues[0]?.path).toBe(
      'password'
    );
    expect(await User.count({ where: { email } })).toBe(0);

    expect(await openInvitation(nobody, token)).toMatchObject({ email, step: 'join', workspaceRole: 'reviewer' });
    const { userId, path } = await acceptInvitation(nobody, token, { name: 'New', password: NEW_PASSWORD });
    expect(path).toBe('/studies');
    expect((await actorOf(userId)).memberships).toMatchObject([{ workspaceId, role: 'reviewer' }]);
    expect(await codeOf(acceptInvitation(nobody, token, { name: 'New', password: NEW_PASSWORD }))).toBe(
      'invitation.notFound'
    );
    expect(await acts(userId)).toEqual(['member.join']);
  });

  it('asks somebody who has an account to sign in, and lets nobody else accept', async () => {
    const { context, workspaceId } = await buildMember('administrator');
    const [invited, other] = [await buildUser(), await buildUser()];
    await inviteMember(context, { workspaceId, email: invited.email, role: 'ecologist' });
    const token = await linkTo(invited.email, 'invitations');
    expect(await codeOf(acceptInvitation(systemContext(), token, { name: 'X', password: NEW_PASSWORD }))).toBe(
      'invitation.signInFirst'
    );
    expect((await refused(acceptInvitation(await contextFor(other.id), token, null))).status).toBe(403);
    expect(await Membership.count({ where: { workspaceId } })).toBe(1);
    await acceptInvitation(await contextFor(invited.id), token, null);
    expect(await Membership.count({ where: { workspaceId, userId: invited.id, role: 'ecologist' } })).toBe(1);
  });

  it('can be withdrawn by an administrator of the same workspace alone', async () => {
    const { context, workspaceId } = await buildMember('administrator');
    const elsewhere = await buildMember('administrator');
    const email = 'withdrawn@agency.example';
    await inviteMember(context, { workspaceId, email, role: 'observer' });
    const token = await linkTo(email, 'invitations');
    const [row] = (await workspaceMembers(context, workspaceId)).invitations;
    expect(await codeOf(withdrawInvitation(elsewhere.context, elsewhere.workspaceId, row!.id))).toBe(
      'invitation.notFound'
    );
    expect(await codeOf(withdrawInvitation(context, workspaceId, 'no-uuid'))).toBe('invitation.notFound');
    await withdrawInvitation(context, workspaceId, row!.id);
    expect(await codeOf(acceptInvitation(systemContext(), token, { name: 'X', password: NEW_PASSWORD }))).toBe(
      'invitation.notFound'
    );
  });

  it('leaves no row behind when the mail is not taken', async () => {
    const { context, workspaceId } = await buildMember('administrator');
    configure({ smtpUrl: 'smtp://127.0.0.1:9' });
    const error = await refused(inviteMember(context, { workspaceId, email: 'lost@agency.example', role: 'observer' }));
    configure({ smtpUrl: null });
    expect(error.code).toBe('mail.failed');
    expect(await Invitation.count({ where: { workspaceId } })).toBe(0);
    expect(await AuditEvent.count({ where: { workspaceId } })).toBe(0);
  });

  it('to a study that is not there is refused', async () => {
    const { context } = await buildMember('administrator');
    const studyId = '00000000-0000-4000-8000-000000000000';
    const work = withTransaction((t) =>
      inviteByEmail(context, t, { email: 'a@b.example', studyId, studyRole: 'reviewer' })
    );
    expect(await codeOf(work)).toBe('study.notFound');
  });
});

describe('members', () => {
  it('are changed and removed by an administrator alone', async () => {
    const { workspaceId } = await buildMember('administrator');
    const { user: target } = await buildMember('observer', workspaceId);
    for (const role of ['ecologist', 'reviewer', 'observer'] as const) {
      const { context } = await buildMember(role, workspaceId);
      const change = changeMemberRole(context, { workspaceId, userId: target.id, role: 'administrator' });
      expect((await refused(change)).status).toBe(403);
      expect((await refused(removeMember(context, { workspaceId, userId: target.id }))).status).toBe(403);
    }
    const elsewhere = await buildMember('administrator');
    expect((await refused(removeMember(elsewhere.context, { workspaceId, userId: target.id }))).status).toBe(404);
    expect(
      await codeOf(removeMember(elsewhere.context, { workspaceId: elsewhere.workspaceId, userId: target.id }))
    ).toBe('member.notFound');
    expect((await Membership.findOne({ where: { userId: target.id } }))?.role).toBe('observer');
  });

  it('keep at least one administrator', async () => {
    const { context, workspaceId, user } = await buildMember('administrator');
    expect(await codeOf(changeMemberRole(context, { workspaceId, userId: user.id, role: 'observer' }))).toBe(
      'member.last'
    );
    expect(await codeOf(removeMember(context, { workspaceId, userId: user.id }))).toBe('member.last');
    const second = await buildMember('ecologist', workspaceId);
    await changeMemberRole(context, { workspaceId, userId: second.user.id, role: 'administrator' });
    await removeMember(context, { workspaceId, userId: user.id });
    expect((await actorOf(user.id)).memberships).toEqual([]);
    expect(await acts(second.user.id)).toEqual(['member.changeRole']);
    expect(await acts(user.id)).toEqual(['member.remove']);
  });

  it('who step down at the same moment do not leave the workspace without one', async () => {
    const first = await buildMember('administrator');
    const second = await buildMember('administrator', first.workspaceId);
    const stepDown = ({ context, user }: typeof first) =>
      changeMemberRole(context, { workspaceId: first.workspaceId, userId: user.id, role: 'observer' });
    const results = await Promise.allSettled([
      stepDown(first),
      stepDown({ ...second, workspaceId: first.workspaceId })
    ]);
    expect(results.map((result) => result.status).sort()).toEqual(['fulfilled', 'rejected']);
    expect(await Membership.count({ where: { workspaceId: first.workspaceId, role: 'administrator' } })).toBe(1);
  });
});

describe('tokens', () => {
  it('are listed without their secret and withdrawn by their owner alone', async () => {
    const [mine, other] = [await buildUser(), await buildUser()];
    const context = await contextFor(mine.id);
    const { id, secret } = await mintToken(context, { name: 'script', scope: 'read', days: 90 });
    expect(secret).toMatch(/^sdg_[\w-]{43}$/);
    const [row] = await ownTokens(context);
    expect(row).toMatchObject({ name: 'script', last4: secret.slice(-4), scopes: ['read'] });
    expect(JSON.stringify(row)).not.toContain(secret);
    expect(await codeOf(revokeToken(await contextFor(other.id), id))).toBe('token.notFound');
    expect(await ownTokens(context)).toHaveLength(1);
    await revokeToken(context, id);
    expect(await ownTokens(context)).toHaveLength(0);
    expect(await acts(id)).toEqual(['token.mint', 'token.revoke']);
  });

  it('cannot be made by a token', async () => {
    const user = await buildUser();
    const context = { ...systemContext(await actorOf(user.id, 'token')) };
    expect(await codeOf(mintToken(context, { name: 'x', scope: 'write', days: 1 }))).toBe('token.notFound');
  });
});

describe('the audit', () => {
  it('can be neither changed, nor deleted, nor emptied', async () => {
    const { context, workspaceId, user } = await buildMember('administrator');
    await withTransaction((t) =>
      recordAudit(context, t, { act: 'test', subjectType: 'user', subjectId: user.id, workspaceId })
    );
    for (const sql of ['update audit_events set act = $$x$$', 'delete from audit_events', 'truncate audit_events']) {
      await expect(sequelize().query(sql)).rejects.toThrow(/append-only/);
    }
    expect(await acts(user.id)).toEqual(['test']);
  });

  it('goes with the act: rolled back together', async () => {
    const user = await buildUser();
    const context = await contextFor(user.id);
    const work = withTransaction(async (t) => {
      await recordAudit(context, t, { act: 'test', subjectType: 'user', subjectId: user.id });
      throw new Error('no');
    });
    await expect(work).rejects.toThrow('no');
    expect(await acts(user.id)).toEqual([]);
  });

  it('is read by an administrator, page by page, to the end', async () => {
    const { context, workspaceId } = await buildMember('administrator');
    const ecologist = await buildMember('ecologist', workspaceId);
    expect((await refused(auditTrail(ecologist.context, workspaceId, null))).status).toBe(403);
    await withTransaction(async (t) => {
      for (let i = 0; i < 51; i += 1) {
        await recordAudit(context, t, {
          act: 'test',
          subjectType: 'x',
          subjectId: String(i),
          workspaceId,
          details: { role: { before: 'a', after: 'b' } }
        });
      }
    });
    const first = await auditTrail(context, workspaceId, null);
    expect(first.rows).toHaveLength(50);
    expect(first.rows[0]).toMatchObject({ subjectId: '50', details: ['role: a → b'] });
    const second = await auditTrail(context, workspaceId, first.next);
    expect(second.rows.map((row) => row.subjectId)).toEqual(['0']);
    expect(second.next).toBeNull();
    expect((await auditTrail(context, workspaceId, '1; drop table users')).rows).toHaveLength(50);
  });
});

describe('the mail that was kept', () => {
  it('is read by the administrator, of their own people, who belong to nobody else', async () => {
    const { context, workspaceId } = await buildMember('administrator');
    const { user, context: ecologist } = await buildMember('ecologist', workspaceId);
    const { user: shared } = await buildMember('observer', workspaceId);
    await buildMembership({ userId: shared.id });
    const stranger = await buildUser();
    for (const { email } of [user, shared, stranger]) {
      await MailMessage.create({ sender: 's', recipient: email, subject: 'For ' + email, text: 't' });
    }
    expect((await refused(keptMail(ecologist, workspaceId))).status).toBe(403);
    expect((await keptMail(context, workspaceId)).map((row) => row.recipient)).toEqual([user.email]);
    configure({ smtpUrl: 'smtp://127.0.0.1:9' });
    expect((await refused(keptMail(context, workspaceId))).status).toBe(404);
    configure({ smtpUrl: null });
  });
});
