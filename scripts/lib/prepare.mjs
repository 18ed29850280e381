/** The two slow steps before anything runs: packages and the build, each skipped while its inputs have not changed. */
import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { withLock } from './lock.mjs';
import { runLogged, tail } from './processes.mjs';
import { lockFolder, logFolder, root } from './project.mjs';
import { Refusal, say } from './say.mjs';
import { hashOf, isStamped, stamp } from './stamps.mjs';

const packagesStamp = join(root, 'node_modules', '.sedgeline-stamp');
const buildStamp = join(root, 'build', '.sedgeline-stamp');

const packagesHash = () =>
  hashOf(
    root,
    ['package.json', 'package-lock.json'],
    `${process.platform} ${process.arch} ${process.versions.modules}`
  );

/** Everything that goes into the build; TRUSTED_ORIGINS is read by svelte.config.js. */
const buildHash = () =>
  hashOf(
    root,
    [
      'src',
      'static',
      'package-lock.json',
      'svelte.config.js',
      'vite.config.ts',
      'postcss.config.cjs',
      'tailwind.config.ts'
    ],
    process.env.TRUSTED_ORIGINS
  );

/** Stops early, with a sentence, on a Node that the packages do not run on. */
export function requireNode() {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if ((major === 20 && minor >= 19) || (major === 22 && minor >= 12) || major > 22) return;
  throw new Refusal(
    `Sedgeline needs Node 20.19 or newer; this is ${process.versions.node}.`,
    'Install Node 20 and try again.'
  );
}

/** Whether npm's own record of what it installed matches the lock file, entry by entry. */
function isInstalledByHand() {
  const record = join(root, 'node_modules', '.package-lock.json');
  if (!existsSync(record)) return false;
  const installed = JSON.parse(readFileSync(record, 'utf8')).packages;
  const wanted = JSON.parse(readFileSync(join(root, 'package-lock.json'), 'utf8')).packages;
  return Object.entries(wanted).every(
    ([path, entry]) => path === '' || entry.optional || installed[path]?.version === entry.version
  );
}

/** Runs `npm`, by the very npm that runs this script where there is one. */
function npm(args, logFile) {
  const own = process.env.npm_execpath;
  const isScript = own !== undefined && /\.[cm]?js$/.test(own) && existsSync(own);
  const [command, first] = isScript ? [process.execPath, [own]] : ['npm', []];
  return runLogged(command, [...first, ...args], { logFile, cwd: root, deathSignal: 'TERM' });
}

/** Installs the packages of the lock file. */
export async function installPackages() {
  await withLock(join(lockFolder, 'packages'), async () => {
    const hash = packagesHash();
    if (!isStamped(packagesStamp, hash)) {
      if (!isInstalledByHand()) {
        say('Packages', 'installing with npm ci, about a minute');
        const logFile = join(logFolder, 'npm-ci.log');
        // The build tools are development packages: an environment with NODE_ENV=production would leave them out.
        const { code, output } = await npm(['ci', '--include=dev', '--no-fund', '--no-audit'], logFile);
        if (code !== 0) {
          throw new Refusal(`The packages could not be installed:\n${tail(output)}`, `The whole log: ${logFile}`);
        }
        stamp(packagesStamp, hash);
        return;
      }
      stamp(packagesStamp, hash);
    }
    say('Packages', 'in place');
  });
}

/** Runs a program of an installed package, with what it prints in a log. */
export function runTool(script, args, { logFile, ...options }) {
  return runLogged(process.execPath, [join(root, 'node_modules', script), ...args], { logFile, cwd: root, ...options });
}

/** Whether the build is made from the sources as they are now. */
export const isBuildCurrent = () => existsSync(join(root, 'build', 'index.js')) && isStamped(buildStamp, buildHash());

/** Builds the application. @returns the log when it failed, otherwise undefined */
export async function buildApplication() {
  const hash = buildHash();
  const logFile = join(logFolder, 'build.log');
  const { code, output } = await runTool('vite/bin/vite.js', ['build', '--logLevel', 'warn'], { logFile });
  if (code !== 0) return output;
  stamp(buildStamp, hash);
  return undefined;
}

/** Builds when the sources are newer than the build. */
export async function buildWhenStale() {
  await withLock(join(lockFolder, 'build'), async () => {
    if (isBuildCurrent()) return say('Build', 'up to date');
    say('Build', 'building the application, about a minute');
    const failure = await buildApplication();
    if (failure) {
      throw new Refusal(`The build failed:\n${tail(failure)}`, `The whole log: ${join(logFolder, 'build.log')}`);
    }
  });
}
