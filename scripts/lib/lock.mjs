/** A lock between processes: a folder, which the file system makes for one caller only. */
import { mkdirSync, readFileSync, renameSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { identityOf, isRunning, pause } from './processes.mjs';
import { Refusal } from './say.mjs';

/** A lock without an owner's name is being taken just now, unless it is older than this. */
const unnamedLockMs = 5_000;

function isAbandoned(folder) {
  try {
    return !isRunning(readFileSync(join(folder, 'owner'), 'utf8'));
  } catch {
    try {
      return Date.now() - statSync(folder).mtimeMs > unnamedLockMs;
    } catch {
      return false;
    }
  }
}

/** Runs `work` while no other process holds the lock `folder`; a lock left by a process that died is taken over. */
export async function withLock(folder, work, patienceMs = 600_000) {
  mkdirSync(dirname(folder), { recursive: true });
  const deadline = Date.now() + patienceMs;
  for (;;) {
    try {
      mkdirSync(folder);
      break;
    } catch (error) {
      if (error.code !== 'EEXIST') throw error;
      if (isAbandoned(folder)) {
        // Moved aside first: of two that wait, only one can move it.
        const aside = `${folder}.left-${process.pid}`;
        try {
          renameSync(folder, aside);
        } catch {
          continue;
        }
        rmSync(aside, { recursive: true, force: true });
      } else if (Date.now() > deadline) {
        throw new Refusal(`Another run has held ${folder} for too long.`, 'Stop that run, or remove the folder.');
      } else {
        await pause(150);
      }
    }
  }
  try {
    writeFileSync(join(folder, 'owner'), identityOf(process.pid) ?? '');
    return await work();
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
