import { createTransport } from 'nodemailer';
import { describe, expect, it } from 'vitest';
import { layOut } from './layout';
import { readMessage } from './readMessage';
import { invitationMail } from './templates/invitation';
import { configure } from '../config';

configure({ origin: 'https://sedge.example' });

async function roundTrip(mail: { subject: string; text: string; html?: string }) {
  const composer = createTransport({ streamTransport: true, buffer: true });
  const sent = await composer.sendMail({ from: 'Sedgeline <a@b.example>', to: 'c@d.example', ...mail });
  return readMessage(Buffer.from(sent.message as Buffer).toString('latin1'));
}

describe('a message read back', () => {
  it.each([
    ['plain', { subject: 'Short', text: 'One line.\n' }],
    [
      'accents and dashes',
      { subject: 'Geißen & brôm: “v 7” — überprüfen', text: 'Prüfung ½ = 0.5 – Ω.\n\nZweite Zeile' }
    ],
    [
      'long lines',
      {
        subject: 'x'.repeat(200) + ' ü ' + 'y'.repeat(200),
        text: `${'word = '.repeat(80)}\n\nhttps://sedge.example/${'a'.repeat(90)}`
      }
    ],
    ['both parts', { subject: 'Two', text: 'Plain ü', html: '<p>Plain ü</p>' }]
  ])('is what was sent: %s', async (_name, mail) => {
    const read = await roundTrip(mail);
    expect(read.subject).toBe(mail.subject);
    expect(read.text).toBe(mail.text.trimEnd());
    if ('html' in mail) expect(read.html).toBe(mail.html);
    expect(read.sender).toContain('a@b.example');
  });
});

describe('a message laid out', () => {
  it('keeps names out of the markup and out of the headers', () => {
    const mail = layOut({
      to: 'a@b.example',
      subject: 'Hello\r\nBcc: x@y.example',
      paragraphs: ['<b>Name</b> & "co"'],
      because: 'So.'
    });
    expect(mail.subject).toBe('Hello Bcc: x@y.example');
    expect(mail.html).not.toContain('<b>Name');
  });

  it('has one link, the same in both parts, and says why it came', () => {
    const mail = invitationMail({
      to: 'a@b.example',
      invitedBy: 'A. Warden',
      workspaceName: null,
      workspaceRole: null,
      studyTitle: 'Goats & broom',
      studyRole: 'reviewer',
      token: 'the-token',
      expiresAt: new Date('2026-03-14T17:00:00Z')
    });
    const link = 'https://sedge.example/invitations/the-token';
    expect(mail.text.match(/https?:\S+/g)).toEqual([link]);
    expect(mail.html).toContain(`href="${link}"`);
    expect(mail.text).toContain('A. Warden invites you to the study “Goats & broom” as its reviewer.');
    expect(mail.text).toContain('14 March 2026, 17:00 (UTC)');
    expect(mail.text).toContain('this kind of mail cannot be switched off');
  });
});
