/** Where things are: the project's folder and what the scripts keep in its ignored `.sedgeline`. */
import { chmodSync, existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { parseEnv } from 'node:util';
import { identityOf, isRunning } from './processes.mjs';

export const root = dirname(dirname(dirname(fileURLToPath(import.meta.url))));
export const stateFolder = join(root, '.sedgeline');
export const logFolder = join(stateFolder, 'logs');
export const lockFolder = join(stateFolder, 'locks');

/** Demo accounts, all with one password; made by the seed, printed by `npm start` and in the README. */
export const demo = {
  accounts: ['administrator', 'ecologist', 'reviewer', 'observer'].map((role) => `${role}@quillmere.example`),
  password: 'reed-and-water-2026'
};

/** Reads `.env` when there is one; what is set in the environment wins, and an empty line means "not set". */
export function loadEnvironment() {
  const file = join(root, '.env');
  if (!existsSync(file)) return;
  for (const [name, value] of Object.entries(parseEnv(readFileSync(file, 'utf8')))) {
    if (value !== '') process.env[name] ??= value;
  }
}

const runFile = join(stateFolder, 'run.json');

/** Notes the running installation for `npm run token` and `npm run seed`. @param {{ databaseUrl: string, origin: string }} run */
export function writeRun(run) {
  mkdirSync(stateFolder, { recursive: true });
  // It holds a password.
  writeFileSync(runFile, JSON.stringify({ identity: identityOf(process.pid), ...run }, null, 2), { mode: 0o600 });
  chmodSync(runFile, 0o600);
}

/** The running installation, or undefined. @returns {{ identity: string, databaseUrl: string, origin: string } | undefined} */
export function readRun() {
  try {
    const run = JSON.parse(readFileSync(runFile, 'utf8'));
    return isRunning(run.identity) ? run : undefined;
  } catch {
    return undefined;
  }
}

/** Forgets the running installation if it is this process. */
export function clearRun() {
  if (readRun()?.identity === identityOf(process.pid)) rmSync(runFile, { force: true });
}
