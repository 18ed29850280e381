/** Laws that every path obeys, over models of every kind and many decades of scale. */
import {
  simulate,
  type ConsumerResourceModel,
  type GrowthSpec,
  type ModelSpec,
  type TrajectoryResult
} from '$lib/dynamics';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';

const settings = { seed: 20_261_201, numRuns: 100 };

/** Log-uniform between two bounds. */
const between = (low: number, high: number) =>
  fc.double({ min: Math.log(low), max: Math.log(high), noNaN: true }).map((v) => Math.exp(v));
const orNone = (value: fc.Arbitrary<number>) =>
  fc.oneof({ weight: 3, arbitrary: fc.constant(0) }, { weight: 1, arbitrary: value });

/** Abundances are drawn around 1 and scaled by `unit`, so that all terms matter in every unit. */
const growth = (unit: number): fc.Arbitrary<GrowthSpec> =>
  fc.oneof(
    fc.record({ kind: fc.constant('exponential' as const), r: fc.double({ min: -0.5, max: 1, noNaN: true }) }),
    fc.record({ kind: fc.constant('logistic' as const), r: between(0.05, 3), K: between(0.2, 5).map((k) => k * unit) }),
    fc
      .record({ r: between(0.05, 2), K: between(0.5, 5), part: fc.double({ min: 0.05, max: 0.9, noNaN: true }) })
      .map(({ r, K, part }) => ({ kind: 'allee' as const, r, K: K * unit, A: part * K * unit }))
  );
const management = (unit: number) =>
  fc
    .record({ effort: orNone(between(0.01, 1)), quota: orNone(between(0.01, 1)), stocking: orNone(between(0.01, 0.5)) })
    .map(({ effort, quota, stocking }) => ({ removal: { effort, quota: quota * unit }, stocking: stocking * unit }));

const competition = (unit: number): fc.Arbitrary<ModelSpec> =>
  fc
    .record({
      g1: growth(unit),
      g2: growth(unit),
      m1: management(unit),
      m2: management(unit),
      b12: between(0.05, 2),
      b21: between(0.05, 2)
    })
    .map(({ g1, g2, m1, m2, b12, b21 }) => ({
      interaction: 'competition',
      first: { growth: g1, ...m1 },
      second: { growth: g2, ...m2 },
      competition:
        g1.kind === 'logistic' && g2.kind === 'logistic'
          ? { form: 'coefficients', alpha12: b12, alpha21: b21 }
          : { form: 'encounters', b12: b12 / unit, b21: b21 / unit }
    }));
const consumerResource = (unit: number): fc.Arbitrary<ModelSpec> =>
  fc
    .record({
      g1: growth(unit),
      m1: management(unit),
      m2: management(unit),
      second: fc.oneof(
        fc.record({ mortality: between(0.05, 1), selfLimitation: orNone(between(0.01, 1).map((d) => d / unit)) }),
        fc.record({
          growth: fc.record({ kind: fc.constant('logistic' as const), r: between(0.05, 1), K: fc.constant(unit) })
        }),
        fc.record({
          growth: fc.record({ kind: fc.constant('leslie' as const), r: between(0.05, 1), g: between(0.1, 2) })
        })
      ),
      response: fc.constantFrom('holling-1', 'holling-2', 'holling-3'),
      a: between(0.2, 5),
      h: between(0.05, 2),
      e: between(0.05, 1),
      interference: orNone(between(0.1, 2))
    })
    .map(({ g1, m1, m2, second, response, a, h, e, interference }): ConsumerResourceModel => ({
      interaction: 'consumer-resource',
      first: { growth: g1, ...m1 },
      second: { ...second, ...m2 },
      feeding:
        response === 'holling-1'
          ? { response, a: a / unit, e }
          : response === 'holling-2'
            ? { response, a: a / unit, h, e, interference: interference / unit }
            : { response: 'holling-3', a: a / unit / unit, h, e, interference: interference / unit }
    }));
const start = (unit: number) =>
  fc.record({ x: between(1e-3, 5).map((n) => n * unit), y: between(1e-3, 5).map((n) => n * unit) });
const model = fc.constantFrom(1e-5, 1e-2, 1, 1e3, 1e6).chain((unit) =>
  fc.record({
    unit: fc.constant(unit),
    spec: fc.oneof(competition(unit), consumerResource(unit)),
    start: start(unit)
  })
);

const run = (spec: ModelSpec, from: { x: number; y: number }, rtol: number, unit: number): TrajectoryResult =>
  simulate(spec, { start: from, span: [0, 30], samples: 31, rtol, atol: 1e-10 * unit });

describe('paths of any model', () => {
  it('are never negative, and stay at 0 once a species has run out', () => {
    fc.assert(
      fc.property(model, ({ spec, start: from, unit }) => {
        const path = run(spec, from, 1e-7, unit);
        expect([...path.x, ...path.y].every((n) => Number.isFinite(n) && n >= 0)).toBe(true);
        if (path.outcome.status === 'reached') expect(path.t).toHaveLength(31);
        for (const out of path.events.filter((event) => event.kind === 'ran out')) {
          const after = path.t.findIndex((t) => t > out.t);
          if (after >= 0)
            expect((out.species === 'first' ? path.x : path.y).slice(after).every((n) => n === 0)).toBe(true);
        }
      }),
      settings
    );
  });

  it('reach the end, grow without limit, or lose their meaning', () => {
    fc.assert(
      fc.property(model, ({ spec, start: from, unit }) => {
        const { outcome, x, y, events } = run(spec, from, 1e-7, unit);
        if (outcome.status === 'reached') return;
        // A ceiling that follows a resource has no meaning once the resource is gone and the consumer is still stocked.
        const undefinedNow =
          'growth' in spec.second && spec.second.growth?.kind === 'leslie' && events.some((e) => e.kind === 'ran out');
        if (undefinedNow) return;
        const grows = outcome.status === 'failed' && ['notFinite', 'stepTooSmall'].includes(outcome.reason);
        expect(grows).toBe(true);
        expect(Math.max(...x, ...y)).toBeGreaterThan(20 * unit);
      }),
      settings
    );
  });

  it('agree with themselves at a hundred times the accuracy, to the accuracy asked for', () => {
    fc.assert(
      fc.property(model, ({ spec, start: from, unit }) => {
        const coarse = run(spec, from, 1e-6, unit);
        const fine = run(spec, from, 1e-8, unit);
        const apart = (a: number[], b: number[]): number =>
          Math.max(...b.slice(0, a.length).map((n, i) => Math.abs(a[i]! - n) / (1e-5 * n + 1e-8 * unit)));
        expect(apart(coarse.x, fine.x)).toBeLessThanOrEqual(1);
        expect(apart(coarse.y, fine.y)).toBeLessThanOrEqual(1);
      }),
      settings
    );
  });

  it('keep an absent species absent, unless it is stocked', () => {
    fc.assert(
      fc.property(model, ({ spec, start: from, unit }) => {
        const { stocking = 0, removal } = spec.second;
        fc.pre(stocking <= (removal?.quota ?? 0));
        expect(run(spec, { x: from.x, y: 0 }, 1e-6, unit).y.every((n) => n === 0)).toBe(true);
      }),
      settings
    );
  });
});
