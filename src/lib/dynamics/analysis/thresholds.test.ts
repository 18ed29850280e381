import { describe, expect, it } from 'vitest';
import { parametersOf, withParameter } from '../model/parameters';
import type { ModelSpec } from '../model/spec';
import { findEquilibria } from './equilibria';
import { limitCycles } from './limitCycles';
import { leverForLevel, thresholds } from './thresholds';

const crayfish: ModelSpec = {
  interaction: 'competition',
  first: { growth: { kind: 'logistic', r: 0.55, K: 900 } },
  second: { growth: { kind: 'logistic', r: 0.95, K: 1100 } },
  competition: { form: 'coefficients', alpha12: 1.35, alpha21: 0.6 }
};
const fern: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 0.07, K: 10 } },
  second: { mortality: 0.025 },
  feeding: { response: 'holling-2', a: 1 / 750, h: 250, e: 15 }
};
const goats: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 0.35, K: 4200 } },
  second: { mortality: 0.32 },
  feeding: { response: 'holling-2', a: 0.2778, h: 0.002, e: 0.0014 }
};
const AREA = 640;

const listed = (spec: ModelSpec, path: string, range: [number, number]) =>
  thresholds(spec, path, range).thresholds.map(({ kind, value }) => [kind, Number(value.toPrecision(9))]);

