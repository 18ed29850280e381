/** Debian packages, installed only when missing, with or without sudo. */
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { Refusal, say } from './say.mjs';

const isRoot = process.getuid?.() === 0;

function hasCommand(name) {
  return (process.env.PATH ?? '').split(':').some((folder) => folder && existsSync(`${folder}/${name}`));
}

function privilege() {
  if (isRoot) return [];
  if (!hasCommand('sudo')) return undefined;
  if (spawnSync('sudo', ['-n', 'true'], { stdio: 'ignore' }).status === 0) return ['sudo', '-n'];
  return process.stdin.isTTY ? ['sudo'] : undefined;
}

/**
 * Installs Debian packages. Throws a Refusal with `otherwise` as its last line when that is not possible from here.
 * @param {string} what what is missing, for people @param {string[]} packages @param {string} otherwise another way out
 * @param {{ before?: string, after?: string }} [shell] shell lines to run as root before and after
 */
export function aptInstall(what, packages, otherwise, shell = {}) {
  const elevate = hasCommand('apt-get') ? privilege() : undefined;
  if (!elevate) {
    throw new Refusal(
      `${what} is not installed, and this user may not install it (not root, and no sudo without a password).`,
      `Install it with: sudo apt-get update && sudo apt-get install -y ${packages.join(' ')}`,
      otherwise
    );
  }
  say(what, `installing Debian's ${packages.join(', ')}`);
  // Another installation may hold the lock for a while; without a timeout apt gives up at once.
  const apt = 'apt-get -qq -o DPkg::Lock::Timeout=300 -o Acquire::Retries=3';
  const script = [
    'export DEBIAN_FRONTEND=noninteractive',
    shell.before ?? ':',
    `${apt} update || true`,
    `${apt} install -y --no-install-recommends ${packages.join(' ')}; code=$?`,
    shell.after ?? ':',
    'exit $code'
  ].join('\n');
  const [command, ...args] = [...elevate, 'sh', '-c', script];
  const stdin = process.stdin.isTTY ? 'inherit' : 'ignore';
  const run = spawnSync(command, args, { stdio: [stdin, 'pipe', 'pipe'], encoding: 'utf8', maxBuffer: 1 << 26 });
  if (run.status !== 0) {
    const reason = `${run.stdout ?? ''}${run.stderr ?? ''}`.trim().split('\n').slice(-8).join('\n');
    throw new Refusal(
      `${what} could not be installed by apt-get:\n${reason}`,
      `Try by hand: sudo apt-get update && sudo apt-get install -y ${packages.join(' ')}`,
      otherwise
    );
  }
}
