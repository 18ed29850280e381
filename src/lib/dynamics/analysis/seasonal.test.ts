import { Outcome, Solver } from 'odex';
import { describe, expect, it } from 'vitest';
import { compile } from '../model/compile';
import { withParameter } from '../model/parameters';
import type { ModelSpec } from '../model/spec';
import { seasonalSystem, yearlyCycles, type Season } from './seasonal';
import { simulate } from './trajectory';

const r = 0.8;
const K = 100;
const model: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r, K } },
  second: { mortality: 0.3 },
  feeding: { response: 'holling-2', a: 0.02, h: 0.5, e: 0.4 }
};
const ofR: Season = { species: 'first', of: 'r', amplitude: 0.6, peak: 0.25, year: 1 };
const ofK: Season = { species: 'first', of: 'K', amplitude: 0.5, peak: 0, year: 2 };
/** Integral of 1 + a cos(2 pi (t - peak)/year). */
const grownTime = ({ amplitude, peak, year }: Season, t: number) => {
  const w = (2 * Math.PI) / year;
  return t + (amplitude / w) * (Math.sin(w * (t - peak)) + Math.sin(w * peak));
};

describe('a seasonal growth rate', () => {
  it('makes the logistic follow its closed form', () => {
    const times = [0.1, 0.5, 1, 2.3, 5];
    const result = simulate(model, { start: { x: 20, y: 0 }, span: [0, 5], times, rtol: 1e-10, season: ofR });
    times.forEach((t, i) => {
      const wanted = K / (1 + (K / 20 - 1) * Math.exp(-r * grownTime(ofR, t)));
      expect(Math.abs(result.x[i]! / wanted - 1)).toBeLessThan(1e-9);
    });
  });

  it('leaves the resting resource at rest, with the multipliers of the mean year', () => {
    const { cycles } = yearlyCycles(model, ofR);
    const alone = cycles.find(({ x, y }) => x > 0 && y === 0)!;
    expect(alone.x).toBeCloseTo(K, 8);
    const invader = (0.4 * 0.02 * K) / (1 + 0.02 * 0.5 * K) - 0.3;
    expect(alone.multipliers.map(({ re }) => re)).toEqual([
      expect.closeTo(Math.exp(invader), 9),
      expect.closeTo(Math.exp(-r), 9)
    ]);
    expect(alone.stability).toBe('unstable');
    const gone = cycles.find(({ x, y }) => x === 0 && y === 0)!;
    expect(gone.multipliers[0].re).toBeCloseTo(Math.exp(r), 9);
    expect(gone.multipliers[1].re).toBeCloseTo(Math.exp(-0.3), 9);
  });

  it('drives coexistence through a yearly cycle that a long run settles on', () => {
    const { cycles } = yearlyCycles(model, ofR);
    const inside = cycles.filter(({ x, y }) => x > 0 && y > 0);
    expect(inside).toHaveLength(1);
    const [cycle] = inside;
    expect(cycle!.stability).toBe('stable');
    expect(cycle!.xMax).toBeGreaterThan(cycle!.xMin * 1.01);
    const run = simulate(model, {
      start: { x: 30, y: 15 },
      span: [0, 400],
      times: [399, 400],
      rtol: 1e-10,
      season: ofR
    });
    for (const i of [0, 1]) {
      expect(Math.abs(run.x[i]! / cycle!.x - 1)).toBeLessThan(1e-7);
      expect(Math.abs(run.y[i]! / cycle!.y - 1)).toBeLessThan(1e-7);
    }
    // The consumer neither gains nor loses over the year.
    const mean = cycle!.multipliers[0];
    expect(Math.hypot(mean.re, mean.im)).toBeLessThan(1);
  });
});

