import { describe, expect, it } from 'vitest';
import type { ConsumerResourceModel, ModelSpec } from '../model/spec';
import { simulate } from './trajectory';

const consumer = (change: Partial<ConsumerResourceModel>): ConsumerResourceModel => ({
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 1, K: 100 } },
  second: { mortality: 0.3 },
  feeding: { response: 'holling-2', a: 0.05, h: 0.5, e: 0.3 },
  ...change
});
const rivals = (quota: number, stocking = 0): ModelSpec => ({
  interaction: 'competition',
  first: { growth: { kind: 'logistic', r: 0.9, K: 400 }, removal: { quota }, stocking },
  second: { growth: { kind: 'logistic', r: 0.6, K: 300 } },
  competition: { form: 'coefficients', alpha12: 0.7, alpha21: 0.5 }
});

describe('a species under a quota', () => {
  it('runs out once, stays at exactly 0, and lets the other go on', () => {
    const result = simulate(rivals(150), { start: { x: 200, y: 100 }, span: [0, 60] });
    const out = result.events.filter((e) => e.kind === 'ran out');
    expect(out).toHaveLength(1);
    expect(out[0]).toMatchObject({ species: 'first', value: 0 });
    result.t.forEach((t, i) => {
      expect(result.x[i]).toBeGreaterThanOrEqual(0);
      if (t > out[0]!.t) expect(result.x[i]).toBe(0);
    });
    expect(result.y.at(-1)).toBeCloseTo(300, 6);
  });

  it('is held at 0 from the start when it is absent, unless stocking outweighs the quota', () => {
    const held = simulate(rivals(5, 3), { start: { x: 0, y: 100 }, span: [0, 50] });
    expect(new Set(held.x)).toEqual(new Set([0]));
    expect(held.events).toEqual([]);
    const refilled = simulate(rivals(5, 8), { start: { x: 0, y: 100 }, span: [0, 50] });
    expect(refilled.x.at(-1)).toBeGreaterThan(100);
  });

  it('takes a consumer whose ceiling follows the resource along with it', () => {
    const spec = consumer({
      first: { growth: { kind: 'logistic', r: 1, K: 100 }, removal: { quota: 40 } },
      second: { growth: { kind: 'leslie', r: 0.5, g: 0.2 } },
      feeding: { response: 'holling-1', a: 0.01, e: 0 }
    });
    const result = simulate(spec, {
      start: { x: 80, y: 10 },
      span: [0, 30],
      thresholds: [{ species: 'second', below: 1e-3 }]
    });
    expect(result.outcome.status).toBe('reached');
    expect(result.events.map((e) => `${e.species} ${e.kind}`)).toEqual([
      'first ran out',
      'second fell below',
      'second ran out'
    ]);
    expect(result.y.at(-1)).toBe(0);
  });
});

describe('absence and stocking', () => {
  it('keeps an absent species at exactly 0', () => {
    const result = simulate(consumer({}), { start: { x: 0, y: 5 }, span: [0, 40], samples: 5 });
    expect(new Set(result.x)).toEqual(new Set([0]));
    result.t.forEach((t, i) => expect(result.y[i]! / (5 * Math.exp(-0.3 * t))).toBeCloseTo(1, 8));
  });

  it('starts a stocked species from nothing: n(t) = s (e^{rt} - 1)/r for exponential growth', () => {
    const spec: ModelSpec = {
      interaction: 'competition',
      first: { growth: { kind: 'exponential', r: 0.2 }, stocking: 3 },
      second: { growth: { kind: 'exponential', r: -0.1 } },
      competition: { form: 'encounters', b12: 0, b21: 0 }
    };
    const result = simulate(spec, { start: { x: 0, y: 1 }, span: [0, 20], times: [1e-4, 0.01, 1, 20], rtol: 1e-9 });
    result.t.forEach((t, i) => expect(result.x[i]! / ((3 * Math.expm1(0.2 * t)) / 0.2)).toBeCloseTo(1, 8));
  });
});

describe('thresholds', () => {
  it('report every crossing in the direction asked, in order', () => {
    const spec = consumer({
      first: { growth: { kind: 'exponential', r: 0.8 } },
      second: { mortality: 0.3 },
      feeding: { response: 'holling-1', a: 0.02, e: 0.25 }
    });
    const result = simulate(spec, {
      start: { x: 120, y: 40 },
      span: [0, 60],
      thresholds: [{ species: 'first', below: 30, above: 100 }]
    });
    const kinds = result.events.map((e) => e.kind);
    expect(kinds.length).toBeGreaterThan(5);
    kinds.forEach((kind, i) => expect(kind).toBe(i % 2 === 0 ? 'fell below' : 'rose above'));
    const times = result.events.map((e) => e.t);
    expect([...times].sort((a, b) => a - b)).toEqual(times);
  });

  it('count a start on the line that leaves it at once, but not a start beyond it', () => {
    const on = simulate(rivals(0), {
      start: { x: 500, y: 0 },
      span: [0, 1],
      thresholds: [{ species: 'first', below: 500 }]
    });
    expect(on.events).toEqual([{ t: 0, species: 'first', kind: 'fell below', value: 500 }]);
    const past = simulate(rivals(0), {
      start: { x: 499, y: 0 },
      span: [0, 1],
      thresholds: [{ species: 'first', below: 500 }]
    });
    expect(past.events).toEqual([]);
  });
});

