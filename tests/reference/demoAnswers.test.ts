/**
 * The three invented studies of the demo at the values their surveys were drawn from, against answers computed with
 * SciPy 1.17 (`numpy.linalg.eigvals`, `solve_ivp` with DOP853 at rtol 1e-11, `brentq`): a general-purpose library that
 * shares no code with this engine. Digits are those its script printed.
 */
import { describe, expect, it } from 'vitest';
import {
  findEquilibria,
  invasion,
  limitCycles,
  shareBelow,
  withParameter,
  type ConsumerResourceModel,
  type Equilibrium,
  type ModelSpec
} from '$lib/dynamics';

const crayfish: ModelSpec = {
  interaction: 'competition',
  first: { growth: { kind: 'logistic', r: 0.55, K: 900 } },
  second: { growth: { kind: 'logistic', r: 0.95, K: 1100 } },
  competition: { form: 'coefficients', alpha12: 1.35, alpha21: 0.6 }
};
const rosenzweig = (r: number, K: number, a: number, h: number, e: number, m: number): ConsumerResourceModel => ({
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r, K } },
  second: { mortality: m },
  feeding: { response: 'holling-2', a, h, e }
});
const fern = rosenzweig(0.07, 10, 1 / 750, 250, 15, 0.025);
const goats = rosenzweig(0.35, 4200, 0.2778, 0.002, 0.0014, 0.32);
const HECTARES = 640;

const inside = (spec: ModelSpec): Equilibrium[] => {
  const report = findEquilibria(spec);
  expect(report.complete).toBe(true);
  return report.equilibria.filter(({ x, y }) => x > 0 && y > 0);
};

describe('crayfish: competition', () => {
  it('lets the newcomer in and keeps the native out', () => {
    const rates = invasion(crayfish);
    expect(rates.find((i) => i.invader === 'second')?.rate).toBeCloseTo(0.4836, 4);
    expect(rates.find((i) => i.invader === 'first')?.rate).toBeCloseTo(-0.3575, 4);
  });

  it('has no state with both, the only other crossing being negative', () => {
    expect(inside(crayfish)).toEqual([]);
    const all = findEquilibria(crayfish, { includeInfeasible: true }).equilibria;
    const crossing = all.find(({ x }) => x < 0);
    expect(crossing?.x).toBeCloseTo(-3078.947, 3);
    expect(crossing?.y).toBeCloseTo(2947.368, 3);
  });

  it('lets both live when 0.45 a year of the newcomer is removed', () => {
    const managed: ModelSpec = { ...crayfish, second: { ...crayfish.second, removal: { effort: 0.45 } } };
    const [both, ...others] = inside(managed);
    expect(others).toEqual([]);
    expect(both?.x).toBeCloseTo(623.269, 3);
    expect(both?.y).toBeCloseTo(204.986, 3);
    const [slow, fast] = both?.eigenvalues ?? [];
    expect(slow?.re).toBeCloseTo(-0.02399521, 8);
    expect(fast?.re).toBeCloseTo(-0.53392471, 8);
  });
});

describe('raft-fern and weevil: a cycle', () => {
  it('rests at an unstable spiral', () => {
    const [rest] = inside(fern);
    expect(rest?.x).toBeCloseTo(2.142857, 6);
    expect(rest?.y).toBeCloseTo(70.714286, 6);
    expect(rest?.eigenvalues[0].re).toBeCloseTo(0.00395833, 8);
    expect(rest?.eigenvalues[0].im).toBeCloseTo(0.02804309, 8);
    expect(rest?.stability).toBe('unstable');
  });

  it('turns in 280.75 days between the printed extremes, below 3 kg/m² for 53.1 % of the time', () => {
    const cycles = limitCycles(fern, findEquilibria(fern));
    expect(cycles).toHaveLength(1);
    const cycle = cycles[0]!;
    expect(cycle.stability).toBe('stable');
    expect(cycle.period).toBeCloseTo(280.7507, 3);
    expect(cycle.xMin).toBeCloseTo(0.2216, 4);
    expect(cycle.xMax).toBeCloseTo(7.5833, 3);
    expect(cycle.xMean).toBeCloseTo(3.2807, 3);
    expect(cycle.yMin).toBeCloseTo(18.825, 2);
    expect(cycle.yMax).toBeCloseTo(130.415, 2);
    expect(100 * shareBelow(cycle, 'first', 3)).toBeCloseTo(53.1, 1);
  });

  it('stops turning when less nutrient lowers K, between 7.2 and 7.3', () => {
    const real = (K: number) => inside(withParameter(fern, 'first.growth.K', K))[0]?.eigenvalues[0].re;
    // Printed as −0.00313: the value lies half way between two last digits.
    expect(real(6)).toBeCloseTo(-0.003125, 8);
    expect(real(7)).toBeCloseTo(-0.0006, 5);
    expect(real(7.3)).toBeCloseTo(0.00003, 5);
    expect(real(8)).toBeCloseTo(0.0013, 5);
  });
});

describe('goats and broom: slow return, and a quota', () => {
  it('returns to its resting point in 83 years', () => {
    const [rest] = inside(goats);
    expect(rest?.x).toBeCloseTo(1515.6682, 4);
    expect(rest?.y).toBeCloseTo(1.483328, 6);
    expect(rest?.returnTime).toBeCloseTo(83.18, 2);
    expect(rest?.period).toBeCloseTo(31.93, 2);
    expect(rest?.eigenvalues[0].re).toBeCloseTo(-0.01202271, 8);
    expect(rest?.eigenvalues[0].im).toBeCloseTo(0.19675963, 8);
  });

  it.each([
    [20, 1714.2, 1.4559, -0.01017],
    [40, 1955.3, 1.4049, -0.01053],
    [60, 2291.1, 1.3015, -0.0149],
    [70, 2585.0, 1.1803, -0.0217],
    [73, 2837.3, 1.0532, -0.02135]
  ])('keeps a stable point under a take of %d animals a year', (take, x, y, real) => {
    const stable = inside(withParameter(goats, 'second.removal.quota', take / HECTARES)).filter(
      ({ stability }) => stability === 'stable'
    );
    expect(stable).toHaveLength(1);
    expect(stable[0]?.x).toBeCloseTo(x, 0);
    expect(stable[0]?.y).toBeCloseTo(y, 4);
    expect(stable[0]?.eigenvalues[0].re).toBeCloseTo(real, 5);
  });

  it('has no state with goats once the take is above 73.02 a year', () => {
    expect(inside(withParameter(goats, 'second.removal.quota', 73.01 / HECTARES))).toHaveLength(2);
    expect(inside(withParameter(goats, 'second.removal.quota', 73.03 / HECTARES))).toHaveLength(0);
  });
});
