/**
 * The workloads. `width` numbers a row of draws, `values` numbers an answer, `kept` answers that are compared.
 * W1 one trajectory; W2 and W3 ensembles; W4 equilibria with Jacobians, eigenvalues and classes; W5 demographic chance.
 */
const N_TRAJECTORIES = 10_000;
const N_EQUILIBRIA = 100_000;

export const workloads = {
  W1: {
    title: 'one trajectory: exponential resource, type I; t to 200, 2,001 outputs, rtol 1e-8, atol 1e-10',
    unit: 'trajectory',
    count: 1,
    path: { end: 200, samples: 2001, rtol: 1e-8, atol: 1e-10, kept: 1 }
  },
  W2: {
    title: '10,000 logistic competition models; t to 100, 201 outputs, rtol 1e-6, atol 1e-9',
    unit: 'trajectory',
    count: N_TRAJECTORIES,
    path: { end: 100, samples: 201, rtol: 1e-6, atol: 1e-9, kept: 40 }
  },
  W3: {
    title: '10,000 logistic resources under type II feeding; t to 200, 401 outputs, rtol 1e-6, atol 1e-9',
    unit: 'trajectory',
    count: N_TRAJECTORIES,
    path: { end: 200, samples: 401, rtol: 1e-6, atol: 1e-9, kept: 40 }
  },
  W4a: { title: 'equilibria of 100,000 competition models', unit: 'model', count: N_EQUILIBRIA },
  W4b: { title: 'equilibria of 100,000 type III models', unit: 'model', count: N_EQUILIBRIA },
  W4c: {
    title: 'equilibria of 100,000 type III models with self-limitation (a quintic)',
    unit: 'model',
    count: N_EQUILIBRIA
  },
  W5s: { title: 'single events, 600 prey and 400 predators, t to 100', unit: 'event', count: 1 },
  W5t: { title: 'the same by leaps of 0.02', unit: 'leap', count: 4 }
};

/** The rates of the first workload: r, a, e a, m and the start. */
const classical = [1.1, 0.4, 0.1, 0.4, 10, 5];
/** Of the fifth: r, K, a, e, m, and the resting place at 600 and 400, and the end. */
const chance = [0.8, 1800, 0.8 / 600, 0.5, 0.4, 600, 400, 100];

const drawers = {
  W2: (u, row) =>
    row.set([u(0.2, 1.5), u(50, 500), u(0.2, 1.6), u(0.2, 1.5), u(50, 500), u(0.2, 1.6), u(1, 60), u(1, 60)]),
  W3: (u, row) => {
    const [K, h, e] = [u(20, 120), u(0.2, 1.5), u(0.2, 0.8)];
    row.set([u(0.4, 1.6), K, u(0.02, 0.2), h, e, u(0.1, 0.5), u(0.1, 0.9) * K, u(1, 15)]);
  },
  W4a: (u, row) => row.set([u(0.1, 2), u(50, 1000), u(0.1, 2), u(0.1, 2), u(50, 1000), u(0.1, 2)]),
  W4b: (u, row) => row.set([u(0.2, 2), u(20, 1000), 10 ** u(-4, -1), u(0.05, 1), u(0.1, 1), u(0.05, 0.8)]),
  W4c: (u, row) =>
    row.set([u(0.2, 2), u(20, 1000), 10 ** u(-4, -1), u(0.05, 1), u(0.1, 1), u(0.05, 0.8), 10 ** u(-4, -1)])
};

/** Draws of the third workload whose abundances sink below this are left out: at an absolute tolerance they lose their phase. */
const SHALLOW = 1e-4;

/** @returns the draws of a workload, eight numbers a row */
export function drawsOf(name, engine) {
  if (name === 'W1') return Float64Array.from(classical);
  if (name.startsWith('W5')) return Float64Array.from(chance);
  const { count, path } = workloads[name];
  const draws = new Float64Array(8 * count);
  const stream = engine.randomStream(20, name.charCodeAt(1), name.charCodeAt(2) || 0);
  const u = (low, high) => low + (high - low) * stream.uniform();
  const write = name === 'W3' ? rateWriter(name, engine) : null;
  const k = new Float64Array(engine.rates.PLANAR_RATES);
  const follow = name === 'W3' ? engine.makePlanarIntegrator({ rtol: 1e-5 }) : null;
  const times =
    path && engine.planarTimes(Array.from({ length: path.samples }, (_, i) => (i * path.end) / (path.samples - 1)));
  const out = new Float64Array(2 * (path?.samples ?? 0));
  for (let i = 0; i < count;) {
    const row = draws.subarray(8 * i, 8 * i + 8);
    drawers[name](u, row);
    if (follow) {
      write(row, 0, k);
      follow.run(engine.PLANAR_KERNELS.saturating, k, row[6], row[7], 0, path.end, times, out, 0);
      if (!out.every((value) => value > SHALLOW)) continue;
    }
    i += 1;
  }
  return draws;
}

/** @returns what writes the row of draws that begins at `at` as the rates of the engine's kernels */
export function rateWriter(name, { rates }) {
  const { P0, P1, Q0, Q1, C, D, A, H, E } = rates;
  if (name === 'W1') {
    return (d, at, k) => {
      k[P0] = d[at];
      k[C] = d[at + 1];
      k[D] = -d[at + 2];
      k[Q0] = -d[at + 3];
    };
  }
  if (name === 'W2' || name === 'W4a') {
    return (d, at, k) => {
      k[P0] = d[at];
      k[P1] = -d[at] / d[at + 1];
      k[C] = (d[at] * d[at + 2]) / d[at + 1];
      k[Q0] = d[at + 3];
      k[Q1] = -d[at + 3] / d[at + 4];
      k[D] = (d[at + 3] * d[at + 5]) / d[at + 4];
    };
  }
  const isLimited = name === 'W4c';
  return (d, at, k) => {
    k[P0] = d[at];
    k[P1] = -d[at] / d[at + 1];
    k[A] = d[at + 2];
    k[H] = d[at + 3];
    k[E] = d[at + 4];
    k[Q0] = -d[at + 5];
    // In the third workload the seventh number is a start.
    k[Q1] = isLimited ? -d[at + 6] : 0;
  };
}

/** The right-hand side for libraries that want a new array each time. */
export function slopesOf(name, d) {
  if (name === 'W1') return (y) => [y[0] * (d[0] - d[1] * y[1]), y[1] * (d[2] * y[0] - d[3])];
  if (name === 'W2') {
    return (y) => [d[0] * y[0] * (1 - (y[0] + d[2] * y[1]) / d[1]), d[3] * y[1] * (1 - (y[1] + d[5] * y[0]) / d[4])];
  }
  return (y) => {
    const eaten = (d[2] * y[0]) / (1 + d[2] * d[3] * y[0]);
    return [d[0] * y[0] * (1 - y[0] / d[1]) - eaten * y[1], y[1] * (d[4] * eaten - d[5])];
  };
}

/** Where a row starts. */
export const startOf = (name, d) => (name === 'W1' ? [d[4], d[5]] : [d[6], d[7]]);