describe('a seasonal capacity', () => {
  it('keeps the resource alone on a cycle known by quadrature', () => {
    // 1/N obeys d(1/N)/dt = -r/N + r/K(t): over a year the mean of 1/N is that of 1/K, 1/(K sqrt(1 - a^2)).
    const { cycles } = yearlyCycles(model, ofK);
    const alone = cycles.find(({ x, y }) => x > 0 && y === 0)!;
    const n = 40_000;
    let value = 0;
    for (let i = 0; i < n; i++) {
      const s = ((i + 0.5) / n) * ofK.year;
      value += (r * Math.exp(r * (s - ofK.year))) / (K * (1 + ofK.amplitude * Math.cos((2 * Math.PI * s) / ofK.year)));
    }
    const start = (value * ofK.year) / n / (1 - Math.exp(-r * ofK.year));
    expect(Math.abs(alone.x * start - 1)).toBeLessThan(1e-8);
    expect(alone.multipliers.map(({ re }) => re)).toContainEqual(expect.closeTo(Math.exp(-r * ofK.year), 9));
    const run = simulate(model, {
      start: { x: alone.x, y: 0 },
      span: [0, ofK.year],
      samples: 2001,
      rtol: 1e-11,
      season: ofK
    });
    const inverse = run.x.slice(1).reduce((sum, x) => sum + 1 / x, 0) / 2000;
    expect(inverse).toBeCloseTo(1 / (K * Math.sqrt(1 - ofK.amplitude ** 2)), 8);
    expect(alone.xMax).toBeCloseTo(Math.max(...run.x), 3);
    expect(alone.xMin).toBeCloseTo(Math.min(...run.x), 3);
    expect(alone.xMean).toBeCloseTo(run.x.slice(1).reduce((sum, x) => sum + x, 0) / 2000, 6);
  });

  it('agrees with another method on the coupled model', () => {
    const result = simulate(model, { start: { x: 50, y: 8 }, span: [0, 12], samples: 2, rtol: 1e-10, season: ofK });
    const out = new Float64Array(2);
    const solver = new Solver(2);
    solver.relativeTolerance = 1e-12;
    solver.absoluteTolerance = 1e-12;
    const solved = solver.solve(
      (t, [x = 0, y = 0]) => {
        const now = K * (1 + ofK.amplitude * Math.cos((2 * Math.PI * (t - ofK.peak)) / ofK.year));
        compile(withParameter(model, 'first.growth.K', now)).rhs(x, y, out);
        return [out[0]!, out[1]!];
      },
      0,
      [50, 8],
      12
    );
    expect(solved.outcome).toBe(Outcome.Converged);
    expect(Math.abs(result.x[1]! / solved.y[0]! - 1)).toBeLessThan(1e-9);
    expect(Math.abs(result.y[1]! / solved.y[1]! - 1)).toBeLessThan(1e-9);
  });
});

describe('seasonalSystem', () => {
  const kinds: [string, ModelSpec, Season][] = [
    ['r of an Allee resource', { ...model, first: { growth: { kind: 'allee', r, K, A: 20 } } }, ofR],
    ['K of an Allee resource', { ...model, first: { growth: { kind: 'allee', r, K, A: 20 } } }, ofK],
    [
      'r of a competitor, whose losses to the rival it carries too',
      {
        interaction: 'competition',
        first: { growth: { kind: 'logistic', r, K }, removal: { effort: 0.1 } },
        second: { growth: { kind: 'logistic', r: 0.5, K: 80 } },
        competition: { form: 'coefficients', alpha12: 0.6, alpha21: 0.4 }
      },
      ofR
    ],
    [
      'r of a consumer whose ceiling follows the resource',
      {
        interaction: 'consumer-resource',
        first: model.first,
        second: { growth: { kind: 'leslie', r: 0.2, g: 0.3 } },
        feeding: { response: 'holling-3', a: 0.01, h: 0.5, e: 0 }
      },
      { ...ofR, species: 'second' }
    ]
  ];
  it.each(kinds)('is the model compiled at the value of the day: %s', (_name, spec, season) => {
    const system = seasonalSystem(spec, season);
    const path = `${season.species}.growth.${season.of}`;
    const growth = spec[season.species].growth as unknown as Record<string, number>;
    for (const t of [0, 0.3, 0.77]) {
      const now =
        growth[season.of]! * (1 + season.amplitude * Math.cos((2 * Math.PI * (t - season.peak)) / season.year));
      const still = compile(withParameter(spec, path, now));
      system.moveTo!(t);
      for (const [read, size] of [
        ['rhs', 2],
        ['perHead', 2],
        ['jacobian', 4]
      ] as const) {
        const found = new Float64Array(size);
        const wanted = new Float64Array(size);
        system[read](37, 11, found);
        still[read](37, 11, wanted);
        found.forEach((value, i) =>
          expect(Math.abs(value - wanted[i]!)).toBeLessThan(1e-12 * (1 + Math.abs(wanted[i]!)))
        );
      }
    }
  });

  it('refuses a season that fits nothing, or leaves no model', () => {
    const allee: ModelSpec = { ...model, first: { growth: { kind: 'allee', r, K, A: 60 } } };
    expect(() => seasonalSystem(allee, ofK)).toThrow(/worst season/);
    expect(() => seasonalSystem(model, { ...ofK, species: 'second' })).toThrow(RangeError);
    expect(() => seasonalSystem(model, { ...ofK, amplitude: 1 })).toThrow(RangeError);
    expect(() => seasonalSystem(model, { ...ofR, year: 0 })).toThrow(RangeError);
  });
});