describe('thresholds', () => {
  it('of removing an invader: the first species comes back, then the invader is gone', () => {
    const back = 0.95 * (1 - 900 / (1.35 * 1100));
    const gone = 0.95 * (1 - (0.6 * 900) / 1100);
    expect(listed(crayfish, 'second.removal.effort', [0, 0.9])).toEqual([
      ['transcritical', Number(back.toPrecision(9))],
      ['transcritical', Number(gone.toPrecision(9))]
    ]);
  });

  it('of enrichment: onset of oscillation where the resting point passes the hump of the isocline', () => {
    const rest = 0.025 / ((1 / 750) * (15 - 0.025 * 250));
    const report = thresholds(fern, 'first.growth.K', [1, 20]);
    const hopf = report.thresholds.find(({ kind }) => kind === 'hopf')!;
    expect(hopf.value).toBeCloseTo(2 * rest + 3, 9);
    expect(hopf.criticality).toBe('supercritical');
  });

  it('of a fixed take: two resting points merge at 73.02 animals a year', () => {
    const { thresholds: found, branches } = thresholds(goats, 'second.removal.quota', [0, 0.2]);
    expect(found.map(({ kind }) => kind)).toEqual(['saddle-node']);
    expect(found[0]!.value * AREA).toBeCloseTo(73.0171, 4);
    expect(found[0]!.x).toBeCloseTo(2857.8, 1);
    expect(found[0]!.y).toBeCloseTo(1.0419, 4);
    // One branch goes out on the side that holds and comes back on the side that does not.
    expect(branches).toHaveLength(1);
    const { parameter, stable } = branches[0]!;
    expect([parameter[0], parameter.at(-1)]).toEqual([0, 0]);
    expect(new Set(stable).size).toBe(2);
  });

  it('of removing by a rate: cleared where growth on a full pasture is used up', () => {
    const cleared = (0.0014 * 0.2778 * 4200) / (1 + 0.2778 * 0.002 * 4200) - 0.32;
    expect(listed(goats, 'second.removal.effort', [0, 0.3])).toEqual([
      ['transcritical', Number(cleared.toPrecision(9))]
    ]);
  });

  it('finds the rate that holds a species at a level, and nothing where none does', () => {
    const held = (0.0014 * 0.2778 * 2800) / (1 + 0.2778 * 0.002 * 2800) - 0.32;
    const found = leverForLevel(goats, 'second.removal.effort', 'first', 2800, [0, 0.3]);
    expect(found).toHaveLength(1);
    expect(found[0]).toMatchObject({ stable: true });
    expect(found[0]!.value).toBeCloseTo(held, 12);
    expect(leverForLevel(goats, 'second.removal.effort', 'first', 5000, [0, 0.3])).toEqual([]);
    // Beyond the fold of a fixed take the resting points only hold a level by luck.
    const takes = leverForLevel(goats, 'second.removal.quota', 'second', 0.5, [0, 0.2]);
    expect(takes.map(({ stable }) => stable)).toEqual([false]);
  });

  const allee: ModelSpec = {
    interaction: 'consumer-resource',
    first: { growth: { kind: 'allee', r: 0.4, K: 100, A: 20 } },
    second: { mortality: 0.1, selfLimitation: 0.01 },
    feeding: { response: 'holling-1', a: 0.02, e: 0.6 }
  };
  it.each([
    ['feeding.a', 'subcritical', 'unstable'],
    ['second.mortality', 'supercritical', 'stable']
  ] as const)('calls an onset over %s %s, as the small cycle beside it shows', (path, criticality, stability) => {
    const hopf = thresholds(allee, path, [0.001, 0.7]).thresholds.find(({ kind }) => kind === 'hopf')!;
    expect(hopf.criticality).toBe(criticality);
    const sides = [0.999, 1.001].map((factor) => {
      const spec = withParameter(allee, path, hopf.value * factor);
      const report = findEquilibria(spec);
      const inside = report.equilibria.find((e) => e.determinant > 0 && e.x > 0 && e.y > 0)!;
      return { point: inside.stability, cycles: limitCycles(spec, report).map((cycle) => cycle.stability) };
    });
    // The cycle is on one side only: with the unstable point when it is stable, and the other way about.
    expect(sides.map(({ cycles }) => cycles.length).sort()).toEqual([0, 1]);
    const beside = sides.find(({ cycles }) => cycles.length === 1)!;
    expect(beside).toEqual({ point: stability === 'stable' ? 'unstable' : 'stable', cycles: [stability] });
  });

  it('reports a state for every equilibrium there is at values it was not seeded with', () => {
    for (const spec of [crayfish, fern, goats]) {
      for (const { path, value } of parametersOf(spec)) {
        const range: [number, number] = [value * 0.5, value * 1.7 || 0.13];
        const { branches } = thresholds(spec, path, range);
        const p = range[0] + 0.4321 * (range[1] - range[0]);
        const there = findEquilibria(withParameter(spec, path, p)).equilibria;
        const crossings = branches.flatMap(({ parameter, x, y, stable }) =>
          parameter.slice(1).flatMap((to, i) => {
            const from = parameter[i]!;
            if ((from - p) * (to - p) > 0) return [];
            const share = (p - from) / (to - from);
            return [
              { x: x[i]! + share * (x[i + 1]! - x[i]!), y: y[i]! + share * (y[i + 1]! - y[i]!), stable: stable[i] }
            ];
          })
        );
        expect([path, crossings.length]).toEqual([path, there.length]);
        for (const equilibrium of there) {
          const scale = Math.max(...there.map((e) => Math.hypot(e.x, e.y)), 1e-300);
          const near = crossings.find((c) => Math.hypot(c.x - equilibrium.x, c.y - equilibrium.y) < 1e-3 * scale);
          expect([path, near?.stable]).toEqual([path, equilibrium.stability === 'stable']);
        }
      }
    }
  });

  it('claims nothing for orbits that are all closed, and says where a curve of states is at rest', () => {
    const classical: ModelSpec = {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'exponential', r: 0.8 } },
      second: { mortality: 0.3 },
      feeding: { response: 'holling-1', a: 0.02, e: 0.25 }
    };
    expect(thresholds(classical, 'feeding.a', [0.01, 0.05]).thresholds).toEqual([]);
    const neutral: ModelSpec = {
      ...crayfish,
      first: { growth: { kind: 'logistic', r: 1, K: 100 } },
      second: { growth: { kind: 'logistic', r: 1, K: 100 } },
      competition: { form: 'coefficients', alpha12: 1, alpha21: 1 }
    };
    const report = thresholds(neutral, 'competition.alpha12', [0.5, 1.5]);
    expect(report.complete).toBe(false);
    expect(report.completeness).toContain('at 1 a whole curve of states is at rest');
  });

  it('refuses an unknown parameter and a range that makes no model', () => {
    expect(() => thresholds(goats, 'first.growth.A', [0, 1])).toThrow(/no parameter first.growth.A/);
    expect(() => thresholds(goats, 'first.growth.K', [0, 1])).toThrow(/first.growth.K must be greater than 0/);
    expect(() => thresholds(goats, 'first.growth.K', [2, 1])).toThrow(RangeError);
  });

  it('stops when asked, and says so', () => {
    const report = thresholds(goats, 'first.growth.K', [100, 9000], { shouldStop: () => true });
    expect(report.complete).toBe(false);
    expect(report.completeness).toMatch(/^Stopped/);
  });
});
