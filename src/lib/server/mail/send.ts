/** One way out for e-mail: the agency's server, or the built-in one that keeps what it is given. */
import { createTransport, type Transporter } from 'nodemailer';
import { config } from '../config';
import { refusal } from '../errors';
import { log } from '../log';
import { mailboxUrl } from './mailbox';

export interface Mail {
  to: string;
  subject: string;
  /** The message; the HTML part says the same. */
  text: string;
  html: string;
}

let transport: { url: string; transporter: Transporter } | null = null;

function transporter(): Transporter {
  const url = config().smtpUrl ?? mailboxUrl();
  if (url === null) throw new Error('No mail server is named, and the built-in one has not been started.');
  if (transport?.url !== url) {
    transport?.transporter.close();
    transport = { url, transporter: createTransport(url, { disableFileAccess: true, disableUrlAccess: true }) };
  }
  return transport.transporter;
}

/**
 * Hands a message to the mail server. Throws the 503 refusal when it is not taken, so that a command that calls this
 * before its transaction commits leaves no row about a mail that nobody got.
 */
export async function sendMail(mail: Mail): Promise<void> {
  try {
    await transporter().sendMail({ from: config().mailFrom, ...mail });
  } catch (error) {
    log().error({ err: error, subject: mail.subject }, 'mail not taken');
    throw refusal('mail.failed', { cause: error });
  }
}
