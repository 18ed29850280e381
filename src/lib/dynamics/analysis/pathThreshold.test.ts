import { describe, expect, it } from 'vitest';
import type { ModelSpec } from '../model/spec';
import { findEquilibria } from './equilibria';
import { pathThreshold } from './pathThreshold';
import { thresholds } from './thresholds';

const goats: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 0.35, K: 4200 } },
  second: { mortality: 0.32 },
  feeding: { response: 'holling-2', a: 0.2778, h: 0.002, e: 0.0014 }
};
const AREA = 640;
const resting = findEquilibria(goats).equilibria.find(({ x, y }) => x > 0 && y > 0)!;
/** One species alone in effect: the other has nothing to live on. */
const alone = (quota: number): ModelSpec => ({
  interaction: 'competition',
  first: { growth: { kind: 'logistic', r: 1, K: 100 }, removal: { quota } },
  second: { growth: { kind: 'logistic', r: 1, K: 1 } },
  competition: { form: 'coefficients', alpha12: 0, alpha21: 0 }
});

describe('pathThreshold', () => {
  it('of a fixed take from the resting point: far below the take at which the resting points merge', () => {
    const found = pathThreshold(goats, resting, 'second.removal.quota', [0, 0.12], {
      horizon: 2000,
      survive: 'second',
      level: 1 / AREA
    });
    expect(found).toMatchObject({ verdict: 'lost above', monotone: true });
    expect(found.value! * AREA).toBeCloseTo(60.188, 2);
    const fold = thresholds(goats, 'second.removal.quota', [0, 0.12]).thresholds[0]!;
    expect(found.value!).toBeLessThan(0.9 * fold.value);
  });

  it('agrees with the closed form of a quota on a logistic stock', () => {
    // From N0 above the lower resting point K/2 (1 - sqrt(1 - 4 q/(r K))) a stock survives: q = r N0 (1 - N0/K).
    const found = pathThreshold(alone(0), { x: 20, y: 1 }, 'first.removal.quota', [0, 40], {
      horizon: 1000,
      survive: 'first'
    });
    expect(found.verdict).toBe('lost above');
    expect(found.value!).toBeCloseTo(16, 6);
    // Over a short time more can be taken: the stock lives until it has run out.
    const short = pathThreshold(alone(0), { x: 20, y: 1 }, 'first.removal.quota', [0, 40], {
      horizon: 2,
      survive: 'first'
    });
    expect(short.value!).toBeGreaterThan(18);
  });

  it('names the smallest value where more of the lever helps', () => {
    // dN/dt = N (1 - N/100) - 30 + s from 20: survival needs s >= 30 - 16.
    const found = pathThreshold(alone(30), { x: 20, y: 1 }, 'first.stocking', [0, 40], {
      horizon: 1000,
      survive: 'first'
    });
    expect(found.verdict).toBe('gained above');
    expect(found.value!).toBeCloseTo(14, 6);
  });

  it('says always and never, and a start below the level is lost from the first', () => {
    const ask = (range: [number, number], level?: number) =>
      pathThreshold(alone(0), { x: 20, y: 1 }, 'first.removal.quota', range, {
        horizon: 100,
        survive: 'first',
        ...(level !== undefined && { level })
      });
    expect(ask([0, 10])).toMatchObject({ verdict: 'always', value: null, changes: [] });
    expect(ask([30, 40])).toMatchObject({ verdict: 'never', value: null });
    expect(ask([0, 10], 25)).toMatchObject({ verdict: 'never' });
    expect(ask([0, 10], 25).scanned[0]!.lostAt).toBe(0);
  });

  it('reports every change where survival comes and goes', () => {
    // Too poor a pasture starves the consumer, too rich a one drives both into outbreaks with deep troughs between.
    const enriched: ModelSpec = {
      ...goats,
      first: { growth: { kind: 'logistic', r: 1, K: 50 } },
      second: { mortality: 0.5 },
      feeding: { response: 'holling-2', a: 0.1, h: 0.5, e: 0.5 }
    };
    const found = pathThreshold(enriched, { x: 20, y: 10 }, 'first.growth.K', [15, 150], {
      horizon: 300,
      survive: 'second',
      level: 1
    });
    expect(found).toMatchObject({ verdict: 'mixed', monotone: false, value: null });
    expect(found.changes.map(({ survivesAbove }) => survivesAbove)).toEqual([true, false]);
    for (const { below, above } of found.changes) expect(above - below).toBeLessThan(2e-7);
    expect(found.remark).toMatch(/comes and goes/);
  });

  it('claims nothing for paths that cannot be followed', () => {
    const growing: ModelSpec = {
      interaction: 'competition',
      first: { growth: { kind: 'exponential', r: 5 } },
      second: { growth: { kind: 'exponential', r: 1 } },
      competition: { form: 'encounters', b12: 0, b21: 0 }
    };
    const found = pathThreshold(growing, { x: 1, y: 1 }, 'first.removal.effort', [0, 1], {
      horizon: 1000,
      survive: 'both'
    });
    expect(found).toMatchObject({ verdict: 'undecided', value: null, monotone: false });
  });

  it('refuses questions that make no sense', () => {
    const ask = (lever: string, range: [number, number], horizon: number, x = 1) =>
      pathThreshold(goats, { x, y: 1 }, lever, range, { horizon, survive: 'both' });
    expect(() => ask('first.nothing', [0, 1], 1)).toThrow(RangeError);
    expect(() => ask('first.stocking', [1, 0], 1)).toThrow(RangeError);
    expect(() => ask('first.stocking', [-1, 0], 1)).toThrow(RangeError);
    expect(() => ask('first.stocking', [0, 1], 0)).toThrow(RangeError);
    expect(() => ask('first.stocking', [0, 1], 1, -1)).toThrow(RangeError);
  });
});