describe('what cannot be followed', () => {
  it('is a finding with the time reached, and the part before it is given', () => {
    const spec: ModelSpec = {
      interaction: 'competition',
      first: { growth: { kind: 'exponential', r: 1 } },
      second: { growth: { kind: 'exponential', r: 0.1 } },
      competition: { form: 'encounters', b12: 0, b21: 0 }
    };
    const result = simulate(spec, { start: { x: 1, y: 1 }, span: [0, 1000] });
    expect(result.outcome).toMatchObject({ status: 'failed', reason: 'notFinite' });
    if (result.outcome.status === 'failed') expect(result.outcome.t).toBeCloseTo(Math.log(1e300), 6);
    expect(result.t.at(-1)).toBe(690);
    expect(result.x.every(Number.isFinite)).toBe(true);
    expect(result.remark).toMatch(/range of numbers/);
  });

  it('respects the budgets', () => {
    const few = simulate(consumer({}), { start: { x: 10, y: 5 }, span: [0, 1e4], maxSteps: 300 });
    expect(few.outcome).toMatchObject({ status: 'failed', reason: 'tooManySteps' });
    const stopped = simulate(consumer({}), { start: { x: 10, y: 5 }, span: [0, 1e4], shouldStop: () => true });
    expect(stopped.outcome).toMatchObject({ status: 'failed', reason: 'budget', t: 0 });
  });

  it('refuses a start or a span that means nothing', () => {
    expect(() => simulate(consumer({}), { start: { x: -1, y: 5 }, span: [0, 1] })).toThrow(RangeError);
    expect(() => simulate(consumer({}), { start: { x: 1, y: 5 }, span: [0, Infinity] })).toThrow(RangeError);
    expect(() => simulate(consumer({}), { start: { x: 1, y: 5 }, span: [0, 1], samples: 1 })).toThrow(RangeError);
  });
});

describe('laws', () => {
  it('keeps the invariant of the classical cycle over fifty turns', () => {
    const spec = consumer({
      first: { growth: { kind: 'exponential', r: 1.1 } },
      second: { mortality: 0.4 },
      feeding: { response: 'holling-1', a: 0.4, e: 0.25 }
    });
    const result = simulate(spec, { start: { x: 10, y: 5 }, span: [0, 500], rtol: 1e-9 });
    const invariant = result.x.map(
      (x, i) => 0.1 * x - 0.4 * Math.log(x) + 0.4 * result.y[i]! - 1.1 * Math.log(result.y[i]!)
    );
    for (const value of invariant) expect(Math.abs(value / invariant[0]! - 1)).toBeLessThan(1e-8);
  });

  it('comes back to the start when time runs backwards', () => {
    const there = simulate(consumer({}), { start: { x: 40, y: 2 }, span: [0, 12], samples: 2, rtol: 1e-9 });
    const back = simulate(consumer({}), {
      start: { x: there.x[1]!, y: there.y[1]! },
      span: [12, 0],
      samples: 2,
      rtol: 1e-9
    });
    expect(back.x[1]! / 40).toBeCloseTo(1, 6);
    expect(back.y[1]! / 2).toBeCloseTo(1, 6);
  });

  it('rescales with the unit of abundance and of time', () => {
    const base = simulate(consumer({}), { start: { x: 40, y: 2 }, span: [0, 20], samples: 11, rtol: 1e-9 });
    const scaled = simulate(
      consumer({
        first: { growth: { kind: 'logistic', r: 365, K: 1e8 } },
        second: { mortality: 0.3 * 365 },
        feeding: { response: 'holling-2', a: (0.05 * 365) / 1e6, h: 0.5 / 365, e: 0.3 }
      }),
      { start: { x: 4e7, y: 2e6 }, span: [0, 20 / 365], samples: 11, rtol: 1e-9 }
    );
    base.x.forEach((x, i) => expect(scaled.x[i]! / 1e6 / x).toBeCloseTo(1, 8));
    base.y.forEach((y, i) => expect(scaled.y[i]! / 1e6 / y).toBeCloseTo(1, 8));
  });
});

describe('a start that is an equilibrium', () => {
  it('is kept for ever where it is one exactly, though the smallest rounding would lead away', () => {
    const cases: [ModelSpec, { x: number; y: number }][] = [
      [
        {
          interaction: 'consumer-resource',
          first: { growth: { kind: 'allee', r: 0.4, K: 100, A: 20 } },
          second: { mortality: 0.21 },
          feeding: { response: 'holling-1', a: 0.01, e: 0.3 }
        },
        { x: 20, y: 0 }
      ],
      [
        {
          interaction: 'competition',
          first: { growth: { kind: 'logistic', r: 3, K: 3 } },
          second: { growth: { kind: 'logistic', r: 2, K: 2 } },
          competition: { form: 'coefficients', alpha12: 2, alpha21: 1 }
        },
        { x: 1, y: 1 }
      ],
      [
        {
          interaction: 'competition',
          first: { growth: { kind: 'logistic', r: 0.3, K: 100 }, removal: { quota: 6.3 } },
          second: { growth: { kind: 'logistic', r: 2, K: 2 } },
          competition: { form: 'coefficients', alpha12: 0, alpha21: 0 }
        },
        { x: 30, y: 0 }
      ]
    ];
    for (const [spec, start] of cases) {
      const path = simulate(spec, {
        start,
        span: [0, 2000],
        samples: 5,
        thresholds: [{ species: 'first', below: start.x, above: start.x }]
      });
      expect(path.t).toEqual([0, 500, 1000, 1500, 2000]);
      expect(path.x.every((n) => n === start.x)).toBe(true);
      expect(path.y.every((n) => n === start.y)).toBe(true);
      expect(path.events).toEqual([]);
      // A hair beside it is not the same.
      const beside = simulate(spec, { start: { ...start, x: start.x * (1 - 1e-9) }, span: [0, 2000], samples: 2 });
      expect(Math.abs(beside.x[1]! - start.x)).toBeGreaterThan(0.1);
    }
  });
});
