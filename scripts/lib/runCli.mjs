/** Runs a command-line part of the server against the installation that runs, or against the project's own database. */
import { startPostgres } from '../postgres.mjs';
import { bundle } from './bundle.mjs';
import { installPackages, requireNode } from './prepare.mjs';
import { ended, spawnTied } from './processes.mjs';
import { loadEnvironment, readRun, root } from './project.mjs';

/** Where the command's work is done, and how to leave it afterwards. */
async function findDatabase() {
  if (process.env.DATABASE_URL) return { databaseUrl: process.env.DATABASE_URL };
  const run = readRun();
  if (run) return run;
  const server = await startPostgres();
  return { databaseUrl: server.url, leave: () => server.stop() };
}

/**
 * @param {string} name of `src/lib/server/cli/NAME.cli.ts` @param {string[]} args @param {Record<string, string>} [environment]
 * @returns {Promise<number>} the command's exit code
 */
export async function runCli(name, args, environment = {}) {
  requireNode();
  loadEnvironment();
  await installPackages();
  const file = await bundle(`src/lib/server/cli/${name}.cli.ts`);
  const { databaseUrl, origin, leave } = await findDatabase();
  try {
    const env = { LOG_LEVEL: 'warn', ...process.env, ...environment, DATABASE_URL: databaseUrl };
    if (origin) env.ORIGIN = origin;
    const stdio = ['ignore', 'inherit', 'inherit'];
    return await ended(spawnTied(process.execPath, [file, ...args], { cwd: root, env, stdio }));
  } finally {
    await leave?.();
  }
}
