/**
 * One contender on one workload, in a process of its own:
 *   node contender.mjs NAME WORKLOAD DRAWS.bin OUT.bin SECONDS COUNT
 * Prints CPU nanoseconds a unit of work (all threads, collector included), the median of the repetitions that fit, and
 * writes what it found, as the C and Python programs do.
 */
import { readFileSync, writeFileSync } from 'node:fs';
import { bundle } from '../lib/bundle.mjs';
import { rateWriter, slopesOf, startOf, workloads } from './workloads.mjs';

const [name, work, drawsFile, outFile, seconds, countText] = process.argv.slice(2);
const count = Number(countText);
const bytes = readFileSync(drawsFile);
const draws = new Float64Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.length));
const { path } = workloads[work];
const row = (i) => draws.subarray(8 * i, 8 * i + 8);
const timesOf = ({ end, samples }) => Array.from({ length: samples }, (_, i) => (i * end) / (samples - 1));

const loadEngine = async () => import(await bundle('scripts/bench/engine.ts'));

/** Ensembles of paths: each computes `count` of them into `out` and gives the number of steps tried. */
const followers = {
  async sedgeline(out) {
    const engine = await loadEngine();
    const family = { W1: 'classical', W2: 'linear', W3: 'saturating' }[work];
    const kernel = engine.PLANAR_KERNELS[family];
    const k = new Float64Array(engine.rates.PLANAR_RATES);
    const times = engine.planarTimes(timesOf(path));
    const integrator = engine.makePlanarIntegrator({ rtol: path.rtol, atol: path.atol });
    const starts = Array.from({ length: count }, (_, i) => startOf(work, row(i)));
    const write = rateWriter(work, engine);
    write(draws, 0, k);
    engine.primePlanar(kernel, k, ...starts[0], path.end / 10);
    return () => {
      let steps = 0;
      for (let i = 0; i < count; i += 1) {
        write(draws, 8 * i, k);
        const run = integrator.run(
          kernel,
          k,
          starts[i][0],
          starts[i][1],
          0,
          path.end,
          times,
          out,
          2 * path.samples * i
        );
        steps += run.accepted + run.rejected;
      }
      return steps;
    };
  },
  /** What the pages show: steps a thousand times tighter than asked, checked models, plain arrays. */
  async 'sedgeline-shown'(out) {
    const { simulate } = await loadEngine();
    const specOf = (d) => {
      if (work === 'W2') {
        return {
          interaction: 'competition',
          first: { growth: { kind: 'logistic', r: d[0], K: d[1] } },
          second: { growth: { kind: 'logistic', r: d[3], K: d[4] } },
          competition: { form: 'coefficients', alpha12: d[2], alpha21: d[5] }
        };
      }
      const isFirst = work === 'W1';
      return {
        interaction: 'consumer-resource',
        first: { growth: isFirst ? { kind: 'exponential', r: d[0] } : { kind: 'logistic', r: d[0], K: d[1] } },
        second: { mortality: isFirst ? d[3] : d[5] },
        feeding: isFirst
          ? { response: 'holling-1', a: d[1], e: d[2] / d[1] }
          : { response: 'holling-2', a: d[2], h: d[3], e: d[4] }
      };
    };
    return () => {
      let steps = 0;
      for (let i = 0; i < count; i += 1) {
        const [x, y] = startOf(work, row(i));
        const { rtol, atol, samples, end } = path;
        const result = simulate(specOf(row(i)), { start: { x, y }, span: [0, end], samples, rtol, atol });
        for (let j = 0; j < samples; j += 1) {
          out[2 * (samples * i + j)] = result.x[j];
          out[2 * (samples * i + j) + 1] = result.y[j];
        }
        steps += result.steps.accepted + result.steps.rejected;
      }
      return steps;
    };
  },
  async odex(out) {
    const { Solver } = await import('odex');
    // Tightened where that is needed for an error like the others'.
    const rtol = work === 'W1' ? path.rtol : 1e-7;
    return () => {
      let steps = 0;
      for (let i = 0; i < count; i += 1) {
        const slopes = slopesOf(work, row(i));
        const solver = new Solver(2);
        solver.relativeTolerance = rtol;
        solver.absoluteTolerance = path.atol;
        solver.denseOutput = true;
        let at = 2 * path.samples * i;
        const end = at + 2 * path.samples;
        const collect = (_x, state) => {
          if (at >= end) return;
          out[at] = state[0];
          out[at + 1] = state[1];
          at += 2;
        };
        const grid = solver.grid(path.end / (path.samples - 1), collect);
        steps += solver.solve((_t, state) => slopes(state), 0, startOf(work, row(i)), path.end, grid).nStep;
        // The last time may be missed by rounding.
        for (; at < end; at += 2) out.copyWithin(at, at - 2, at);
      }
      return steps;
    };
  },
  /** It has no dense output and only an absolute tolerance on slopes: its own steps, at a tolerance of a like error. */
  async mathjs() {
    const { create, all } = await import('mathjs');
    const { solveODE } = create(all);
    const tol = { W1: 2e-6, W2: 3e-5, W3: 1e-7 }[work];
    return () => {
      let steps = 0;
      for (let i = 0; i < count; i += 1) {
        const slopes = slopesOf(work, row(i));
        const start = [...startOf(work, row(i))];
        steps += solveODE((_t, state) => slopes(state), [0, path.end], start, { method: 'RK45', tol }).t.length;
      }
      return steps;
    };
  },
  /** Not timed: the paths that errors are measured against. */
  async reference(out) {
    const { integrate } = await loadEngine();
    return () => {
      for (let i = 0; i < count; i += 1) {
        const slopes = slopesOf(work, row(i));
        const rhs = (_t, y, to) => {
          const [f, g] = slopes(y);
          to[0] = f;
          to[1] = g;
        };
        const span = [0, path.end];
        const options = {
          rtol: 1e-13,
          atol: 1e-18,
          times: timesOf(path),
          maxSteps: 2_000_000,
          method: 'dormand-prince'
        };
        out.set(integrate({ rhs, y0: startOf(work, row(i)), span }, options).y, 2 * path.samples * i);
      }
      return 0;
    };
  }
};

