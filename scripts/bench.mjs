/**
 * `npm run bench`: the engine's workloads beside other general-purpose ways to the same numbers, in one process tree. Every
 * contender runs in a fresh process and reports the CPU time of all its threads; rounds are interleaved and rotated, and
 * ratios are taken within a round, since a busy machine moves all of them together.
 *
 *   npm run bench -- [--quick] [--only W1,W4a] [--rounds 5]
 *
 * A C compiler and Debian's python3-scipy take part when they are there.
 */
import { spawnSync } from 'node:child_process';
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { cpus, loadavg } from 'node:os';
import { join } from 'node:path';
import { bundle } from './lib/bundle.mjs';
import { drawsOf, workloads } from './bench/workloads.mjs';
import { installPackages, requireNode } from './lib/prepare.mjs';
import { root, stateFolder } from './lib/project.mjs';
import { Refusal, runScript, say } from './lib/say.mjs';

const folder = join(stateFolder, 'bench');
const argument = (name) => {
  const at = process.argv.indexOf(`--${name}`);
  return at > 0 ? (process.argv[at + 1] ?? '') : undefined;
};
const isQuick = process.argv.includes('--quick');
const nRounds = Number(argument('rounds') ?? (isQuick ? 3 : 5));
const only = argument('only')?.split(',') ?? Object.keys(workloads);
/** Rounds a slow contender takes part in: its single run is long enough to be steady. */
const nSlowRounds = Math.min(nRounds, 2);

/** Seconds of repetitions, how much of the work is done, and whether one run is long. */
const node = (name, seconds, count) => ({ kind: 'node', name, seconds, ...(count && { count }), isSlow: false });
const python = (name, seconds, count) => ({ kind: 'python', name, seconds, ...(count && { count }), isSlow: true });
const slowNode = (name, seconds, count) => ({ ...node(name, seconds, count), isSlow: true });
const compiled = (compiler, seconds) => ({ kind: 'c', name: compiler, seconds, isSlow: false });

const follow = (seconds, counts) => [
  node('sedgeline', seconds),
  compiled('gcc', seconds),
  compiled('clang', seconds),
  node('sedgeline-shown', seconds, counts.shown),
  slowNode('odex', seconds, counts.odex),
  slowNode('mathjs', 0.5, counts.mathjs),
  python('scipy-rk45', 0.5, counts.scipy),
  python('scipy-odeint', 0.5, counts.odeint),
  ...(counts.vectorised ? [python('scipy-vectorised', 0.5, counts.vectorised)] : [])
];
const rest = (seconds, ...others) => [
  node('sedgeline', seconds),
  compiled('gcc', seconds),
  compiled('clang', seconds),
  ...others
];
const contestants = {
  W1: follow(0.5, { shown: 1, odex: 1, mathjs: 1, scipy: 1, odeint: 1 }),
  W2: follow(0.8, { shown: 1000, odex: 200, mathjs: 5, scipy: 40, odeint: 40, vectorised: 10_000 }),
  W3: follow(1, { shown: 1000, odex: 100, mathjs: 2, scipy: 15, odeint: 40, vectorised: 10_000 }),
  W4a: rest(0.5, python('numpy', 0.5, 100_000)),
  W4b: rest(0.5, python('numpy', 0.5, 100_000)),
  W4c: rest(0.7, python('numpy', 0.5, 20_000), python('numpy-roots', 0.5, 500)),
  W5s: rest(0.5, python('python', 0.5)),
  W5t: rest(0.5, python('numpy', 0.5))
};

function hasCommand(command, ...args) {
  return spawnSync(command, args, { stdio: 'ignore' }).status === 0;
}

/** Builds the C program with every compiler there is. @returns paths by compiler */
function compile() {
  const built = {};
  for (const compiler of ['gcc', 'clang']) {
    if (!hasCommand(compiler, '--version')) continue;
    const program = join(folder, `baseline-${compiler}`);
    const source = join(root, 'scripts', 'bench', 'baseline.c');
    const run = spawnSync(compiler, ['-O3', '-march=native', '-o', program, source, '-lm'], { encoding: 'utf8' });
    if (run.status === 0) built[compiler] = program;
    else say(compiler, `could not build the C program: ${run.stderr.split('\n')[0]}`);
  }
  return built;
}

/** Debian's own Python, which its packages belong to; another one comes first in many paths. */
const pythonProgram = '/usr/bin/python3';

function measure(work, contestant, programs) {
  const { kind, name, seconds } = contestant;
  const count = contestant.count ?? workloads[work].count;
  const out = join(folder, `${work}-${name}.out`);
  const rest = [join(folder, `${work}.draws`), out, `${seconds}`, `${count}`];
  const [command, ...args] = {
    node: () => [process.execPath, join(root, 'scripts', 'bench', 'contender.mjs'), name, work, ...rest],
    python: () => [pythonProgram, join(root, 'scripts', 'bench', 'rivals.py'), name, work, ...rest],
    c: () => [programs[name], work, ...rest]
  }[kind]();
  const env = { ...process.env, OPENBLAS_NUM_THREADS: '1' };
  const run = spawnSync(command, args, { cwd: root, encoding: 'utf8', env });
  if (run.status !== 0) throw new Refusal(`${name} failed on ${work}:\n${run.stderr}`);
  const bytes = readFileSync(out);
  return {
    ...JSON.parse(run.stdout),
    found: new Float64Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.length))
  };
}

