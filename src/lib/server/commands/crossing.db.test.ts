/** Tries to cross what the commands guard: links that outlive their sender, races, and an audit that cannot be written. */
import { beforeAll, describe, expect, it } from 'vitest';
import { MintToken, Profile } from '$lib/contracts/people';
import { startSession } from '../auth/sessions';
import { hashSecret } from '../auth/secrets';
import { configure } from '../config';
import { systemContext } from '../context';
import { sequelize } from '../db/connection';
import { Invitation } from '../db/models/Invitation';
import { MailMessage } from '../db/models/MailMessage';
import { Membership } from '../db/models/Membership';
import { PasswordReset } from '../db/models/PasswordReset';
import { Session } from '../db/models/Session';
import { StudyShare } from '../db/models/StudyShare';
import { AppError } from '../errors';
import { startMailbox } from '../mail/mailbox';
import { keptMail } from '../queries/keptMail';
import {
  buildMember,
  buildMembership,
  buildUser,
  contextFor,
  PASSWORD
} from '../../../../tests/harness/factories/people';
import { buildStudy, typedRate } from '../../../../tests/harness/factories/studies';
import { acceptInvitation } from './acceptInvitation';
import { archiveStudy } from './archiveStudy';
import { changeMemberRole } from './changeMemberRole';
import { changePassword } from './changePassword';
import { changeShare } from './changeShare';
import { createStudy } from './createStudy';
import { deleteStudy, undeleteStudy } from './deleteStudy';
import { duplicateStudy } from './duplicateStudy';
import { endOwnSession } from './endOwnSession';
import { inviteMember } from './inviteMember';
import { mintToken } from './mintToken';
import { openThread } from './openThread';
import { recordReading } from './recordReading';
import { removeMember } from './removeMember';
import { replyToThread } from './replyToThread';
import { resetPassword } from './resetPassword';
import { resolveThread } from './resolveThread';
import { revokeShare } from './revokeShare';
import { saveRate } from './saveRate';
import { shareStudy } from './shareStudy';
import { signIn } from './signIn';
import { signOut } from './signOut';
import { updateProfile } from './updateProfile';
import { withdrawInvitation } from './withdrawInvitation';
import { competitionQuestion } from '../../../../tests/harness/factories/studies';

beforeAll(async () => {
  configure({ smtpUrl: null });
  await startMailbox();
});

const statusOf = (promise: Promise<unknown>): Promise<number> =>
  promise.then(
    () => 200,
    (error: unknown) => {
      if (error instanceof AppError) return error.status;
      throw error;
    }
  );

/** The secret of the newest link that was sent to an address. */
async function linkTo(recipient: string): Promise<string> {
  const mail = await MailMessage.findOne({ where: { recipient }, order: [['receivedAt', 'DESC']] });
  return /\/(?:invitations|reset)\/(\S+)/.exec(mail!.text)![1]!;
}

const newcomer = { name: 'New Person', password: 'four unrelated words here' };
let serial = 0;
const newAddress = () => `new-${(serial += 1)}@agency.example`;

describe('an invitation', () => {
  it('ends with the right of its sender to send it', async () => {
    const { context: administrator, user, workspaceId } = await buildMember('administrator');
    const second = await buildMember('administrator', workspaceId);
    const email = newAddress();
    await inviteMember(administrator, { workspaceId, email, role: 'administrator' });
    const link = await linkTo(email);
    await changeMemberRole(second.context, { workspaceId, userId: user.id, role: 'observer' });
    expect(await statusOf(acceptInvitation(systemContext(), link, newcomer))).toBe(404);
    await removeMember(second.context, { workspaceId, userId: user.id });
    expect(await statusOf(acceptInvitation(systemContext(), link, newcomer))).toBe(404);
    expect(await Membership.count({ where: { workspaceId } })).toBe(1);
    await buildMembership({ userId: user.id, workspaceId, role: 'administrator' });
    expect(await statusOf(acceptInvitation(systemContext(), link, newcomer))).toBe(200);
  });

  it('to a study ends when its owner has left, and sleeps while the study is deleted', async () => {
    const { context: owner, user, workspaceId } = await buildMember('ecologist');
    const administrator = await buildMember('administrator', workspaceId);
    const { studyId } = await buildStudy(owner);
    const [one, two] = [newAddress(), newAddress()];
    for (const email of [one, two]) await shareStudy(owner, { studyId, email, role: 'contributor' });
    const links = [await linkTo(one), await linkTo(two)] as const;
    await deleteStudy(owner, { studyId });
    expect(await statusOf(acceptInvitation(systemContext(), links[0], newcomer))).toBe(404);
    await undeleteStudy(owner, { studyId });
    expect(await statusOf(acceptInvitation(systemContext(), links[0], newcomer))).toBe(200);
    await removeMember(administrator.context, { workspaceId, userId: user.id });
    expect(await statusOf(acceptInvitation(systemContext(), links[1], newcomer))).toBe(404);
    expect(await StudyShare.count({ where: { studyId } })).toBe(1);
  });

  it('accepted twice at one moment by somebody new makes one person and no fault', async () => {
    const { context, workspaceId } = await buildMember('administrator');
    const elsewhere = await buildMember('administrator');
    const email = newAddress();
    await inviteMember(context, { workspaceId, email, role: 'observer' });
    const first = await linkTo(email);
    await inviteMember(elsewhere.context, { workspaceId: elsewhere.workspaceId, email, role: 'observer' });
    const second = await linkTo(email);
    const statuses = await Promise.all(
      [first, second].map((link) => statusOf(acceptInvitation(systemContext(), link, newcomer)))
    );
    expect(statuses.sort()).toEqual([200, 409]);
  });

  it('and a share are counted, since both send mail', async () => {
    const { context: owner } = await buildMember('ecologist');
    const { studyId } = await buildStudy(owner);
    const { email, id: userId } = await buildUser();
    const rounds = async () => {
      for (let i = 0; i < 61; i += 1) {
        await shareStudy(owner, { studyId, email, role: 'observer' });
        await revokeShare(owner, { studyId, userId });
      }
    };
    expect(await statusOf(rounds())).toBe(429);
  });
});

