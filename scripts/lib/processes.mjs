/** Child processes that never outlive the script that started them, and processes told apart even when a number is reused. */
import { spawn } from 'node:child_process';
import { closeSync, existsSync, mkdirSync, openSync, readFileSync, readlinkSync } from 'node:fs';
import { dirname } from 'node:path';
import { stripVTControlCharacters } from 'node:util';

const setpriv = ['/usr/bin/setpriv', '/bin/setpriv'].find((path) => existsSync(path));
const hasProc = existsSync('/proc/self/stat');

/** `pid starttime` of a running process, or undefined. The start time tells a reused process number from the old one. */
export function identityOf(pid) {
  if (!Number.isInteger(pid) || pid <= 0) return undefined;
  if (hasProc) {
    try {
      const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
      // The command name stands in brackets and may itself hold spaces and brackets: count from the last one.
      const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ');
      return fields[0] === 'Z' ? undefined : `${pid} ${fields[19]}`;
    } catch {
      return undefined;
    }
  }
  try {
    process.kill(pid, 0);
    return `${pid}`;
  } catch {
    return undefined;
  }
}

/** Whether the process that wrote this identity still runs. @param {string | undefined} identity */
export function isRunning(identity) {
  if (!identity) return false;
  return identityOf(Number.parseInt(identity, 10)) === identity.trim();
}

/** Folder a process works in, or undefined when it is gone or not ours to ask. */
export function workingFolderOf(pid) {
  try {
    return readlinkSync(`/proc/${pid}/cwd`);
  } catch {
    return undefined;
  }
}

/**
 * Starts a child that receives `deathSignal` from the kernel when this process dies, however it dies, and that stands
 * apart from the terminal, so that Ctrl-C reaches this process alone and the order of stopping is ours.
 */
export function spawnTied(command, args, { deathSignal = 'TERM', ...options } = {}) {
  const tied = setpriv ? [setpriv, ['--pdeathsig', deathSignal, '--', command, ...args]] : [command, args];
  return spawn(tied[0], tied[1], { detached: true, stdio: 'ignore', ...options });
}

/** Settles with the exit code (128 for a signal) once the child has ended; rejects when it could not be started. */
export function ended(child) {
  return new Promise((resolve, reject) => {
    if (child.exitCode !== null || child.signalCode !== null) return resolve(child.exitCode ?? 128);
    child.once('error', reject);
    child.once('exit', (code) => resolve(code ?? 128));
  });
}

/** Asks a child to stop with `signal`; after `patienceMs` it is killed. */
export async function stopChild(child, signal, patienceMs) {
  if (child.exitCode !== null || child.signalCode !== null) return;
  const gone = ended(child);
  child.kill(signal);
  const timer = setTimeout(() => child.kill('SIGKILL'), patienceMs);
  await gone.catch(() => undefined);
  clearTimeout(timer);
}

/** Runs a command to its end with everything it prints in `logFile`. @returns exit code and the text printed */
export async function runLogged(command, args, { logFile, env = process.env, ...options }) {
  mkdirSync(dirname(logFile), { recursive: true });
  const log = openSync(logFile, 'w', 0o600);
  try {
    const plain = { ...env, NO_COLOR: '1', FORCE_COLOR: '0' };
    const code = await ended(spawnTied(command, args, { stdio: ['ignore', log, log], env: plain, ...options }));
    // Some tools colour what they print whatever they are told.
    return { code, output: stripVTControlCharacters(readFileSync(logFile, 'utf8')) };
  } finally {
    closeSync(log);
  }
}

/** The last lines of a text, for showing why something failed. */
export function tail(text, nLines = 25) {
  return text.trimEnd().split('\n').slice(-nLines).join('\n');
}

/** Calls back once when this script is asked to stop: by a signal, or by npm going away above it. */
export function onStopRequest(callback) {
  let isAsked = false;
  const once = () => {
    if (isAsked) return;
    isAsked = true;
    clearInterval(watch);
    callback();
  };
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, once);
  // npm passes SIGTERM to a shell that does not pass it on, so a changed parent is the only news that npm was stopped.
  const parent = process.ppid;
  const watch = process.env.npm_lifecycle_event ? setInterval(() => process.ppid !== parent && once(), 400) : undefined;
  watch?.unref();
}

/** @param {number} ms */
export const pause = (ms) => new Promise((resolve) => setTimeout(resolve, ms));
