import { describe, expect, it } from 'vitest';
import type { ModelSpec } from '../model/spec';
import { compile } from '../model/compile';
import {
  A,
  AH,
  B,
  B1,
  CHANCE,
  D,
  D1,
  D2,
  eventRatesOf,
  IS_SIGMOID,
  Q,
  R,
  S,
  SPECIES_WIDTH,
  W,
  WHOLE,
  X
} from './eventRates';
import { runStochastic, runStochasticChunk, summariseStochastic, type StochasticPlan } from './stochastic';

const growing: ModelSpec = {
  interaction: 'competition',
  first: { growth: { kind: 'exponential', r: 0.05 } },
  second: { growth: { kind: 'exponential', r: -0.02 } },
  competition: { form: 'encounters', b12: 0, b21: 0 }
};
const feeding: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 1, K: 3000 }, removal: { effort: 0.05, quota: 3 }, stocking: 2 },
  second: { mortality: 0.3, selfLimitation: 0.0004 },
  feeding: { response: 'holling-2', a: 0.002, h: 0.2, e: 0.6, interference: 0.001 }
};
const plan: StochasticPlan = {
  spec: feeding,
  seed: 3,
  runs: 12,
  start: { x: 600, y: 400 },
  span: [0, 5],
  samples: 6,
  method: 'exact',
  turnover: { first: 0.2 },
  noise: { first: 0.1, second: 0.1, together: 0.5 }
};

/** Mean change of both species by the events, which must be that of the equations. */
function driftOf(k: Float64Array, n: number, m: number): [number, number] {
  const own = (at: number, mine: number, other: number): number =>
    mine * (k[at + B]! + k[at + B1]! * mine) +
    k[at + S]! -
    mine * (k[at + D]! + k[at + D1]! * mine + k[at + D2]! * mine * mine + k[at + X]! * other) -
    k[at + Q]!;
  const eaten = k[IS_SIGMOID]! === 1 ? n * n : n;
  const meals = (k[A]! * eaten * m) / (1 + k[AH]! * eaten + k[W]! * m);
  return [own(0, n, m) - meals, own(SPECIES_WIDTH, m, n) + (k[WHOLE]! + k[CHANCE]!) * meals - (k[R]! * m * m) / n];
}

describe('events', () => {
  const allee = { kind: 'allee', r: 0.5, K: 100, A: 20 } as const;
  const specs: ModelSpec[] = [
    feeding,
    growing,
    {
      ...growing,
      first: { growth: allee, removal: { effort: 0.1 } },
      competition: { form: 'encounters', b12: 0.01, b21: 0.02 }
    } as ModelSpec,
    {
      ...feeding,
      first: { growth: allee },
      second: { growth: { kind: 'leslie', r: 0.4, g: 0.5 } },
      feeding: { response: 'holling-3', a: 0.002, h: 0.2, e: 2.3 }
    } as ModelSpec
  ];
  it.each(specs)('change the counts as the equations do in the mean (%#)', (spec) => {
    const out = new Float64Array(2);
    for (const [n, m] of [
      [30, 12],
      [170, 45]
    ] as const) {
      compile(spec).rhs(n, m, out);
      for (const turnover of [0, 0.7]) {
        const [first, second] = driftOf(eventRatesOf(spec, { first: turnover, second: 0 }), n, m);
        // Turnover adds births and needs deaths to match.
        expect(first).toBeCloseTo(out[0]!, 9);
        expect(second).toBeCloseTo(out[1]!, 9);
      }
    }
  });
});

