/** Which way imports may point, checked on a list of files so that the checker itself can be tested. */
import { posix } from 'node:path';
import ts from 'typescript';

export interface SourceFile {
  /** Relative to the project, with forward slashes: `src/lib/ui/Button.svelte`. */
  path: string;
  text: string;
}

export interface ImportUse {
  specifier: string;
  /** True when nothing of it is left after the types are taken away. */
  isType: boolean;
  line: number;
}

type Layer =
  | 'routes'
  | 'hooks'
  | 'params'
  | 'kit'
  | 'server'
  | 'formats'
  | 'study'
  | 'contracts'
  | 'dynamics'
  | 'workbench'
  | 'charts'
  | 'ui';

/** The first prefix that fits names the layer. */
const prefixes: readonly [string, Layer][] = [
  ['src/routes/', 'routes'],
  ['src/hooks', 'hooks'],
  ['src/params/', 'params'],
  ['src/lib/server/kit/', 'kit'],
  ['src/lib/server/', 'server'],
  ['src/lib/formats/', 'formats'],
  ['src/lib/study/', 'study'],
  ['src/lib/contracts/', 'contracts'],
  ['src/lib/dynamics/', 'dynamics'],
  ['src/lib/workbench/', 'workbench'],
  ['src/lib/charts/', 'charts'],
  ['src/lib/ui/', 'ui']
];

/** What each layer may import besides itself. An arrow that wants to turn round belongs one storey lower. */
const allowed: Readonly<Record<Layer, readonly Layer[]>> = {
  routes: ['params', 'kit', 'server', 'formats', 'study', 'contracts', 'dynamics', 'workbench', 'charts', 'ui'],
  hooks: ['kit', 'server'],
  params: ['contracts'],
  kit: ['server', 'formats', 'study', 'contracts', 'dynamics'],
  server: ['formats', 'study', 'contracts', 'dynamics'],
  formats: ['study', 'contracts', 'dynamics'],
  study: ['contracts', 'dynamics'],
  contracts: ['dynamics'],
  dynamics: [],
  workbench: ['charts', 'ui', 'formats', 'study', 'contracts', 'dynamics'],
  charts: ['ui'],
  ui: []
};

/** Layers that may use the framework's own modules at run time; a Svelte component always may. */
const framework: readonly Layer[] = ['routes', 'hooks', 'params', 'kit'];
const frameworkModule = /^(\$app\/|\$env\/|@sveltejs\/kit(\/|$))/;

/** Files of `src` that belong to no layer. */
const loose = /^src\/(app\.d\.ts|types\/)/;
const isTest = (path: string) => /\.test\.ts$/.test(path);
/** The one module that reads the environment. */
const configuration = 'src/lib/server/config.ts';

function layerOf(path: string): Layer | undefined {
  return prefixes.find(([prefix]) => path.startsWith(prefix))?.[1];
}

/** The script parts of a file, each with the line it begins on. A component may have two. */
function scriptsOf(file: SourceFile): { text: string; firstLine: number }[] {
  if (!file.path.endsWith('.svelte')) return [{ text: file.text, firstLine: 1 }];
  return [...file.text.matchAll(/<script\b[^>]*>([\s\S]*?)<\/script>/g)].map((match) => ({
    text: match[1] ?? '',
    firstLine: file.text.slice(0, match.index + match[0].indexOf('>')).split('\n').length
  }));
}

function isTypeOnly(node: ts.ImportDeclaration | ts.ExportDeclaration): boolean {
  if (ts.isExportDeclaration(node)) {
    if (node.isTypeOnly) return true;
    const clause = node.exportClause;
    return clause !== undefined && ts.isNamedExports(clause) && clause.elements.every((element) => element.isTypeOnly);
  }
  const clause = node.importClause;
  if (!clause) return false;
  if (clause.isTypeOnly) return true;
  const names = clause.namedBindings;
  return (
    !clause.name &&
    names !== undefined &&
    ts.isNamedImports(names) &&
    names.elements.every((element) => element.isTypeOnly)
  );
}

/** Whether a node is `new URL('…', import.meta.url)`, the way a worker is named. */
function workerAddress(node: ts.Node): string | undefined {
  if (!ts.isNewExpression(node) || node.expression.getText() !== 'URL') return undefined;
  const [first, second] = node.arguments ?? [];
  return first && ts.isStringLiteral(first) && second?.getText() === 'import.meta.url' ? first.text : undefined;
}

interface Reading {
  imports: ImportUse[];
  /** Lines on which the process's environment is read. */
  environment: number[];
}

