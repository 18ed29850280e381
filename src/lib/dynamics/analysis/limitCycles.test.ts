import { describe, expect, it } from 'vitest';
import type { ConsumerResourceModel } from '../model/spec';
import { findEquilibria } from './equilibria';
import { limitCycles, shareBelow } from './limitCycles';
import { reportAt } from './reportAt.fixture';
import { simulate } from './trajectory';

const rosenzweig = (r: number, K: number, a: number, h: number, e: number, m: number): ConsumerResourceModel => ({
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r, K } },
  second: { mortality: m },
  feeding: { response: 'holling-2', a, h, e }
});
const interior = (spec: ConsumerResourceModel) => {
  const { a, h = 0, e } = spec.feeding;
  const m = spec.second.mortality ?? 0;
  const x = m / (a * (e - m * h));
  const growth = spec.first.growth;
  const perHead = growth.kind === 'logistic' ? growth.r * (1 - x / growth.K) : growth.r;
  return reportAt(spec, [[x, (perHead * (1 + a * h * x)) / a]]);
};

describe('limitCycles', () => {
  it('finds the one cycle beyond the Hopf point, with its period, extremes, means and multiplier', () => {
    const spec = rosenzweig(0.07, 10, 1 / 750, 250, 15, 0.025);
    const cycles = limitCycles(spec, interior(spec));
    expect(cycles).toHaveLength(1);
    const cycle = cycles[0]!;
    // Worked independently with an implicit method in logarithms.
    expect(cycle.period).toBeCloseTo(280.7507, 3);
    expect(cycle.xMin).toBeCloseTo(0.2216, 4);
    expect(cycle.xMax).toBeCloseTo(7.5833, 4);
    expect(cycle.xMean).toBeCloseTo(3.2807, 4);
    expect(cycle.yMin).toBeCloseTo(18.825, 3);
    expect(cycle.yMax).toBeCloseTo(130.415, 3);
    expect(cycle.yMean).toBeCloseTo(60.47, 2);
    expect(shareBelow(cycle, 'first', 3)).toBeCloseTo(0.531, 3);
    expect(cycle.stability).toBe('stable');
    expect(cycle.points[0]!.x).toBeCloseTo(cycle.points.at(-1)!.x, 6);
  });

  it('agrees with where long paths end, from inside and from outside', () => {
    const spec = rosenzweig(1, 90, 0.1, 0.5, 0.5, 0.5);
    const [cycle] = limitCycles(spec, interior(spec));
    for (const start of [
      { x: 14, y: 14 },
      { x: 59, y: 1 }
    ]) {
      const path = simulate(spec, {
        start,
        span: [0, 2000],
        times: Array.from({ length: 4001 }, (_, i) => 1900 + i / 40)
      });
      expect(Math.max(...path.x) / cycle!.xMax).toBeCloseTo(1, 4);
      expect(Math.min(...path.x) / cycle!.xMin).toBeCloseTo(1, 3);
      expect(Math.max(...path.y) / cycle!.yMax).toBeCloseTo(1, 4);
    }
  });

  it('finds none where the equilibrium attracts', () => {
    const spec = rosenzweig(1, 25, 0.1, 0.5, 0.5, 0.5);
    expect(limitCycles(spec, interior(spec))).toEqual([]);
  });

  it('follows a small cycle down towards its birth', () => {
    const radius = [45.1, 45.4].map((K) => {
      const spec = rosenzweig(1, K, 0.1, 0.5, 0.5, 0.45);
      const hopf = 20 + 2 * interior(spec).equilibria[0]!.x;
      const near = rosenzweig(1, hopf * (K / 45), 0.1, 0.5, 0.5, 0.45);
      const [cycle] = limitCycles(near, interior(near));
      expect(cycle?.stability).toBe('stable');
      return cycle!.xMax - cycle!.xMin;
    });
    // The radius grows as the square root of the distance to the Hopf point.
    expect(radius[1]! / radius[0]!).toBeCloseTo(2, 1);
  });

  it('reports no cycle where every orbit is closed', () => {
    const spec: ConsumerResourceModel = {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'exponential', r: 0.8 } },
      second: { mortality: 0.3 },
      feeding: { response: 'holling-1', a: 0.02, e: 0.25 }
    };
    const report = reportAt(spec, [[60, 40]]);
    expect(limitCycles(spec, report)).toEqual([]);
    // Nor does it rest on the class alone.
    const unclassified = {
      ...report,
      equilibria: report.equilibria.map((p) => ({ ...p, class: 'stable spiral' as const }))
    };
    expect(limitCycles(spec, unclassified)).toEqual([]);
  });

  it('finds a ring that repels inside one that attracts, around an equilibrium that attracts', () => {
    const [s, g, a, h] = [0.2, 3, 12.6, 0.743];
    const spec: ConsumerResourceModel = {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'logistic', r: 1, K: 1 } },
      second: { growth: { kind: 'leslie', r: s, g } },
      feeding: { response: 'holling-2', a, h, e: 0 }
    };
    // (1 - x)(1 + a h x) = a g x
    const b = a * h - 1 - a * g;
    const x = (b + Math.sqrt(b * b + 4 * a * h)) / (2 * a * h);
    const report = reportAt(spec, [[x, g * x]]);
    expect(report.equilibria[0]!.class).toBe('stable spiral');
    const cycles = limitCycles(spec, report);
    expect(cycles.map((c) => c.stability)).toEqual(['unstable', 'stable']);
    const [inner, outer] = cycles;
    const endsNear = (start: { x: number; y: number }): number => {
      const path = simulate(spec, {
        start,
        span: [0, 8000],
        rtol: 1e-6,
        times: Array.from({ length: 400 }, (_, i) => 7960 + i / 10)
      });
      return Math.max(...path.x);
    };
    const turn = inner!.points[0]!;
    expect(endsNear({ x: x + 0.98 * (turn.x - x), y: turn.y }) / x).toBeCloseTo(1, 2);
    expect(endsNear({ x: x + 1.02 * (turn.x - x), y: turn.y }) / outer!.xMax).toBeCloseTo(1, 3);
  });

  it('averages as an even sampling of the turn does', () => {
    const spec = rosenzweig(0.07, 10, 1 / 750, 250, 15, 0.025);
    const [cycle] = limitCycles(spec, interior(spec));
    const { x, y, period } = { ...cycle!.points[0]!, period: cycle!.period };
    const path = simulate(spec, { start: { x, y }, span: [0, period], samples: 4001, rtol: 1e-9 });
    // The trapezium rule converges at once on a periodic function.
    const mean = (list: number[]): number => list.slice(1).reduce((a, b) => a + b, 0) / (list.length - 1);
    expect(mean(path.x) / cycle!.xMean).toBeCloseTo(1, 7);
    expect(mean(path.y) / cycle!.yMean).toBeCloseTo(1, 7);
    expect(shareBelow(cycle!, 'first', 3)).toBeCloseTo(path.x.filter((v) => v < 3).length / 4001, 3);
  });

  it('stops when it is told to', () => {
    const spec = rosenzweig(0.07, 10, 1 / 750, 250, 15, 0.025);
    let asked = 0;
    const shouldStop = () => (asked += 1) > 0;
    expect(limitCycles(spec, interior(spec), { shouldStop })).toEqual([]);
    expect(asked).toBeGreaterThan(0);
  });
});

