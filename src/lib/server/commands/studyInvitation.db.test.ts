import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { actorOf, buildMember, buildUser, contextFor } from '../../../../tests/harness/factories/people';
import { buildStudy } from '../../../../tests/harness/factories/studies';
import { configure } from '../config';
import { systemContext } from '../context';
import { AuditEvent } from '../db/models/AuditEvent';
import { MailMessage } from '../db/models/MailMessage';
import { StudyShare } from '../db/models/StudyShare';
import { withTransaction } from '../db/transaction';
import { startMailbox, stopMailbox } from '../mail/mailbox';
import { openInvitation } from '../queries/openInvitation';
import { acceptInvitation } from './acceptInvitation';
import { inviteByEmail } from './inviteByEmail';

beforeAll(async () => {
  configure({ smtpUrl: null });
  await startMailbox();
});
afterAll(stopMailbox);

async function tokenFor(email: string): Promise<string> {
  const message = await MailMessage.findOne({ where: { recipient: email }, order: [['receivedAt', 'DESC']] });
  return /\/invitations\/(\S+)/.exec(message?.text ?? '')?.[1] ?? '';
}

describe('an invitation to a study', () => {
  it('gives somebody new the study and nothing of the workspace', async () => {
    const { context } = await buildMember('ecologist');
    const { studyId } = await buildStudy(context);
    const email = 'reviewer-of-one@agency.example';
    const invite = (studyRole: 'reviewer' | 'observer') =>
      withTransaction((t) => inviteByEmail(context, t, { email, studyId, studyRole }));
    await invite('observer');
    const replaced = await tokenFor(email);
    await invite('reviewer');
    const token = await tokenFor(email);
    const nobody = systemContext();
    const person = { name: 'A Reviewer', password: 'sedge and sphagnum moss' };

    await expect(openInvitation(nobody, replaced)).rejects.toMatchObject({ status: 404 });
    expect(await openInvitation(nobody, token)).toMatchObject({
      step: 'join',
      studyRole: 'reviewer',
      workspaceRole: null
    });
    expect(await StudyShare.count({ where: { studyId } })).toBe(0);
    const { userId, path } = await acceptInvitation(nobody, token, person);
    expect(path).toBe(`/studies/${studyId}`);
    expect((await StudyShare.findAll({ where: { studyId } })).map((row) => [row.userId, row.role])).toEqual([
      [userId, 'reviewer']
    ]);
    expect((await actorOf(userId)).memberships).toEqual([]);
    const acts = await AuditEvent.findAll({ where: { actorId: userId, studyId } });
    expect(acts.map((row) => row.act).sort()).toEqual(['invitation.accept', 'study.share']);
  });

  it('says nothing of the study’s numbers in its mail', async () => {
    const { context, user } = await buildMember('ecologist');
    const { studyId } = await buildStudy(context);
    const { email } = await buildUser();
    await withTransaction((t) => inviteByEmail(context, t, { email, studyId, studyRole: 'observer' }));
    const message = await MailMessage.findOne({ where: { recipient: email } });
    // Digits stand in the link, in the date until which it holds and in the made-up name, and nowhere else.
    const words = message?.text
      .replaceAll(user.name, '')
      .replace(/https?:\S+/g, '')
      .replace(/until [^)]*\)/, '');
    expect(words).not.toMatch(/\d/);
  });

  it('adds a role in the workspace when it says so', async () => {
    const { context, workspaceId } = await buildMember('administrator');
    const { studyId } = await buildStudy(context);
    const user = await buildUser();
    const to = {
      email: user.email.toUpperCase(),
      workspaceId,
      workspaceRole: 'observer',
      studyId,
      studyRole: 'contributor'
    } as const;
    await withTransaction((t) => inviteByEmail(context, t, to));
    await acceptInvitation(await contextFor(user.id), await tokenFor(user.email), null);
    expect((await actorOf(user.id)).memberships).toMatchObject([{ workspaceId, role: 'observer' }]);
    expect((await StudyShare.findOne({ where: { studyId, userId: user.id } }))?.role).toBe('contributor');
  });
});