/** Everything a file imports, also dynamically, as a type or as a worker, and where it reads the environment. */
export function readSource(file: SourceFile): Reading {
  const reading: Reading = { imports: [], environment: [] };
  for (const script of scriptsOf(file)) {
    const source = ts.createSourceFile(file.path, script.text, ts.ScriptTarget.Latest, true, ts.ScriptKind.TS);
    const lineOf = (node: ts.Node) => source.getLineAndCharacterOfPosition(node.getStart()).line + script.firstLine;
    const add = (specifier: string, isType: boolean, node: ts.Node) =>
      reading.imports.push({ specifier, isType, line: lineOf(node) });
    // Asking a node for its text is slow; most files hold neither.
    const mayReadEnvironment = script.text.includes('process');
    const mayNameWorker = script.text.includes('import.meta.url');
    const visit = (node: ts.Node): void => {
      if ((ts.isImportDeclaration(node) || ts.isExportDeclaration(node)) && node.moduleSpecifier) {
        if (ts.isStringLiteral(node.moduleSpecifier)) add(node.moduleSpecifier.text, isTypeOnly(node), node);
      } else if (ts.isCallExpression(node) && node.expression.kind === ts.SyntaxKind.ImportKeyword) {
        const [target] = node.arguments;
        if (target && ts.isStringLiteralLike(target)) add(target.text, false, node);
      } else if (ts.isImportTypeNode(node) && ts.isLiteralTypeNode(node.argument)) {
        if (ts.isStringLiteral(node.argument.literal)) add(node.argument.literal.text, true, node);
      } else if (mayReadEnvironment && (ts.isPropertyAccessExpression(node) || ts.isElementAccessExpression(node))) {
        if (/^process(\.env|\['env'\])$/.test(node.getText(source))) reading.environment.push(lineOf(node));
      }
      const worker = mayNameWorker ? workerAddress(node) : undefined;
      if (worker !== undefined) add(worker, false, node);
      ts.forEachChild(node, visit);
    };
    visit(source);
  }
  return reading;
}

/** Path of what an import names inside the project, without ending, or undefined for a package. */
function targetOf(file: SourceFile, specifier: string): string | undefined {
  const bare = specifier.replace(/\?.*$/, '');
  if (bare === '$lib' || bare.startsWith('$lib/')) return bare.replace('$lib', 'src/lib');
  if (bare.startsWith('.')) return posix.join(posix.dirname(file.path), bare);
  return undefined;
}

function complaintAbout(
  file: SourceFile,
  layer: Layer,
  use: ImportUse,
  doors: ReadonlySet<string>
): string | undefined {
  const { specifier, isType } = use;
  if (frameworkModule.test(specifier)) {
    if (isType || framework.includes(layer)) return undefined;
    if (file.path.endsWith('.svelte') && layer !== 'server') return undefined;
    return `uses the framework (${specifier}); only ${framework.join(', ')} and components may`;
  }
  const target = targetOf(file, specifier);
  if (target === undefined) {
    const isOwn = specifier.startsWith('./$types') || isTest(file.path);
    return layer === 'dynamics' && !isOwn ? `imports the package ${specifier}; dynamics stands alone` : undefined;
  }
  if (/\.(ts|js|mjs)$/.test(target) && !/\.worker\.ts$/.test(target)) return `names a file ending in ${specifier}`;
  const goal = layerOf(target) ?? layerOf(`${target}/`);
  if (goal === layer) return undefined;
  if (goal === undefined) {
    return /\.css$/.test(target) || isTest(file.path) ? undefined : `reaches outside the layers with ${specifier}`;
  }
  if (specifier.startsWith('.') && goal !== 'kit' && layer !== 'kit')
    return `crosses to ${goal} by ${specifier}; use $lib`;
  if (!allowed[layer].includes(goal)) return `imports ${goal} by ${specifier}; ${layer} may not`;
  const door = `src/lib/${goal}`;
  if (doors.has(door) && target !== door) return `imports past the door of ${goal} by ${specifier}`;
  return undefined;
}

/** Every breach of the rules, as `path:line what`. */
export function breaches(files: readonly SourceFile[]): string[] {
  const doors = new Set(
    files.filter((file) => /^src\/lib\/[^/]+\/index\.ts$/.test(file.path)).map((file) => posix.dirname(file.path))
  );
  return files.flatMap((file) => {
    if (loose.test(file.path)) return [];
    const layer = layerOf(file.path);
    if (!layer) return [`${file.path} belongs to no layer`];
    const { imports, environment } = readSource(file);
    const complaints = imports.flatMap((use) => {
      const complaint = complaintAbout(file, layer, use, doors);
      return complaint ? [`${file.path}:${use.line} ${complaint}`] : [];
    });
    const mayRead = file.path === configuration || isTest(file.path);
    if (!mayRead)
      complaints.push(...environment.map((line) => `${file.path}:${line} reads process.env; only config.ts may`));
    return complaints;
  });
}

/** Keys of sources named in docstrings: `@source hairer1993 §II.4, shampine1986`. @returns one entry a docstring tag */
export function sourceKeys(file: SourceFile): { keys: string[]; line: number }[] {
  return [...file.text.matchAll(/@source\b((?:(?!\*\/|\n\s*\*\s*@|\n\s*\n)[\s\S])*)/g)].map((match) => ({
    keys: (match[1] ?? '').match(/\b[a-z][A-Za-z]*\d{4}[a-z]?\b/g) ?? [],
    line: file.text.slice(0, match.index).split('\n').length
  }));
}
