import { describe, expect, it } from 'vitest';
import type { ModelSpec } from '../model/spec';
import { findEquilibria } from './equilibria';

const logistic = (r: number, K: number) => ({ growth: { kind: 'logistic', r, K } }) as const;

function competing(alpha12: number, alpha21: number, K1 = 100, K2 = 100): ModelSpec {
  return {
    interaction: 'competition',
    first: logistic(0.5, K1),
    second: logistic(0.5, K2),
    competition: { form: 'coefficients', alpha12, alpha21 }
  };
}

describe('merging equilibria', () => {
  const atQuota = (quota: number): ModelSpec => ({
    interaction: 'consumer-resource',
    first: { ...logistic(1, 100), removal: { quota } },
    second: { mortality: 0.6 },
    feeding: { response: 'holling-2', a: 0.05, h: 0.4, e: 0.5 }
  });

  it('lists a pair merged at the largest quota once, half-stable', () => {
    const report = findEquilibria(atQuota(25));
    expect(report.equilibria.filter(({ y }) => y === 0)).toEqual([
      expect.objectContaining({ x: 50, y: 0, multiplicity: 2, class: 'non-hyperbolic', decidedBy: 'centre manifold' })
    ]);
    expect(report.equilibria[0]!.determinant).toBe(0);
    expect(report.complete).toBe(true);
  });

  it('tells a pair apart a hundred-millionth below that quota, and finds none above', () => {
    const below = findEquilibria(atQuota(25 - 1e-8)).equilibria.filter(({ y }) => y === 0);
    expect(below.map(({ x }) => Math.round((x - 50) * 1e3))).toEqual([-1, 1]);
    expect(findEquilibria(atQuota(25 + 1e-8)).equilibria.filter(({ y }) => y === 0)).toEqual([]);
  });

  it('merges an interior fold and says which way it lets go', () => {
    // Resource with an Allee effect, r (1 - x)(4 x - 1) x, against a rival that does not mind it.
    // b12 y = max of the per-head growth at x = 5/8: the isocline of the rival is the horizontal tangent there.
    const spec: ModelSpec = {
      interaction: 'competition',
      first: { growth: { kind: 'allee', r: 1, K: 1, A: 0.25 } },
      second: { growth: { kind: 'logistic', r: 1, K: 0.5625 } },
      competition: { form: 'encounters', b12: 1, b21: 0 }
    };
    const inside = findEquilibria(spec).equilibria.filter(({ x, y }) => x > 0 && y > 0);
    expect(inside).toHaveLength(1);
    expect(inside[0]).toMatchObject({ multiplicity: 2, class: 'non-hyperbolic', stability: 'unstable' });
    expect(inside[0]!.x).toBeCloseTo(0.625, 9);
    expect(inside[0]!.y).toBeCloseTo(0.5625, 9);
  });

  it('counts an equilibrium that reaches an axis together with the one that is there', () => {
    const report = findEquilibria(competing(0.5, 1));
    expect(report.equilibria.map(({ x, y, multiplicity }) => [x, y, multiplicity])).toEqual([
      [0, 0, 1],
      [0, 100, 1],
      [100, 0, 2]
    ]);
    expect(report.equilibria[2]).toMatchObject({
      class: 'non-hyperbolic',
      stability: 'stable',
      decidedBy: 'centre manifold'
    });
  });
});

describe('signs below the rounding of the rates', () => {
  it('damps swings whose damping is a trillionth of a trillionth of their speed', () => {
    // Trace = -r x/K exactly, next to a determinant of 1e-12.
    const report = findEquilibria({
      interaction: 'consumer-resource',
      first: logistic(1, 1e12),
      second: { mortality: 1e-12 },
      feeding: { response: 'holling-2', a: 1e-12, h: 1e-6, e: 1e12 }
    });
    expect(report.equilibria[1]).toMatchObject({ class: 'stable spiral', decidedBy: 'linearisation' });
    expect(report.equilibria[1]!.trace / -1e-24).toBeCloseTo(1, 5);
  });

  it('tells a point apart from the axis it has just left, and both apart from a merger', () => {
    const report = findEquilibria(competing(0.5, 1 - 1e-15));
    expect(report.equilibria.slice(2)).toEqual([
      expect.objectContaining({ y: 0, class: 'saddle' }),
      expect.objectContaining({ class: 'stable node', multiplicity: 1 })
    ]);
  });
});

