import { describe, expect, it } from 'vitest';
import type { ModelSpec, SpeciesSpec } from '../model/spec';
import { findEquilibria } from './equilibria';
import { simulate } from './trajectory';

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

describe('a rival that the other does not touch', () => {
  it('rests by itself, and the crowd of points beside it is told apart', () => {
    const found = findEquilibria({
      interaction: 'competition',
      first: { growth: { kind: 'allee', r: 4.004, K: 1, A: 0.04 } },
      second: { growth: { kind: 'allee', r: 1, K: 0.07, A: 0.001 }, removal: { quota: 0.07 } },
      competition: { form: 'encounters', b12: 0.1, b21: 0 }
    });
    expect(found.complete).toBe(true);
    expect(found.equilibria.map((point) => point.class)).toEqual([
      'saddle',
      'stable node',
      'unstable node',
      'saddle',
      'stable node',
      'saddle'
    ]);
  });

  it('is not proven where stocking and quota differ by rounding alone', () => {
    const report = findEquilibria({
      interaction: 'consumer-resource',
      first: {
        growth: { kind: 'exponential', r: 0.1 },
        removal: { effort: 0.01, quota: 1 },
        stocking: 0.9999999999999999
      },
      second: { growth: { kind: 'logistic', r: 1.066271005879719, K: 1 }, removal: { effort: 1, quota: 0.001 } },
      feeding: { response: 'holling-1', a: 0.2, e: 0.1 }
    });
    expect(report.complete).toBe(false);
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

  it('knows that swings under a sigmoid response keep their size where e = 2 m h', () => {
    const model = (e: number): ModelSpec => ({
      interaction: 'consumer-resource',
      first: { growth: { kind: 'exponential', r: 0.1 } },
      second: { mortality: 0.7, removal: { effort: 0.3 } },
      feeding: { response: 'holling-3', a: 0.1, h: 0.5, e }
    });
    expect(findEquilibria(model(1)).equilibria[1]).toMatchObject({
      class: 'centre',
      stability: 'neutral',
      decidedBy: 'conserved quantity'
    });
    // One whole turn, followed by the integrator, ends where it began.
    const { period } = findEquilibria(model(1)).equilibria[1]!;
    const start = { x: 9, y: 0.4472 };
    const path = simulate(model(1), {
      start,
      span: [0, 4 * period!],
      samples: 2,
      rtol: 1e-10,
      thresholds: [{ species: 'first', above: 4.4721 }]
    });
    const returns = path.events.map(({ t }) => t);
    expect(returns.length).toBeGreaterThan(1);
    const again = simulate(model(1), { start, span: [0, returns[1]!], times: [returns[0]!, returns[1]!], rtol: 1e-10 });
    expect(again.y[1]! / again.y[0]!).toBeCloseTo(1, 8);
    expect(findEquilibria(model(1.02)).equilibria[1]!.class).toBe('stable spiral');
    expect(findEquilibria(model(0.98)).equilibria[1]!.class).toBe('unstable spiral');
  });

  it('decides the loss of both where removal just balances growth, by a sum that falls or an axis that leaves', () => {
    const balanced = (first: SpeciesSpec, second: SpeciesSpec) =>
      findEquilibria({
        interaction: 'competition',
        first,
        second,
        competition: { form: 'encounters', b12: 0.05, b21: 0.05 }
      }).equilibria.find(({ x, y }) => x === 0 && y === 0);
    const atLimit = { ...logistic(1, 10), removal: { effort: 1 } };
    expect(balanced(atLimit, atLimit)).toMatchObject({ stability: 'stable', decidedBy: 'trapping argument' });
    const consumer = findEquilibria({
      interaction: 'consumer-resource',
      first: atLimit,
      second: { growth: { kind: 'logistic', r: 0.25, K: 4 }, removal: { effort: 0.25 } },
      feeding: { response: 'holling-3', a: 0.5, h: 0.1, e: 0.8 }
    });
    expect(consumer.equilibria[0]).toMatchObject({ x: 0, y: 0, stability: 'stable', decidedBy: 'trapping argument' });
  });

  it('lets go of a level that a species by itself leaves on one side', () => {
    const report = findEquilibria({
      interaction: 'competition',
      first: logistic(0.2, 20),
      second: { ...logistic(0.75, 20), removal: { quota: 3.75 } },
      competition: { form: 'coefficients', alpha12: 2, alpha21: 4 }
    });
    expect(report.equilibria[0]).toMatchObject({
      x: 0,
      y: 10,
      stability: 'unstable',
      decidedBy: 'motion along an axis'
    });
  });

  it('sees a cusp where a fold meets a Hopf point', () => {
    // Of x (1 - x)(x - A)/A - a x y and y (e a x - m) with quota q on the consumer, q and m such that trace = determinant = 0.
    const [A, a, e] = [0.25, 1, 1];
    const slope = (x: number) => (1 + A - 2 * x) / A;
    // a11 = x slope, a12 = -x, a21 = y, a22 = -a11 as trace is 0; determinant 0 fixes the slope: x slope^2 = y.
    const gap = (at: number) => at * slope(at) ** 2 - ((1 - at) * (at - A)) / A;
    let [low, high] = [0.63, 0.99];
    for (let i = 0; i < 200; i++) {
      const middle = (low + high) / 2;
      if (gap(middle) > 0) high = middle;
      else low = middle;
    }
    const at = (low + high) / 2;
    const level = ((1 - at) * (at - A)) / A;
    const own = -at * slope(at);
    // Consumer per head: e a x - m + s/y with its slope -s/y = own, so s = -own y < 0 is a quota; m closes the balance.
    const quota = own * level;
    const spec: ModelSpec = {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'allee', r: 1, K: 1, A } },
      second: { mortality: e * a * at - own, removal: { quota } },
      feeding: { response: 'holling-1', a, e }
    };
    const found = findEquilibria(spec).equilibria.filter((point) => Math.abs(point.x - at) < 1e-3 && point.y > 0);
    expect(found).toHaveLength(1);
    expect(found[0]).toMatchObject({ multiplicity: 2, stability: 'unstable', decidedBy: 'normal form' });
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

  it('lists none for a species that is stocked by as much, and both gone where both have quotas', () => {
    const base = competing(0.5, 0.5);
    const stocked = (stocking: number) =>
      findEquilibria({ ...base, first: { ...base.first, removal: { quota: 3 }, stocking } } as ModelSpec).absorbing;
    expect(stocked(3)).toEqual([]);
    // What is stocked below the quota is taken as it comes: nothing builds up from 0.
    expect(stocked(1)).toContainEqual(expect.objectContaining({ x: 0, y: 100, held: ['first'], stability: 'stable' }));
    const both = {
      ...base,
      first: { ...base.first, removal: { quota: 3 } },
      second: { ...base.second, removal: { quota: 3 } }
    } as ModelSpec;
    expect(findEquilibria(both).absorbing).toContainEqual(
      expect.objectContaining({ x: 0, y: 0, held: ['first', 'second'], stability: 'stable' })
    );
  });

  it('calls what remains at the largest quota it can bear half-stable, at its exact level', () => {
    const atFold = { ...logistic(1, 10), removal: { quota: 2.5 } };
    const { absorbing } = findEquilibria({
      interaction: 'competition',
      first: atFold,
      second: atFold,
      competition: { form: 'coefficients', alpha12: 0, alpha21: 0 }
    });
    expect(absorbing.map(({ x, y, stability }) => [x, y, stability])).toEqual([
      [0, 0, 'stable'],
      [0, 5, 'unstable'],
      [5, 0, 'unstable']
    ]);
  });

  it('loses a consumer whose ceiling follows the resource together with it, stocked or not', () => {
    const spec: ModelSpec = {
      interaction: 'consumer-resource',
      first: { ...logistic(1, 100), removal: { quota: 30 } },
      second: { growth: { kind: 'leslie', r: 0.3, g: 0.3 }, stocking: 1 },
      feeding: { response: 'holling-1', a: 0.01, e: 0.1 }
    };
    expect(findEquilibria(spec).absorbing).toEqual([
      expect.objectContaining({ x: 0, y: 0, held: ['first'], stability: 'stable' })
    ]);
    const path = simulate(spec, { start: { x: 50, y: 5 }, span: [0, 60], samples: 7 });
    expect(path.outcome.status).toBe('reached');
    expect([path.x.at(-1), path.y.at(-1)]).toEqual([0, 0]);
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
