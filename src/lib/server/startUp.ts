/** What must be done once before the first request: reach the database, bring its tables up to date, seed, take mail. */
import { setTimeout as sleep } from 'node:timers/promises';
import { sweepSessions } from './auth/sessions';
import { purgeDeletedStudies } from './commands/deleteStudy';
import { config, type Config } from './config';
import { systemContext } from './context';
import { asRefusal, closeDatabase, isDatabaseAway, pingDatabase, sequelize } from './db/connection';
import { migrate } from './db/migrate';
import { AppError } from './errors';
import { log } from './log';
import { startMailbox, stopMailbox } from './mail/mailbox';
import { seed } from './seed/seed';

const ATTEMPTS = 30;

async function waitForDatabase(): Promise<void> {
  for (let attempt = 1; ; attempt += 1) {
    try {
      return await pingDatabase();
    } catch (error) {
      const away = isDatabaseAway(error) || (asRefusal(error) instanceof AppError && attempt < ATTEMPTS);
      if (!away || attempt >= ATTEMPTS) throw error;
      if (attempt === 1) log().warn('waiting for the database');
      await sleep(1000);
    }
  }
}

/** A demo has a password that everybody knows: it must never be put on somebody's real server. */
function maySeed({ environment, databaseUrl }: Config): boolean {
  const host = new URL(databaseUrl).hostname;
  return environment !== 'production' || ['127.0.0.1', 'localhost', '[::1]'].includes(host);
}

/** The web server has answered its last request: what still holds the process open is closed, so that it ends at once. */
function stopWithTheServer(): void {
  process.once('sveltekit:shutdown', () => {
    void Promise.allSettled([stopMailbox(), closeDatabase()]).then(() => process.exit());
  });
}

/** Readies the process. Safe to repeat; throws when the database cannot be reached or a migration fails. */
export async function startUp(): Promise<void> {
  const settings = config();
  await waitForDatabase();
  const applied = await migrate(sequelize());
  if (applied.length) log().info({ applied }, 'migrated');
  await sweepSessions();
  await purgeDeletedStudies(systemContext());
  if (settings.smtpUrl === null) await startMailbox();
  stopWithTheServer();
  if (!settings.seed) return;
  if (maySeed(settings)) await seed();
  else log().warn('the demo is not seeded into another machine’s database in production');
}
