/**
 * Uncertain rates with known chances of each outcome: closed forms in log-normal ratios, and a bivariate normal for the third,
 * worked out with 60 digits. A share of R draws must lie within 4 sqrt(p (1 - p)/R) of p.
 */
import { describe, expect, it } from 'vitest';
import type { ModelSpec } from '$lib/dynamics';
import { logMoments, makeDraws } from '$lib/dynamics/ensemble/draws';
import {
  runEnsemble,
  type DrawOutcome,
  type EnsemblePlan,
  type EnsembleSummary
} from '$lib/dynamics/ensemble/ensemble';
import { randomStream } from '$lib/dynamics/numeric/random';

const DRAWS = 20_000;
const run = (plan: Pick<EnsemblePlan, 'spec' | 'rates'>, draws = DRAWS): EnsembleSummary => {
  const summary = runEnsemble({ ...plan, seed: 4, draws, start: { x: 10, y: 10 }, span: [0, 1], samples: 2 });
  if (summary === null) throw new Error('stopped without being asked');
  return summary;
};
const expectShare = (found: number, p: number, draws = DRAWS): void =>
  expect(Math.abs(found - p)).toBeLessThanOrEqual(4 * Math.sqrt((p * (1 - p)) / draws));
const shareOf = (summary: EnsembleSummary, outcome: DrawOutcome): number =>
  summary.outcomes.find((one) => one.outcome === outcome)?.share ?? 0;

const competition = (K1: number, K2: number, alpha12: number, alpha21: number): ModelSpec => ({
  interaction: 'competition',
  first: { growth: { kind: 'logistic', r: 1, K: K1 } },
  second: { growth: { kind: 'logistic', r: 1, K: K2 } },
  competition: { form: 'coefficients', alpha12, alpha21 }
});

