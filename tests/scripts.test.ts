import { spawn, spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { createServer, type AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { withLock } from '../scripts/lib/lock.mjs';
import { isPortFree, nextFreePort } from '../scripts/lib/ports.mjs';
import { identityOf, isRunning, pause } from '../scripts/lib/processes.mjs';
import { hashOf, isStamped, stamp } from '../scripts/lib/stamps.mjs';
import { Tally, countPlaywright, countVitest } from '../scripts/lib/tally.mjs';
import { startPostgres } from '../scripts/postgres.mjs';

const root = dirname(dirname(fileURLToPath(import.meta.url)));
let folder: string;
beforeEach(() => void (folder = mkdtempSync(join(tmpdir(), 'sedgeline-scripts-'))));
afterEach(() => rmSync(folder, { recursive: true, force: true }));

function reportFile(report: unknown): string {
  const file = join(folder, 'report.json');
  writeFileSync(file, JSON.stringify(report));
  return file;
}

describe('the tally', () => {
  const test = (fullName: string, status: string) => ({ fullName, status });

  it('counts passed, failed and skipped tests of Vitest, the skipped ones as failed', () => {
    const tally = new Tally();
    const assertionResults = [test('adds', 'passed'), test('takes', 'failed'), test('waits', 'skipped')];
    countVitest(tally, 'unit', reportFile({ testResults: [{ name: join(root, 'a.test.ts'), assertionResults }] }), 1);
    expect(tally.line).toBe('1 passed, 2 failed');
    expect(tally.failures).toEqual(['unit: a.test.ts: takes', 'unit: a.test.ts: waits (did not run)']);
  });

  it('counts a file that could not be loaded', () => {
    const tally = new Tally();
    countVitest(
      tally,
      'unit',
      reportFile({ testResults: [{ name: join(root, 'a.test.ts'), assertionResults: [] }] }),
      1
    );
    expect(tally.line).toBe('0 passed, 1 failed');
  });

  it('never passes a run that failed without saying where, found nothing, or wrote no report', () => {
    const passed = { testResults: [{ name: join(root, 'a.test.ts'), assertionResults: [test('adds', 'passed')] }] };
    for (const [report, code, line] of [
      [passed, 0, '1 passed, 0 failed'],
      [passed, 1, '1 passed, 1 failed'],
      [{ testResults: [] }, 0, '0 passed, 1 failed']
    ] as const) {
      const tally = new Tally();
      countVitest(tally, 'unit', reportFile(report), code);
      expect(tally.line).toBe(line);
    }
    const tally = new Tally();
    countVitest(tally, 'unit', join(folder, 'missing.json'), 0);
    countPlaywright(tally, 'browser', join(folder, 'missing.json'), 0);
    expect(tally.line).toBe('0 passed, 2 failed');
  });

  it('counts the tests of Playwright in nested suites', () => {
    const tally = new Tally();
    const spec = (title: string, status: string) => ({ title, tests: [{ status }] });
    const suites = [
      {
        title: 'journey.spec.ts',
        specs: [spec('signs in', 'expected')],
        suites: [{ title: 'as a reviewer', specs: [spec('comments', 'unexpected'), spec('leaves', 'skipped')] }]
      }
    ];
    countPlaywright(tally, 'browser', reportFile({ suites }), 1);
    expect(tally.failures).toEqual([
      'browser: journey.spec.ts: as a reviewer: comments',
      'browser: journey.spec.ts: as a reviewer: leaves (did not run)'
    ]);
    expect(tally.passed).toBe(1);
  });
});

describe('stamps', () => {
  it('change with a name, a content and a setting, and with nothing else', () => {
    const write = (name: string, content: string) => writeFileSync(join(folder, name), content);
    write('a', '1');
    const first = hashOf(folder, ['a', 'missing']);
    expect(hashOf(folder, ['a', 'missing'])).toBe(first);
    expect(hashOf(folder, ['a', 'missing'], 'setting')).not.toBe(first);
    write('a', '2');
    expect(hashOf(folder, ['a', 'missing'])).not.toBe(first);
    write('missing', '');
    write('a', '1');
    expect(hashOf(folder, ['a', 'missing'])).not.toBe(first);
  });

  it('are recognised only when equal', () => {
    const file = join(folder, 'deep', 'stamp');
    expect(isStamped(file, 'x')).toBe(false);
    stamp(file, 'x');
    expect(isStamped(file, 'x')).toBe(true);
    expect(isStamped(file, 'y')).toBe(false);
  });
});

describe('processes', () => {
  it('are told apart from a later one with the same number', () => {
    const identity = identityOf(process.pid);
    expect(isRunning(identity)).toBe(true);
    expect(isRunning(`${process.pid} 1`)).toBe(false);
    expect(isRunning('')).toBe(false);
    expect(isRunning(undefined)).toBe(false);
  });
});

describe('a lock', () => {
  it('lets one in at a time', async () => {
    const lock = join(folder, 'lock');
    const seen: string[] = [];
    const work = (name: string) =>
      withLock(lock, async () => {
        seen.push(`${name} in`);
        await pause(60);
        seen.push(`${name} out`);
      });
    await Promise.all([work('first'), work('second'), work('third')]);
    expect(seen).toHaveLength(6);
    for (let i = 0; i < 6; i += 2) expect(seen[i + 1]).toBe(seen[i]?.replace('in', 'out'));
    expect(existsSync(lock)).toBe(false);
  });

  it('of a run that died is taken over', async () => {
    const lock = join(folder, 'lock');
    mkdirSync(lock);
    writeFileSync(join(lock, 'owner'), `${process.pid} 1`);
    expect(await withLock(lock, () => 'done', 5_000)).toBe('done');
  });

  it('is opened again after a failure, and waited for no longer than told', async () => {
    const lock = join(folder, 'lock');
    await expect(withLock(lock, () => Promise.reject(new Error('no')))).rejects.toThrow('no');
    await withLock(lock, async () => {
      await expect(withLock(lock, () => 'never', 200)).rejects.toThrow('too long');
    });
  });
});

describe('ports', () => {
  it('that are taken are seen and passed over', async () => {
    const server = createServer();
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
    const { port } = server.address() as AddressInfo;
    expect(await isPortFree('127.0.0.1', port)).toBe(false);
    expect(await nextFreePort('127.0.0.1', port)).toBeGreaterThan(port);
    const started = spawnSync(process.execPath, ['scripts/start.mjs'], {
      cwd: root,
      env: { ...process.env, PORT: `${port}`, HOST: '127.0.0.1' },
      encoding: 'utf8'
    });
    expect(started.status).toBe(1);
    expect(started.stderr).toBe(
      `Port ${port} on 127.0.0.1 is taken.\nGive another one, such as PORT=8080 npm start, or none at all.\n`
    );
    await new Promise((resolve) => server.close(resolve));
    expect(await isPortFree('127.0.0.1', port)).toBe(true);
  });
});

describe('a throwaway database', () => {
  it('answers, goes away, comes back at the same address and leaves nothing', async () => {
    const server = await startPostgres({ ephemeral: true });
    try {
      expect(await isPortFree('127.0.0.1', server.port)).toBe(false);
      await server.halt();
      await server.whenEnded();
      expect(await isPortFree('127.0.0.1', server.port)).toBe(true);
      await server.resume();
      expect(await isPortFree('127.0.0.1', server.port)).toBe(false);
    } finally {
      await server.stop();
    }
    expect(existsSync(server.home)).toBe(false);
  });

  it('stops when the run that started it is killed, and is swept up by the next', async () => {
    const script = join(folder, 'run.mjs');
    const module = JSON.stringify(join(root, 'scripts', 'postgres.mjs'));
    writeFileSync(
      script,
      `import { startPostgres } from ${module};
       const { home, port } = await startPostgres({ ephemeral: true });
       console.log(JSON.stringify({ home, port }));
       setInterval(() => {}, 1000);`
    );
    const run = spawn(process.execPath, [script], { stdio: ['ignore', 'pipe', 'inherit'] });
    const line = await new Promise<string>((resolve) => run.stdout.once('data', (data: Buffer) => resolve(`${data}`)));
    const { home, port } = JSON.parse(line) as { home: string; port: number };
    const pid = Number(readFileSync(join(home, 'data', 'postmaster.pid'), 'utf8').split('\n')[0]);
    expect(identityOf(pid)).toBeDefined();
    run.kill('SIGKILL');
    for (let i = 0; i < 200 && identityOf(pid); i += 1) await pause(50);
    expect(identityOf(pid)).toBeUndefined();
    expect(await isPortFree('127.0.0.1', port)).toBe(true);
    const next = await startPostgres({ ephemeral: true });
    await next.stop();
    expect(existsSync(home)).toBe(false);
  });
});
