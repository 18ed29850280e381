/** The built-in mail server: on loopback, delivering to nobody, keeping each message for the administrator to read. */
import type { AddressInfo } from 'node:net';
import { SMTPServer } from 'smtp-server';
import { MailMessage } from '../db/models/MailMessage';
import { log } from '../log';
import { readMessage } from './readMessage';

const LARGEST_BYTES = 1_000_000;

interface Mailbox {
  url: string;
  close(): Promise<void>;
}

// Module replacement in development would start a second server and forget the first.
const store = globalThis as typeof globalThis & { sedgelineMailbox?: Promise<Mailbox> };

async function keep(raw: string, recipients: string[]): Promise<void> {
  const message = readMessage(raw);
  const { sender, subject, text, html } = message;
  await MailMessage.bulkCreate(recipients.map((recipient) => ({ sender, recipient, subject, text, html })));
}

function open(): Promise<Mailbox> {
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['AUTH', 'STARTTLS'],
    size: LARGEST_BYTES,
    logger: false,
    onData(stream, session, callback) {
      const chunks: Buffer[] = [];
      stream.on('data', (chunk: Buffer) => chunks.push(chunk));
      stream.on('end', () => {
        const recipients = session.envelope.rcptTo.map((to) => to.address);
        keep(Buffer.concat(chunks).toString('latin1'), recipients).then(
          () => callback(),
          (error: Error) => callback(error)
        );
      });
    }
  });
  server.on('error', (error) => log().warn({ err: error }, 'built-in mail server'));
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    const listening = server.listen(0, '127.0.0.1', () => {
      const { port } = listening.address() as AddressInfo;
      url = `smtp://127.0.0.1:${port}`;
      resolve({ url, close: () => new Promise((done) => server.close(() => done())) });
    });
    // The web server decides how long the process lives.
    listening.unref();
  });
}

let url: string | null = null;

/** Starts it, once; returns its address. */
export async function startMailbox(): Promise<string> {
  store.sedgelineMailbox ??= open();
  const mailbox = await store.sedgelineMailbox;
  url = mailbox.url;
  return mailbox.url;
}

/** Its address, or null where it has not been started. */
export function mailboxUrl(): string | null {
  return url;
}

/** Stops it; for tests and tools. */
export async function stopMailbox(): Promise<void> {
  const opened = await store.sedgelineMailbox;
  store.sedgelineMailbox = undefined;
  url = null;
  await opened?.close();
}