describe('uncertain rates', () => {
  it('S-UNC-01: uncertain carrying capacities', () => {
    const found = run({
      spec: competition(100, 90, 0.8, 0.7),
      rates: [
        { path: 'first.growth.K', mean: 100, cv: 0.2 },
        { path: 'second.growth.K', mean: 90, cv: 0.3 }
      ]
    });
    expectShare(shareOf(found, 'coexistence'), 0.5798976767481062);
    expectShare(shareOf(found, 'first alone'), 0.25998461922817867);
    expectShare(shareOf(found, 'second alone'), 0.16011770402371514);
    expect(shareOf(found, 'depends on the start')).toBe(0);
  });

  it('S-UNC-02: whether the consumer persists, and the spread of the resource', () => {
    const rates = [
      { path: 'feeding.e', mean: 0.2, cv: 0.25 },
      { path: 'feeding.a', mean: 0.01, cv: 0.3 },
      { path: 'first.growth.K', mean: 150, cv: 0.3 },
      { path: 'second.mortality', mean: 0.2, cv: 0.2 }
    ];
    const found = run({
      spec: {
        interaction: 'consumer-resource',
        first: { growth: { kind: 'logistic', r: 1, K: 150 } },
        second: { mortality: 0.2 },
        feeding: { response: 'holling-1', a: 0.01, e: 0.2 }
      },
      rates
    });
    expectShare(shareOf(found, 'coexistence'), 0.7228963550752209);
    expectShare(found.resting.share, 0.7228963550752209);
    // The level m/(e a) over all draws, feasible or not.
    const draws = makeDraws({ rates });
    const values = new Float64Array(4);
    const level = Array.from({ length: DRAWS }, (_, i) => {
      draws.write(randomStream(4, i), values);
      return values[3]! / (values[0]! * values[1]!);
    });
    for (const [p, quantile] of [
      [0.05, 51.91092390858352],
      [0.5, 105.5263820458766],
      [0.95, 214.51780221255106]
    ] as const) {
      expectShare(level.filter((value) => value <= quantile).length / DRAWS, p);
    }
  });

  it('S-UNC-03: four uncertain constants, four outcomes', () => {
    const found = run({
      spec: competition(100, 95, 0.8, 0.7),
      rates: [
        { path: 'competition.alpha12', mean: 0.8, cv: 0.3 },
        { path: 'competition.alpha21', mean: 0.7, cv: 0.3 },
        { path: 'first.growth.K', mean: 100, cv: 0.2 },
        { path: 'second.growth.K', mean: 95, cv: 0.25 }
      ]
    });
    expectShare(shareOf(found, 'coexistence'), 0.5696148041382096);
    expectShare(shareOf(found, 'first alone'), 0.2070604016529988);
    expectShare(shareOf(found, 'second alone'), 0.21361085687762127);
    expectShare(shareOf(found, 'depends on the start'), 0.009713937331170281);
  });

  it('S-UNC-04: a quota beyond the largest sustainable one', () => {
    const rates = [
      { path: 'first.growth.r', mean: 0.5, cv: 0.3 },
      { path: 'first.growth.K', mean: 1000, cv: 0.2 }
    ];
    const draws = makeDraws({ rates });
    const values = new Float64Array(2);
    const largest = Array.from({ length: DRAWS }, (_, i) => {
      draws.write(randomStream(9, i), values);
      return (values[0]! * values[1]!) / 4;
    });
    expectShare(largest.filter((most) => most < 100).length / DRAWS, 0.32524424857836615);
    expectShare(largest.filter((most) => most < 74.57431415057042).length / DRAWS, 0.1);
    // The same from the model itself: nothing but extinction is left to rest in.
    const found = run(
      {
        spec: {
          interaction: 'competition',
          first: { growth: { kind: 'logistic', r: 0.5, K: 1000 }, removal: { quota: 100 } },
          second: { growth: { kind: 'exponential', r: -1 } },
          competition: { form: 'encounters', b12: 0, b21: 0 }
        },
        rates
      },
      600
    );
    expectShare(shareOf(found, 'neither'), 0.32524424857836615, 600);
    expectShare(shareOf(found, 'depends on the start'), 1 - 0.32524424857836615, 600);
  });

  it('draws with a covariance of logarithms', () => {
    const logCovariance = [
      [0.04, 0.03, 0],
      [0.03, 0.09, -0.01],
      [0, -0.01, 0.01]
    ];
    const draws = makeDraws({ rates: ['a', 'b', 'c'].map((path, i) => ({ path, mean: i + 1 })), logCovariance });
    const values = new Float64Array(3);
    const logs = Array.from({ length: DRAWS }, (_, i) => {
      draws.write(randomStream(12, i), values);
      return Array.from(values, Math.log);
    });
    const mean = [0, 1, 2].map((i) => logs.reduce((sum, row) => sum + row[i]!, 0) / DRAWS);
    for (const i of [0, 1, 2]) {
      const expected = Math.log(i + 1) - logCovariance[i]![i]! / 2;
      expect(Math.abs(mean[i]! - expected)).toBeLessThan(4 * Math.sqrt(logCovariance[i]![i]! / DRAWS));
      for (const j of [0, 1, 2]) {
        const found = logs.reduce((sum, row) => sum + (row[i]! - mean[i]!) * (row[j]! - mean[j]!), 0) / DRAWS;
        const size = Math.sqrt(2 * logCovariance[i]![i]! * logCovariance[j]![j]!);
        expect(Math.abs(found - logCovariance[i]![j]!)).toBeLessThan((4 * size) / Math.sqrt(DRAWS));
      }
    }
    const bad = [
      [1, 2],
      [2, 1]
    ];
    expect(() =>
      makeDraws({
        rates: [
          { path: 'a', mean: 1 },
          { path: 'b', mean: 1 }
        ],
        logCovariance: bad
      })
    ).toThrow(RangeError);
    expect(logMoments(2, 0)).toEqual({ mu: Math.log(2), sigma: 0 });
  });
});
