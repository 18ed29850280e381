/**
 * Workload W1 and who computes it: the classical consumer and resource (r 1.1, a 0.4, e·a 0.1, m 0.4) from (10, 5)
 * over 200 time units, at 2,001 equally spaced times, relative tolerance 1e-8, absolute 1e-10.
 */
import { bundle } from './bundle.mjs';

const rates = { r: 1.1, a: 0.4, ea: 0.1, m: 0.4 };
const start = [10, 5];
const span = [0, 200];
const nOutputs = 2001;
const rtol = 1e-8;
const atol = 1e-10;
const spacing = (span[1] - span[0]) / (nOutputs - 1);
const times = Float64Array.from({ length: nOutputs }, (_, i) => i * spacing);

/** Right-hand side for libraries that want a new array each time. */
const slopes = (y) => [y[0] * (rates.r - rates.a * y[1]), y[1] * (rates.ea * y[0] - rates.m)];

/** Constant along every true path of this model; how far it drifts is an error measured without any reference. */
const invariant = (x, y) => rates.ea * x - rates.m * Math.log(x) + rates.a * y - rates.r * Math.log(y);

const model = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'exponential', r: rates.r } },
  second: { mortality: rates.m },
  feeding: { response: 'holling-1', a: rates.a, e: rates.ea / rates.a }
};

const loadEngine = async () => import(await bundle('src/lib/dynamics/index.ts'));

/** The engine's integrator with the model's own right-hand side. */
async function integrator(options) {
  const { compile, integrate } = await loadEngine();
  const system = compile(model);
  const rhs = (_t, y, out) => system.rhs(y[0], y[1], out);
  return () => integrate({ rhs, y0: start, span }, { rtol, atol, times, ...options });
}

/**
 * Contenders by name. Each makes a function that computes the workload once and returns the times and the states there,
 * row by row, and how many steps it took.
 */
export const contenders = {
  async 'Sedgeline, integrator'() {
    const run = await integrator({ method: 'dormand-prince' });
    return () => {
      const { t, y, steps } = run();
      return { t, y, nSteps: steps.accepted + steps.rejected };
    };
  },
  /** What the pages show: steps held tighter than asked, in logarithms of the abundances, with events watched. */
  async 'Sedgeline, as shown'() {
    const { simulate } = await loadEngine();
    const options = { start: { x: start[0], y: start[1] }, span, samples: nOutputs, rtol, atol };
    return () => {
      const { t, x, y, steps } = simulate(model, options);
      const states = new Float64Array(2 * t.length);
      for (let i = 0; i < t.length; i += 1) {
        states[2 * i] = x[i];
        states[2 * i + 1] = y[i];
      }
      return { t, y: states, nSteps: steps.accepted + steps.rejected };
    };
  },
  async odex() {
    const { Solver } = await import('odex');
    return () => {
      const solver = new Solver(2);
      solver.relativeTolerance = rtol;
      solver.absoluteTolerance = atol;
      solver.denseOutput = true;
      const y = new Float64Array(2 * nOutputs);
      let i = 0;
      const collect = (_x, state) => {
        if (i >= nOutputs) return;
        y[2 * i] = state[0];
        y[2 * i + 1] = state[1];
        i += 1;
      };
      const { nStep } = solver.solve(
        (_t, state) => slopes(state),
        span[0],
        start,
        span[1],
        solver.grid(spacing, collect)
      );
      return { t: times.subarray(0, i), y: y.subarray(0, 2 * i), nSteps: nStep };
    };
  },
  /** It has no dense output and only an absolute tolerance on slopes: its own steps, at the tolerance that gives a like error. */
  async mathjs() {
    const { create, all } = await import('mathjs');
    const { solveODE } = create(all);
    return () => {
      const { t, y } = solveODE((_t, state) => slopes(state), span, start, { method: 'RK45', tol: 2e-6 });
      return { t, y: Float64Array.from(y.flat()), nSteps: t.length - 1 };
    };
  }
};

/** Largest |y − true| over the outputs, as a share of each species' largest abundance, against a path at 1e-13. */
export async function trueError({ t, y }) {
  const reference = (await integrator({ method: 'dormand-prince', rtol: 1e-13, atol: 1e-14, times: t }))();
  let worst = 0;
  for (const species of [0, 1]) {
    let top = 0;
    let error = 0;
    for (let i = 0; i < t.length; i += 1) {
      top = Math.max(top, Math.abs(reference.y[2 * i + species]));
      error = Math.max(error, Math.abs(y[2 * i + species] - reference.y[2 * i + species]));
    }
    worst = Math.max(worst, error / top);
  }
  return worst;
}

/** How far the constant of the motion drifts over the outputs, relative to its first value. */
export function drift({ t, y }) {
  const first = invariant(start[0], start[1]);
  let worst = 0;
  for (let i = 0; i < t.length; i += 1) {
    worst = Math.max(worst, Math.abs(invariant(y[2 * i], y[2 * i + 1]) / first - 1));
  }
  return worst;
}