const median = (values) => {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
};

/** Largest |y - true| over the outputs of each path, as a share of its species' peak; median and worst over the paths. */
function errorsOf(found, reference, samples) {
  const errors = [];
  for (let at = 0; at + 2 * samples <= Math.min(found.length, reference.length); at += 2 * samples) {
    let worst = 0;
    for (const species of [0, 1]) {
      let [peak, error] = [0, 0];
      for (let j = at + species; j < at + 2 * samples; j += 2) {
        peak = Math.max(peak, Math.abs(reference[j]));
        error = Math.max(error, Math.abs(found[j] - reference[j]));
      }
      worst = Math.max(worst, error / peak);
    }
    errors.push(worst);
  }
  return errors.length === 0 ? '' : `${median(errors).toExponential(1)} / ${Math.max(...errors).toExponential(1)}`;
}

/** How good an answer is: errors of paths, the histogram of classes beside ours, or the mean and spread of the end. */
function qualityOf(work, contestant, found, ours, reference) {
  const { path } = workloads[work];
  if (path) return contestant.name === 'mathjs' ? 'own steps only' : errorsOf(found, reference, path.samples);
  if (work.startsWith('W5')) return `mean ${found[0].toFixed(1)} sd ${found[1].toFixed(1)} of ${found[2]}`;
  if (contestant.count && contestant.count < workloads[work].count) return `${found[10]} found`;
  const same = found.subarray(0, 11).every((value, i) => value === ours[i]);
  return `${found[10]} found, ${same ? 'classes agree' : 'classes DIFFER'}`;
}

function printTable(rows) {
  const widths = rows[0].map((_, column) => Math.max(...rows.map((row) => row[column].length)));
  for (const row of rows) {
    console.log(`  ${row.map((cell, i) => (i === 0 ? cell.padEnd(widths[i]) : cell.padStart(widths[i]))).join('  ')}`);
  }
}

const shown = (ns) =>
  ns < 1e3 ? `${ns.toFixed(0)} ns` : ns < 1e6 ? `${(ns / 1e3).toFixed(2)} us` : `${(ns / 1e6).toFixed(3)} ms`;

function compete(work, programs, hasPython, engine) {
  const present = contestants[work].filter(
    ({ kind, name }) => (kind !== 'c' || programs[name]) && (kind !== 'python' || hasPython)
  );
  writeFileSync(join(folder, `${work}.draws`), new Uint8Array(drawsOf(work, engine).buffer));
  const results = new Map(present.map((contestant) => [contestant, []]));
  for (let round = 0; round < nRounds; round += 1) {
    for (let i = 0; i < present.length; i += 1) {
      const contestant = present[(i + round) % present.length];
      if (!contestant.isSlow || round < nSlowRounds)
        results.get(contestant)[round] = measure(work, contestant, programs);
    }
  }
  const { path, unit, title } = workloads[work];
  const reference = path ? measure(work, { ...node('reference', 0), count: path.kept }, programs).found : undefined;
  const [oursBy, ...others] = results.values();
  const base = programs.clang ? 'clang' : programs.gcc ? 'gcc' : 'sedgeline';
  const baseRounds = results.get(present.find(({ name }) => name === base));
  console.log(`\n${work}: ${title}`);
  const rows = [['', `CPU a ${unit}`, `ratio to ${base}`, 'ours faster by', path ? 'error, median / worst' : 'found']];
  for (const [contestant, rounds] of results) {
    const ran = rounds.flatMap((round, i) =>
      round ? [{ ...round, toBase: round.ns / baseRounds[i].ns, toOurs: round.ns / oursBy[i].ns }] : []
    );
    const ratios = ran.map(({ toBase }) => toBase);
    const short = (ratio) => (ratio < 20 ? ratio.toFixed(2) : ratio.toFixed(0));
    rows.push([
      { gcc: 'C, gcc -O3 -march=native', clang: 'C, clang -O3 -march=native' }[contestant.name] ?? contestant.name,
      shown(median(ran.map(({ ns }) => ns))),
      `${short(median(ratios))} (${short(Math.min(...ratios))}-${short(Math.max(...ratios))})`,
      `${short(median(ran.map(({ toOurs }) => toOurs)))}`,
      qualityOf(work, contestant, ran[0].found, oursBy[0].found, reference)
    ]);
  }
  if (others.length > 0) printTable(rows);
}

await runScript(async () => {
  requireNode();
  await installPackages();
  mkdirSync(folder, { recursive: true });
  for (const work of only)
    if (!workloads[work])
      throw new Refusal(`There is no workload ${work}.`, `Known: ${Object.keys(workloads).join(', ')}`);
  const programs = compile();
  const hasPython = hasCommand(pythonProgram, '-c', 'import scipy');
  const load = () =>
    loadavg()
      .map((value) => value.toFixed(1))
      .join(', ');
  console.log(
    `${nRounds} rounds on Node ${process.versions.node}, ${cpus().length} x ${cpus()[0]?.model.trim()}; load ${load()}`
  );
  if (Object.keys(programs).length === 0) say('C', 'no compiler found: ratios are to the engine');
  if (!hasPython) say('SciPy', "not found; Debian's package is python3-scipy");
  const engine = await import(await bundle('scripts/bench/engine.ts'));
  for (const work of only) compete(work, programs, hasPython, engine);
  console.log(`\nErrors are shares of each species' peak against paths at 1e-13. Load at the end: ${load()}`);
});