describe('a sign-in', () => {
  const credentials = (email: string) => ({ email, password: PASSWORD, userAgent: 'test' });

  it('takes the place of the session this browser held', async () => {
    const user = await buildUser();
    const old = await startSession(user.id, { ip: '', userAgent: '' });
    await signIn(systemContext(), { ...credentials(user.email), replaces: old.value });
    const held = await Session.findAll({ where: { userId: user.id } });
    expect(held.map(({ id }) => id)).not.toContain(hashSecret(old.value));
    expect(held).toHaveLength(1);
  });

  it('waits for no other: more at once than there are connections', async () => {
    const users = await Promise.all(Array.from({ length: 16 }, () => buildUser()));
    const from = performance.now();
    await Promise.all(
      users.map(({ email }, i) => signIn({ ...systemContext(), ip: `192.0.2.${i}` }, credentials(email)))
    );
    expect(performance.now() - from).toBeLessThan(8_000);
  });
});

describe('a link to set a password', () => {
  it('does not outlive a change of the password', async () => {
    const user = await buildUser();
    const context = await contextFor(user.id);
    const expiresAt = new Date(Date.now() + 3_600_000);
    await PasswordReset.create({ userId: user.id, tokenHash: hashSecret('asked before'), expiresAt });
    await changePassword(context, { currentPassword: PASSWORD, password: newcomer.password, sessionId: null });
    expect(await statusOf(resetPassword(systemContext(), 'asked before', 'another four unrelated words'))).toBe(404);
  });
});

describe('kept mail', () => {
  it('of somebody with a foot elsewhere is not for an administrator, who could take their account over', async () => {
    const { context, workspaceId } = await buildMember('administrator');
    const foreign = await buildMember('ecologist');
    const guest = await buildUser();
    const { studyId } = await buildStudy(foreign.context);
    await shareStudy(foreign.context, { studyId, email: guest.email, role: 'reviewer' });
    await inviteMember(context, { workspaceId, email: guest.email, role: 'observer' });
    const invited = newAddress();
    await shareStudy(foreign.context, { studyId, email: invited, role: 'reviewer' });
    await inviteMember(context, { workspaceId, email: invited, role: 'observer' });
    const own = newAddress();
    await inviteMember(context, { workspaceId, email: own, role: 'observer' });
    expect((await keptMail(context, workspaceId)).map(({ recipient }) => recipient)).toEqual([own]);
  });
});

describe('text that cannot be kept', () => {
  it('is refused before it reaches the database', async () => {
    for (const name of ['a\0b', 'a\ud800']) {
      expect(Profile.safeParse({ name }).success).toBe(false);
      expect(MintToken.safeParse({ name, scope: 'read', days: '1' }).success).toBe(false);
    }
    expect(await statusOf(endOwnSession(await contextFor((await buildUser()).id), '\0'))).toBe(404);
  });
});

