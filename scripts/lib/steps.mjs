/** The steps of `npm test` and `npm run check`, each a name and what it does to the tally. */
import { existsSync, mkdirSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { aptInstall } from './aptInstall.mjs';
import { freePort } from './ports.mjs';
import { buildApplication, isBuildCurrent, runTool } from './prepare.mjs';
import { logFolder } from './project.mjs';
import { countPlaywright, countVitest } from './tally.mjs';

const reportFolder = join(logFolder, 'reports');

/** A check that passes or fails as a whole; what it prints is shown when it fails, or always where it only warns. */
const check = (name, script, args, { showsWarnings = false } = {}) => ({
  name,
  async run(tally) {
    const { code, output } = await runTool(script, args, { logFile: join(logFolder, `${name}.log`) });
    tally.count(name, code === 0);
    return code !== 0 || (showsWarnings && /\bwarn/i.test(output)) ? output : '';
  }
});

function freshReport(name) {
  mkdirSync(reportFolder, { recursive: true });
  const file = join(reportFolder, `${name}.json`);
  rmSync(file, { force: true });
  return file;
}

const vitest = (name, project = name, files = []) => ({
  name,
  async run(tally) {
    const file = freshReport(name);
    const args = [
      'run',
      ...files,
      '--project',
      project,
      '--reporter=default',
      '--reporter=json',
      `--outputFile.json=${file}`
    ];
    const { code, output } = await runTool('vitest/vitest.mjs', args, { logFile: join(logFolder, `${name}.log`) });
    countVitest(tally, name, file, code);
    return code === 0 ? '' : output;
  }
});

const build = {
  name: 'build',
  async run(tally) {
    const failure = isBuildCurrent() ? undefined : await buildApplication();
    tally.count('build', !failure);
    return failure ?? '';
  }
};

const browser = {
  name: 'browser',
  async run(tally) {
    if (!isBuildCurrent()) {
      tally.count('browser: not run, because there is no current build', false);
      return '';
    }
    if (!process.env.CHROMIUM_PATH && !existsSync('/usr/bin/chromium')) {
      aptInstall('Chromium', ['chromium'], 'Or name a browser that is there: CHROMIUM_PATH=/path/to/chromium npm test');
    }
    const file = freshReport('browser');
    const env = { ...process.env, E2E_PORT: `${await freePort()}`, PLAYWRIGHT_JSON_OUTPUT_FILE: file };
    const args = ['test', '--reporter=list,json'];
    const { code, output } = await runTool('@playwright/test/cli.js', args, {
      logFile: join(logFolder, 'browser.log'),
      env
    });
    countPlaywright(tally, 'browser', file, code);
    return code === 0 ? '' : output;
  }
};

/** What can be said without running the program. */
export const staticSteps = [
  check('format', 'prettier/bin/prettier.cjs', ['--check', '--log-level', 'warn', '.']),
  check('lint', 'eslint/bin/eslint.js', ['.'], { showsWarnings: true }),
  check('types', 'svelte-check/bin/svelte-check', ['--output', 'human'], { showsWarnings: true })
];

/** The rules of `tests/architecture.test.ts` alone; in a full run they are among the unit tests. */
export const architectureStep = vitest('imports', 'unit', ['tests/architecture.test.ts']);

export const allSteps = [...staticSteps, vitest('unit'), vitest('integration'), build, browser];

/** Lets the framework write the types and settings that every other tool reads. */
export async function sync() {
  const { code, output } = await runTool('@sveltejs/kit/svelte-kit.js', ['sync'], {
    logFile: join(logFolder, 'sync.log')
  });
  return code === 0 ? '' : output;
}
