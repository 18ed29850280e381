/** A share of R runs must lie within 4 sqrt(p (1 - p)/R) of p, a mean within 4 sd/sqrt(R). */
import { describe, expect, it } from 'vitest';
import {
  runStochastic,
  runStochasticChunk,
  type StochasticPlan,
  type StochasticSummary
} from '$lib/dynamics/ensemble/stochastic';
import { competitors, linear, logistic, pureDeath, stocked } from './stochasticCases';

const RUNS = 10_000;
const run = (plan: Omit<StochasticPlan, 'seed' | 'runs' | 'method'>, seed: number): StochasticSummary => {
  const summary = runStochastic({ ...plan, seed, runs: RUNS, method: 'exact' });
  if (summary === null) throw new Error('stopped without being asked');
  expect(summary.failed).toBe(0);
  return summary;
};
const expectShare = (found: number, p: number): void =>
  expect(Math.abs(found - p)).toBeLessThan(4 * Math.sqrt((p * (1 - p)) / RUNS));
const expectMean = (found: number, mean: number, sd: number): void =>
  expect(Math.abs(found - mean)).toBeLessThan((4 * sd) / Math.sqrt(RUNS));

describe('exact simulation', () => {
  it(`${linear.id}: linear birth and death`, () => {
    const { spec, turnover, start, at } = linear;
    const found = run({ spec, turnover, start: { x: start, y: 0 }, span: [0, 20], samples: 21 }, 101);
    for (const { t, extinct, mean, variance } of at) {
      expectShare(found.lostBy.first[t]!, extinct);
      expectMean(found.mean.x[t]!, mean, Math.sqrt(variance));
      // Kurtosis is that of a nearly exponential number: the spread of a sample variance is about sqrt(8/R) of it.
      expect(Math.abs(found.variance.x[t]! / variance - 1)).toBeLessThan(4 * Math.sqrt(10 / RUNS));
    }
  });

  it(`${pureDeath.id}: pure death`, () => {
    const { spec, start, meanTime, sdTime, by } = pureDeath;
    const found = run({ spec, start: { x: start, y: 0 }, span: [0, 200], samples: 41 }, 102);
    expect(found.lost.first.share).toBe(1);
    expectMean(found.lost.first.meanTime, meanTime, sdTime);
    for (const { t, extinct } of by) expectShare(found.lostBy.first[t / 5]!, extinct);
  });

  it.each(logistic.cases)(`${logistic.id}: logistic birth and death from $start`, (expected) => {
    const { spec, turnover } = logistic;
    const start = { x: expected.start, y: 0 };
    const early = run({ spec, turnover, start, span: [0, 60], samples: 13 }, 103 + expected.start);
    for (const { t, extinct, mean } of expected.by) {
      expectShare(early.lostBy.first[t / 5]!, extinct);
      expectMean(early.mean.x[t / 5]!, mean, Math.sqrt(early.variance.x[t / 5]!));
    }
    const whole = run({ spec, turnover, start, span: [0, 4000], samples: 2 }, 120 + expected.start);
    expect(whole.lost.first.share).toBe(1);
    expectMean(whole.lost.first.meanTime, expected.meanTime, expected.sdTime);
  });

  it(`${stocked.id}: stocking and death`, () => {
    const plan = { spec: stocked.spec, start: { x: 0, y: 0 }, span: [0, 10] as const, samples: 11 };
    const found = run(plan, 104);
    const chunk = runStochasticChunk({ ...plan, method: 'exact', seed: 104, runs: RUNS }, 0, RUNS);
    for (const { t, mean, zero } of stocked.at) {
      expectShare(
        Array.from({ length: RUNS }, (_, i) => chunk?.values[2 * (11 * i + t)]).filter((n) => n === 0).length / RUNS,
        zero
      );
      expectMean(found.mean.x[t]!, mean, Math.sqrt(mean));
      expect(Math.abs(found.variance.x[t]! / mean - 1)).toBeLessThan(4 * Math.sqrt((2 + 1 / mean) / RUNS));
    }
  });

  it(`${competitors.id}: which competitor is lost first, and when`, () => {
    const { spec, turnover, start } = competitors;
    const plan = { spec, turnover, start: { x: start, y: start }, span: [0, 1000] as const, samples: 2 };
    const found = run({ ...plan, stopsAtLoss: true }, 105);
    expectShare(found.firstLostFirst, competitors.firstLostFirst);
    expectMean(found.lost.either.meanTime, competitors.meanTime, competitors.sdTime);
  });
});