/** Equilibria: how many of each class, how many in all, and a sum over them. */
async function equilibria() {
  const engine = await loadEngine();
  const table = engine.makeEquilibriaTable();
  const k = new Float64Array(engine.rates.PLANAR_RATES);
  const found = new Float64Array(12);
  const isSigmoid = work !== 'W4a';
  const write = rateWriter(work, engine);
  const { equilibriaFast } = engine;
  const { points, classes } = table;
  const counts = new Int32Array(10);
  const sums = new Float64Array(1);
  /** A short stretch: optimised code is entered at its beginning, not in the middle of one long loop. */
  const stretch = (from, to) => {
    let sum = sums[0];
    for (let i = from; i < to; i += 1) {
      write(draws, 8 * i, k);
      equilibriaFast(k, isSigmoid, table);
      const n = table.count;
      for (let j = 0; j < n; j += 1) {
        counts[classes[j]] += 1;
        sum += points[10 * j + 6] + points[10 * j + 1];
      }
    }
    sums[0] = sum;
  };
  return {
    found,
    run() {
      counts.fill(0);
      sums.fill(0);
      for (let from = 0; from < count; from += 500) stretch(from, Math.min(count, from + 500));
      found.set(counts);
      found[10] = counts.reduce((total, n) => total + n);
      found[11] = sums[0];
      return count;
    }
  };
}

/** Births, deaths and meals: the mean and spread of the resource at the end, and how many events or leaps. */
async function chance() {
  const engine = await loadEngine();
  const [r, K, a, e, m, n0, m0, end] = draws;
  const { events, advanceLeaps } = engine;
  const { advanceEvents } = events;
  const k = engine.eventRatesOf({
    interaction: 'consumer-resource',
    first: { growth: { kind: 'logistic', r, K } },
    second: { mortality: m },
    feeding: { response: 'holling-1', a, e }
  });
  const s = new Float64Array(events.RUN_STATE);
  const none = engine.planarTimes([]);
  const out = new Float64Array(2);
  const found = new Float64Array(3);
  let index = 0;
  let sum = 0;
  let square = 0;
  return {
    found,
    run() {
      let units = 0;
      for (let i = 0; i < count; i += 1) {
        const stream = engine.randomStream(1, index);
        index += 1;
        s.fill(0);
        s[events.FIRST] = n0;
        s[events.SECOND] = m0;
        s[events.END] = end;
        s[events.LOST_FIRST] = Infinity;
        s[events.LOST_SECOND] = Infinity;
        if (work === 'W5s') {
          while (advanceEvents(s, k, stream.state, none, out, 0, 4096) === 0);
          units += s[events.EVENTS];
        } else {
          while (advanceLeaps(s, k, stream, none, out, 0, 256, { tau: 0.02 }) === 0);
          units += Math.round(end / 0.02);
        }
        const n = s[events.FIRST];
        sum += n;
        square += n * n;
      }
      found[0] = sum / index;
      found[1] = Math.sqrt(square / index - found[0] ** 2);
      found[2] = index;
      return units;
    }
  };
}

const cpuNs = () => {
  const { user, system } = process.cpuUsage();
  return 1000 * (user + system);
};
const median = (values) => [...values].sort((a, b) => a - b)[values.length >> 1];

let run;
let keep;
let steps = 0;
if (path) {
  const out = new Float64Array(2 * path.samples * count);
  const follow = await followers[name](out);
  run = () => {
    steps = follow() / count;
    return count;
  };
  keep = () => writeFileSync(outFile, new Uint8Array(out.buffer, 0, 16 * path.samples * Math.min(count, path.kept)));
} else {
  const job = work.startsWith('W4') ? await equilibria() : await chance();
  run = job.run;
  keep = () => writeFileSync(outFile, new Uint8Array(job.found.buffer));
}

/** Repetitions of at least 5 ms, so that the clock of the process is fine enough, for some time. */
function repeat(forNs) {
  const values = [];
  const begin = cpuNs();
  while (values.length < 3 || cpuNs() - begin < forNs) {
    const from = cpuNs();
    let units = 0;
    let now;
    do {
      units += run();
      now = cpuNs();
    } while (now - from < 5e6);
    values.push((now - from) / units);
    if (forNs === 0) break;
  }
  return values;
}
if (name === 'reference') run();
else repeat(0.4e9 * Number(seconds));
const values = name === 'reference' ? [0] : repeat(1e9 * Number(seconds));
keep();
console.log(JSON.stringify({ ns: median(values), steps, repetitions: values.length }));
