/**
 * `npm run bench`: the engine beside odex and mathjs on one trajectory. Every contender runs in a fresh process, warm,
 * several times a round; rounds are interleaved and rotated, time is the process's own (all threads, collector included),
 * and ratios are taken within a round, since a busy machine moves all of them together.
 */
import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { contenders, drift, trueError } from './lib/benchContenders.mjs';
import { installPackages, requireNode } from './lib/prepare.mjs';
import { root } from './lib/project.mjs';
import { Refusal, runScript } from './lib/say.mjs';

const nRounds = 5;
/** Long enough for the compiler to finish and for a median to mean something. */
const warmUpMs = 400;
const measureMs = 700;

const median = (values) => {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
};

const cpuMs = () => {
  const { user, system } = process.cpuUsage();
  return (user + system) / 1000;
};

/** Measures one contender in this process. @returns CPU milliseconds a run, and how good and how long its path is */
async function measure(name) {
  const run = await contenders[name]();
  const repeat = (forMs) => {
    const begin = cpuMs();
    let nRuns = 0;
    for (; nRuns < 3 || cpuMs() - begin < forMs; nRuns += 1) run();
    return (cpuMs() - begin) / nRuns;
  };
  repeat(warmUpMs);
  const ms = repeat(measureMs);
  const result = run();
  return { ms, nSteps: result.nSteps, nOutputs: result.t.length, error: await trueError(result), drift: drift(result) };
}

function measureApart(name) {
  const run = spawnSync(process.execPath, [fileURLToPath(import.meta.url), '--contender', name], {
    cwd: root,
    encoding: 'utf8'
  });
  if (run.status !== 0) throw new Refusal(`${name} failed:\n${run.stderr}`);
  return JSON.parse(run.stdout);
}

function printTable(results) {
  const [ours] = Object.keys(results);
  const rows = Object.entries(results).map(([name, rounds]) => {
    const ratios = rounds.map((round, i) => round.ms / results[ours][i].ms);
    const { nSteps, nOutputs, error, drift: drifted } = rounds[0];
    return [
      name,
      median(rounds.map((round) => round.ms)).toFixed(3),
      `${median(ratios).toFixed(2)} (${Math.min(...ratios).toFixed(2)}–${Math.max(...ratios).toFixed(2)})`,
      `${nSteps}`,
      `${nOutputs}`,
      error.toExponential(1),
      drifted.toExponential(1)
    ];
  });
  const table = [['', 'CPU ms', `ratio to ${ours}`, 'steps', 'outputs', 'true error', 'drift'], ...rows];
  const widths = table[0].map((_, column) => Math.max(...table.map((row) => row[column].length)));
  for (const row of table) {
    console.log(row.map((cell, i) => (i === 0 ? cell.padEnd(widths[i]) : cell.padStart(widths[i]))).join('  '));
  }
}

await runScript(async () => {
  requireNode();
  const at = process.argv.indexOf('--contender');
  if (at > 0) {
    console.log(JSON.stringify(await measure(process.argv[at + 1])));
    return;
  }
  await installPackages();
  const names = Object.keys(contenders);
  const results = Object.fromEntries(names.map((name) => [name, []]));
  console.log(
    `One trajectory, 200 time units, 2,001 outputs, rtol 1e-8, atol 1e-10; ${nRounds} rounds on Node ${process.versions.node}`
  );
  for (let round = 0; round < nRounds; round += 1) {
    for (let i = 0; i < names.length; i += 1) {
      const name = names[(i + round) % names.length];
      results[name].push(measureApart(name));
    }
  }
  printTable(results);
  console.log(
    'True error: largest difference from a path at 1e-13, as a share of each species’ peak, over the outputs.'
  );
  console.log('Drift: of the constant of the motion, which needs no reference. mathjs writes its own steps only.');
});