describe('cycles that must be there', () => {
  it('are found however violent they are', () => {
    // The resource dips to 4e-98 and comes back within rounding of its ceiling, 244 times its resting level.
    const spec: ConsumerResourceModel = {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'logistic', r: 1, K: 1 } },
      second: { mortality: 0.05242320571252573 },
      feeding: { response: 'holling-2', a: 13.44019083885116, h: 0.31301564577479213, e: 0.9683244067477063 }
    };
    const cycles = limitCycles(spec, findEquilibria(spec));
    expect(cycles).toHaveLength(1);
    // Time between two outbreaks of a long path.
    const level = cycles[0]!.points[0]!.y;
    const path = simulate(spec, {
      start: { x: 0.9, y: level },
      span: [0, 3000],
      samples: 2,
      rtol: 1e-9,
      thresholds: [{ species: 'second', above: level }]
    });
    const rises = path.events.map(({ t }) => t);
    expect(rises.at(-1)! - rises.at(-2)!).toBeCloseTo(cycles[0]!.period, 4);
  });

  it('are found wherever bounded paths have no point to settle at, and take turns in attracting and repelling', () => {
    let seed = 9;
    const draw = (low: number, high: number): number => {
      seed = (seed * 1664525 + 1013904223) >>> 0;
      return low + (high - low) * (seed / 2 ** 32);
    };
    let forced = 0;
    for (let i = 0; forced < 40 && i < 4000; i++) {
      const spec: ConsumerResourceModel = {
        interaction: 'consumer-resource',
        first: { growth: { kind: 'logistic', r: 1, K: 1 } },
        second:
          i % 2 === 0
            ? { mortality: 10 ** draw(-1.5, 0) }
            : { growth: { kind: 'leslie', r: 10 ** draw(-1.5, 0), g: 10 ** draw(-1, 1) } },
        feeding: {
          response: i % 3 === 0 ? 'holling-3' : 'holling-2',
          a: 10 ** draw(0, 1.5),
          h: 10 ** draw(-1.5, 0.3),
          e: draw(0.1, 1)
        }
      };
      const report = findEquilibria(spec);
      const inside = report.equilibria.filter(({ x, y }) => x > 0 && y > 0);
      if (inside.length !== 1 || report.equilibria.some(({ stability }) => stability !== 'unstable')) continue;
      forced += 1;
      const cycles = limitCycles(spec, report, { accuracy: 'drawing' });
      const expected = cycles.map((_, k) => (k % 2 === 0 ? 'stable' : 'unstable'));
      expect(cycles.length % 2, JSON.stringify(spec)).toBe(1);
      expect(cycles.map(({ stability }) => stability)).toEqual(expected);
    }
    expect(forced).toBe(40);
  });

  it('needs no more than a drawing shows while a slider moves', () => {
    const spec = rosenzweig(1, 90, 0.1, 0.5, 0.5, 0.5);
    const [full] = limitCycles(spec, interior(spec));
    const [drawn] = limitCycles(spec, interior(spec), { accuracy: 'drawing' });
    expect(drawn!.period / full!.period).toBeCloseTo(1, 6);
    expect(drawn!.xMin / full!.xMin).toBeCloseTo(1, 5);
  });
});