describe('runs under chance', () => {
  it.each(['exact', 'leap', 'smooth'] as const)('give the same bytes however they are cut up (%s)', (method) => {
    const spec = method === 'smooth' ? { ...feeding, first: { growth: feeding.first.growth } } : feeding;
    const own = { ...plan, spec: spec as ModelSpec, method };
    const whole = runStochasticChunk(own, 0, 12)!;
    const parts = [runStochasticChunk(own, 5, 12)!, runStochasticChunk(own, 0, 5)!];
    expect(parts[0]!.values).toEqual(whole.values.slice(60));
    expect(parts[1]!.values).toEqual(whole.values.slice(0, 60));
    expect(summariseStochastic(own, parts)).toEqual(summariseStochastic(own, [whole]));
    expect(() => summariseStochastic(own, parts.slice(1))).toThrow(RangeError);
    expect(runStochastic(own, () => true)).toBeNull();
  });

  it('leap to the same means and spreads as single events', () => {
    const calm: StochasticPlan = { ...plan, noise: {}, runs: 600, span: [0, 10], samples: 3, seed: 5 };
    const exact = runStochastic(calm)!;
    const leaps = runStochastic({ ...calm, method: 'leap', seed: 6 })!;
    expect(leaps.events).toBeGreaterThan(0.9 * exact.events);
    for (const side of ['x', 'y'] as const) {
      for (const j of [1, 2]) {
        const variance = exact.variance[side][j]!;
        const error = Math.sqrt((exact.variance[side][j]! + leaps.variance[side][j]!) / 600);
        expect(Math.abs(leaps.mean[side][j]! - exact.mean[side][j]!)).toBeLessThan(4 * error);
        expect(Math.abs(leaps.variance[side][j]! / variance - 1)).toBeLessThan(4 * Math.sqrt(4 / 600));
      }
    }
  });

  it('grow as many good and bad years say', () => {
    const runs = 4000;
    const noise = { first: 0.2, second: 0.1, together: -0.6, persistence: 0.5, every: 0.5 };
    const start = { x: 100, y: 1000 };
    const smooth: StochasticPlan = {
      spec: growing,
      seed: 8,
      runs,
      start,
      span: [0, 10],
      samples: 2,
      method: 'smooth',
      noise
    };
    const { values, failed } = runStochasticChunk(smooth, 0, runs)!;
    expect(failed.some(Boolean)).toBe(false);
    const logs = Array.from({ length: runs }, (_, i) => [
      Math.log(values[4 * i + 2]! / 100),
      Math.log(values[4 * i + 3]! / 1000)
    ]);
    const mean = [0, 1].map((s) => logs.reduce((sum, row) => sum + row[s]!, 0) / runs);
    const moment = (a: number, b: number): number =>
      logs.reduce((sum, row) => sum + (row[a]! - mean[a]!) * (row[b]! - mean[b]!), 0) / runs;
    // The sum of 20 stretches, each correlated with the one k before by 0.5^k.
    let sum = 0;
    for (let i = 0; i < 20; i++) for (let j = 0; j < 20; j++) sum += 0.5 ** Math.abs(i - j);
    const variance = [0.2, 0.1].map((sd) => (sd * 0.5) ** 2 * sum);
    for (const s of [0, 1]) {
      expect(Math.abs(mean[s]! - 10 * [0.05, -0.02][s]!)).toBeLessThan(4 * Math.sqrt(variance[s]! / runs));
      expect(Math.abs(moment(s, s) / variance[s]! - 1)).toBeLessThan(4 * Math.sqrt(2 / runs));
    }
    expect(Math.abs(moment(0, 1) / Math.sqrt(moment(0, 0) * moment(1, 1)) + 0.6)).toBeLessThan(4 / Math.sqrt(runs));
  });

  it('add years to births and deaths among individuals', () => {
    const runs = 1500;
    const noise = { first: 0.3 };
    const start = { x: 400, y: 0 };
    const found = runStochastic({
      spec: growing,
      seed: 9,
      runs,
      start,
      span: [0, 3],
      samples: 2,
      method: 'exact',
      noise
    })!;
    const smooth = runStochastic({
      spec: growing,
      seed: 10,
      runs,
      start,
      span: [0, 3],
      samples: 2,
      method: 'smooth',
      noise
    })!;
    const error = Math.sqrt((found.variance.x[1]! + smooth.variance.x[1]!) / runs);
    expect(Math.abs(found.mean.x[1]! - smooth.mean.x[1]!)).toBeLessThan(4 * error);
    // Births and deaths add their own spread, small at 400 beside that of the years.
    expect(found.variance.x[1]! / smooth.variance.x[1]!).toBeGreaterThan(0.8);
    expect(found.variance.x[1]! / smooth.variance.x[1]!).toBeLessThan(1.3);
  });

  it('end where nothing can happen, and where they are told to', () => {
    const dying: ModelSpec = { ...growing, first: { growth: { kind: 'exponential', r: -2 } } } as ModelSpec;
    const start = { x: 3, y: 2 };
    const base: StochasticPlan = { spec: dying, seed: 1, runs: 20, start, span: [0, 400], samples: 5, method: 'exact' };
    const gone = runStochastic(base)!;
    expect(gone.lost.first.share).toBe(1);
    expect(gone.mean.x.slice(1)).toEqual([0, 0, 0, 0]);
    const stopped = runStochasticChunk({ ...base, stopsAtLoss: true }, 0, 20)!;
    for (let i = 0; i < 20; i++) {
      expect(Math.min(stopped.lost[2 * i]!, stopped.lost[2 * i + 1]!)).toBeLessThan(Infinity);
      expect(Math.max(stopped.lost[2 * i]!, stopped.lost[2 * i + 1]!)).toBe(Infinity);
    }
    const cut = runStochastic({ ...base, spec: growing, start: { x: 300, y: 0 }, mostEvents: 100 })!;
    expect(cut.failed).toBe(20);
  });

  it('refuse plans that make no sense', () => {
    expect(() => runStochasticChunk({ ...plan, start: { x: 1.5, y: 0 } }, 0, 1)).toThrow(RangeError);
    expect(() => runStochasticChunk(plan, 0, 13)).toThrow(RangeError);
    expect(() => runStochasticChunk({ ...plan, noise: { together: 2 } }, 0, 1)).toThrow(RangeError);
    expect(() => runStochasticChunk({ ...plan, turnover: { first: -1 } }, 0, 1)).toThrow(RangeError);
    expect(() => runStochasticChunk({ ...plan, method: 'smooth' }, 0, 1)).toThrow(RangeError);
  });
});
