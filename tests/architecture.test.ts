import { readFileSync, readdirSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { breaches, readSource, sourceKeys, type SourceFile } from './harness/importRules';

const root = dirname(dirname(fileURLToPath(import.meta.url)));

function filesUnder(folder: string): SourceFile[] {
  return readdirSync(join(root, folder), { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && /\.(ts|svelte)$/.test(entry.name))
    .map((entry) => {
      const full = join(entry.parentPath, entry.name);
      const path = full.slice(root.length + 1).replaceAll('\\', '/');
      return { path, text: readFileSync(full, 'utf8') };
    });
}

const sources = filesUnder('src');
const text = (path: string) => readFileSync(join(root, path), 'utf8');

describe('the sources', () => {
  it('are found', () => {
    expect(sources.some((file) => file.path === 'src/lib/dynamics/index.ts')).toBe(true);
    expect(sources.some((file) => file.path.endsWith('.svelte'))).toBe(true);
  });

  it('import only in the allowed direction', () => {
    expect(breaches(sources)).toEqual([]);
  });

  it('cite only what docs/SOURCES.md lists', () => {
    const listed = new Set([...text('docs/SOURCES.md').matchAll(/^- `(\w+)`/gm)].map((match) => match[1] ?? ''));
    const cited = sources
      .filter((file) => file.path.startsWith('src/lib/'))
      .flatMap((file) => sourceKeys(file).map((tag) => ({ ...tag, where: `${file.path}:${tag.line}` })));
    expect(cited.length).toBeGreaterThan(0);
    expect(cited.filter((tag) => tag.keys.length === 0).map((tag) => tag.where)).toEqual([]);
    const unknown = cited.flatMap((tag) =>
      tag.keys.filter((key) => !listed.has(key)).map((key) => `${tag.where} ${key}`)
    );
    expect(unknown).toEqual([]);
  });
});

describe('the package file', () => {
  const manifest: Record<string, Record<string, string> | undefined> = JSON.parse(text('package.json'));

  it('pins every version exactly', () => {
    const versions = Object.entries({ ...manifest.dependencies, ...manifest.devDependencies });
    expect(versions.length).toBeGreaterThan(10);
    expect(versions.filter(([, version]) => !/^\d+\.\d+\.\d+(-[\w.]+)?$/.test(version))).toEqual([]);
  });

  it('has a lock file that says the same and holds no address of a registry', () => {
    const lock: { packages: Record<string, Record<string, unknown>> } = JSON.parse(text('package-lock.json'));
    expect(lock.packages['']?.dependencies).toEqual(manifest.dependencies);
    expect(lock.packages['']?.devDependencies).toEqual(manifest.devDependencies);
    expect(
      Object.entries(lock.packages)
        .filter(([, entry]) => 'resolved' in entry)
        .map(([path]) => path)
    ).toEqual([]);
  });
});

describe('the checker of imports', () => {
  const complaints = (path: string, body: string, ...others: SourceFile[]) =>
    breaches([{ path, text: body }, ...others]);
  const door: SourceFile = { path: 'src/lib/dynamics/index.ts', text: '' };

  it.each([
    ['dynamics that looks up', 'src/lib/dynamics/a.ts', `import { b } from '$lib/contracts/b';`],
    ['dynamics that needs a package', 'src/lib/dynamics/a.ts', `import { create } from 'mathjs';`],
    ['dynamics that needs node', 'src/lib/dynamics/a.ts', `import fs from 'node:fs';`],
    [
      'a primitive that knows a study',
      'src/lib/ui/A.svelte',
      `<script lang="ts">import type { S } from '$lib/study/s';</script>`
    ],
    [
      'a chart that knows the workbench',
      'src/lib/charts/A.svelte',
      `<script module>export * from '$lib/workbench/x';</script>`
    ],
    ['a contract that asks the server', 'src/lib/contracts/a.ts', `const a = await import('$lib/server/db');`],
    ['a study that asks the server for a type', 'src/lib/study/a.ts', `type A = import('$lib/server/db').A;`],
    ['a client that imports the server', 'src/lib/workbench/a.ts', `export { a } from '$lib/server/a';`],
    ['a server that uses the framework', 'src/lib/server/a.ts', `import { error } from '@sveltejs/kit';`],
    ['a server that reads $env', 'src/lib/server/a.ts', `import { env } from '$env/dynamic/private';`],
    ['a server that imports kit', 'src/lib/server/a.ts', `import { asLoad } from './kit/asLoad';`],
    ['a relative path across layers', 'src/lib/server/a.ts', `import { a } from '../contracts/a';`],
    ['a module that reads the environment', 'src/lib/server/a.ts', `export const a = process.env.PORT;`],
    ['a route that reads the environment', 'src/routes/+page.server.ts', `export const a = process['env'].PORT;`],
    ['a file ending', 'src/lib/server/a.ts', `import { a } from './b.ts';`],
    ['a file outside every layer', 'src/lib/misc/a.ts', ''],
    ['a way past the door', 'src/routes/+page.ts', `import { a } from '$lib/dynamics/solve/a';`],
    [
      'a worker of another layer',
      'src/lib/charts/a.ts',
      `new Worker(new URL('../workbench/a.worker.ts', import.meta.url));`
    ]
  ])('catches %s', (_name, path, body) => {
    expect(complaints(path, body, door)).toHaveLength(1);
  });

  it.each([
    [
      'a route that uses everything',
      'src/routes/+page.server.ts',
      `import { error } from '@sveltejs/kit'; import { a } from '$lib/server/a'; import { b } from '$lib/dynamics';`
    ],
    [
      'a server that names a framework type',
      'src/lib/server/a.ts',
      `import type { Cookies } from '@sveltejs/kit'; import { type Handle } from '@sveltejs/kit';`
    ],
    ['the configuration', 'src/lib/server/config.ts', `export const a = process.env.PORT;`],
    ['a neighbour', 'src/lib/dynamics/solve/a.ts', `import { b } from '../model/b';`],
    [
      'a test of dynamics with its tools',
      'src/lib/dynamics/a.test.ts',
      `import { it } from 'vitest'; import fc from 'fast-check';`
    ],
    [
      'words in a comment or a string',
      'src/lib/dynamics/a.ts',
      `/* import a from '$lib/server/a' */ export const b = "process.env";`
    ]
  ])('lets %s pass', (_name, path, body) => {
    expect(complaints(path, body, door)).toEqual([]);
  });

  it('names file and line, also inside a component', () => {
    const body =
      '<script module lang="ts">\n</script>\n<script lang="ts">\n  import { a } from "$lib/server/a";\n</script>';
    expect(complaints('src/lib/ui/A.svelte', body)[0]).toMatch(/^src\/lib\/ui\/A\.svelte:4 imports server/);
  });

  it('tells types from values', () => {
    const body = `import type { A } from './a'; import { type B, c } from './b'; export type { D } from './d'; import './e';`;
    const uses = readSource({ path: 'src/lib/ui/a.ts', text: body }).imports;
    expect(uses.map((use) => [use.specifier, use.isType])).toEqual([
      ['./a', true],
      ['./b', false],
      ['./d', true],
      ['./e', false]
    ]);
  });

  it('reads source keys over several lines and misses no empty tag', () => {
    const body = '/**\n * A.\n * @source hairer1993 §II.4,\n *   gustafsson1991\n */\n/** @source somewhere */';
    expect(sourceKeys({ path: 'a.ts', text: body })).toEqual([
      { keys: ['hairer1993', 'gustafsson1991'], line: 3 },
      { keys: [], line: 6 }
    ]);
  });
});