describe('an audit that cannot be written', () => {
  const TABLES = [
    'users',
    'memberships',
    'sessions',
    'api_tokens',
    'password_resets',
    'invitations',
    'studies',
    'study_revisions',
    'study_shares',
    'readings',
    'threads',
    'comments'
  ];
  /** Every row there is, in one order. */
  async function everything(): Promise<string> {
    const texts: string[] = [];
    for (const table of TABLES) {
      const [rows] = await sequelize().query(`select to_jsonb(t)::text as row from ${table} t order by 1`);
      texts.push(`${table} ${JSON.stringify(rows)}`);
    }
    return texts.join('\n');
  }

  it('takes its act back, whichever it is', async () => {
    const { context: administrator, workspaceId } = await buildMember('administrator');
    const { context: owner, user } = await buildMember('ecologist', workspaceId);
    const other = await buildMember('observer', workspaceId);
    const { studyId, revision } = await buildStudy(owner, { shares: [{ userId: other.user.id, role: 'reviewer' }] });
    const gone = await buildStudy(owner);
    await deleteStudy(owner, { studyId: gone.studyId });
    const note = { studyId, anchor: { kind: 'study' }, kind: 'note', body: 'Looked at.' };
    const { threadId } = await openThread(owner, note);
    const invited = newAddress();
    await inviteMember(administrator, { workspaceId, email: invited, role: 'observer' });
    const link = await linkTo(invited);
    const invitation = (await Invitation.findOne({ where: { email: invited } }))!;
    const session = await startSession(user.id, { ip: '', userAgent: '' });
    const expiresAt = new Date(Date.now() + 3_600_000);
    await PasswordReset.create({ userId: user.id, tokenHash: hashSecret('reset me'), expiresAt });
    const userId = other.user.id;
    const outsider = await buildUser();
    const acts: [string, () => Promise<unknown>][] = [
      ['signIn', () => signIn(systemContext(), { email: user.email, password: PASSWORD, userAgent: '' })],
      ['signOut', () => signOut(owner, session.value)],
      ['endOwnSession', () => endOwnSession(owner, hashSecret(session.value))],
      ['mintToken', () => mintToken(owner, { name: 'x', scope: 'read', days: 1 })],
      ['updateProfile', () => updateProfile(owner, { name: 'Another' })],
      [
        'changePassword',
        () => changePassword(owner, { currentPassword: PASSWORD, password: newcomer.password, sessionId: null })
      ],
      ['resetPassword', () => resetPassword(systemContext(), 'reset me', newcomer.password)],
      ['inviteMember', () => inviteMember(administrator, { workspaceId, email: newAddress(), role: 'observer' })],
      ['withdrawInvitation', () => withdrawInvitation(administrator, workspaceId, invitation.id)],
      ['acceptInvitation', () => acceptInvitation(systemContext(), link, newcomer)],
      ['changeMemberRole', () => changeMemberRole(administrator, { workspaceId, userId, role: 'reviewer' })],
      ['removeMember', () => removeMember(administrator, { workspaceId, userId })],
      ['createStudy', () => createStudy(owner, { question: competitionQuestion })],
      ['duplicateStudy', () => duplicateStudy(owner, { studyId })],
      ['archiveStudy', () => archiveStudy(owner, { studyId })],
      ['deleteStudy', () => deleteStudy(owner, { studyId })],
      ['undeleteStudy', () => undeleteStudy(owner, { studyId: gone.studyId })],
      ['saveRate', () => saveRate(owner, { studyId, revision, rate: typedRate('first.growth.r', 0.8, '/a') })],
      ['recordReading', () => recordReading(owner, { studyId, part: 'equilibria', sentence: 'They stay.' })],
      ['shareStudy', () => shareStudy(owner, { studyId, email: outsider.email, role: 'observer' })],
      ['shareStudy by invitation', () => shareStudy(owner, { studyId, email: newAddress(), role: 'observer' })],
      ['changeShare', () => changeShare(owner, { studyId, userId, role: 'observer' })],
      ['revokeShare', () => revokeShare(owner, { studyId, userId })],
      ['openThread', () => openThread(owner, note)],
      ['replyToThread', () => replyToThread(owner, { studyId, threadId, body: 'So it is.' })],
      ['resolveThread', () => resolveThread(owner, { studyId, threadId, resolved: true })]
    ];
    const before = await everything();
    await sequelize().query('alter table audit_events add constraint no_more check (false) not valid');
    for (const [name, act] of acts) {
      const outcome = await act().then(
        () => 'done',
        (error: Error) => error.message
      );
      expect([name, outcome]).toEqual([name, expect.stringContaining('no_more')]);
      expect([name, (await everything()) === before]).toEqual([name, true]);
    }
    await sequelize().query('alter table audit_events drop constraint no_more');
    for (const [name, act] of acts.filter(([name]) => name === 'openThread' || name === 'mintToken')) {
      expect([name, await statusOf(act())]).toEqual([name, 200]);
    }
  });
});