describe('beyond the linearisation', () => {
  it('knows the conserved quantity of the classical case, under effort too', () => {
    const report = findEquilibria({
      interaction: 'consumer-resource',
      first: { growth: { kind: 'exponential', r: 0.9 }, removal: { effort: 0.1 } },
      second: { mortality: 0.25, removal: { effort: 0.05 } },
      feeding: { response: 'holling-1', a: 0.02, e: 0.25 }
    });
    expect(report.equilibria[1]).toMatchObject({ x: 60, y: 40, class: 'centre', decidedBy: 'conserved quantity' });
  });

  it('sees only the feasible side of a half-stable point at the origin', () => {
    const report = findEquilibria({
      interaction: 'competition',
      first: { ...logistic(0.3, 10), removal: { effort: 0.3 } },
      second: { growth: { kind: 'exponential', r: -0.2 } },
      competition: { form: 'encounters', b12: 0.1, b21: 0.1 }
    });
    expect(report.equilibria).toHaveLength(1);
    expect(report.equilibria[0]).toMatchObject({
      x: 0,
      y: 0,
      multiplicity: 2,
      stability: 'stable',
      decidedBy: 'centre manifold'
    });
  });

  it('says so when neither the linearisation nor the next terms decide', () => {
    const [origin] = findEquilibria({
      interaction: 'competition',
      first: { ...logistic(1, 10), removal: { effort: 1 } },
      second: { ...logistic(1, 10), removal: { effort: 1 } },
      competition: { form: 'coefficients', alpha12: 0.5, alpha21: 0.5 }
    }).equilibria;
    expect(origin).toMatchObject({
      x: 0,
      y: 0,
      class: 'non-hyperbolic',
      stability: 'undetermined',
      decidedBy: 'undecided'
    });
  });
});

describe('curves of equilibria', () => {
  it('finds the line where isoclines coincide, also for rates that are no short decimals', () => {
    const report = findEquilibria(competing(3, 1 / 3, 300, 100));
    expect(report.continua).toHaveLength(1);
    expect(report.equilibria.map(({ x, y }) => [x, y])).toEqual([[0, 0]]);
  });

  it('finds the axis on which an exponential resource is exactly balanced by effort', () => {
    const report = findEquilibria({
      interaction: 'consumer-resource',
      first: { growth: { kind: 'exponential', r: 0.3 }, removal: { effort: 0.3 } },
      second: { mortality: 0.2 },
      feeding: { response: 'holling-1', a: 0.01, e: 0.1 }
    });
    expect(report.equilibria).toEqual([]);
    expect(report.continua).toHaveLength(1);
    expect(report.continua[0]).toMatchObject({ from: { x: 0, y: 0 }, to: null });
  });

  it('finds crossing axes of a model in which nothing grows alone', () => {
    const idle = { growth: { kind: 'exponential', r: 0 } } as const;
    const report = findEquilibria({
      interaction: 'competition',
      first: idle,
      second: idle,
      competition: { form: 'encounters', b12: 0.1, b21: 0.2 }
    });
    expect(report.continua).toHaveLength(2);
    expect(report.equilibria).toEqual([]);
  });
});

describe('states held by a quota', () => {
  it('lists what remains when the resource has run out', () => {
    const { absorbing } = findEquilibria({
      interaction: 'competition',
      first: { ...logistic(1, 100), removal: { quota: 30 } },
      second: logistic(1, 50),
      competition: { form: 'coefficients', alpha12: 0.5, alpha21: 0.5 }
    });
    expect(absorbing).toEqual([
      expect.objectContaining({ x: 0, y: 0, held: ['first'], stability: 'unstable' }),
      expect.objectContaining({ x: 0, y: 50, held: ['first'], stability: 'stable' })
    ]);
  });

  it('lists none for a species that is stocked, and both gone where both have quotas', () => {
    const base = competing(0.5, 0.5);
    const stocked = { ...base, first: { ...base.first, removal: { quota: 3 }, stocking: 1 } } as ModelSpec;
    expect(findEquilibria(stocked).absorbing).toEqual([]);
    const both = {
      ...base,
      first: { ...base.first, removal: { quota: 3 } },
      second: { ...base.second, removal: { quota: 3 } }
    } as ModelSpec;
    expect(findEquilibria(both).absorbing).toContainEqual(
      expect.objectContaining({ x: 0, y: 0, held: ['first', 'second'], stability: 'stable' })
    );
  });

  it('claims nothing at x = 0 under leslie growth', () => {
    const report = findEquilibria({
      interaction: 'consumer-resource',
      first: logistic(1, 100),
      second: { growth: { kind: 'leslie', r: 0.3, g: 0.2 } },
      feeding: { response: 'holling-1', a: 0.01, e: 0 }
    });
    expect(report.equilibria.every(({ x }) => x > 0)).toBe(true);
    expect(report.equilibria).toHaveLength(2);
    expect(report.complete).toBe(true);
  });
});
