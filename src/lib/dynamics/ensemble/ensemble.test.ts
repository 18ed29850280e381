import { describe, expect, it } from 'vitest';
import { simulate } from '../analysis/trajectory';
import type { ModelSpec } from '../model/spec';
import { bindModel, cholesky } from './draws';
import { runEnsemble, runEnsembleChunk, summariseEnsemble, type EnsemblePlan } from './ensemble';
import { bandsOf, quantileOf } from './quantiles';

const spec: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 1.4, K: 900 } },
  second: { mortality: 0.35 },
  feeding: { response: 'holling-2', a: 0.02, h: 0.6, e: 0.12 }
};
const plan: EnsemblePlan = {
  spec,
  seed: 11,
  draws: 40,
  rates: [
    { path: 'first.growth.K', mean: 900, cv: 0.3 },
    { path: 'feeding.a', mean: 0.02, cv: 0.4 },
    { path: 'first.removal.effort', mean: 0.1, cv: 0.5 }
  ],
  start: { x: 300, y: 20, cvX: 0.2 },
  span: [0, 50],
  samples: 26,
  gone: { second: 1 }
};

describe('an ensemble', () => {
  it('gives the same bytes however it is cut up', () => {
    const whole = runEnsembleChunk(plan, 0, 40)!;
    const parts = [
      [25, 40],
      [0, 7],
      [7, 25]
    ].map(([from, to]) => runEnsembleChunk(plan, from!, to!)!);
    for (const part of parts) {
      expect(part.values).toEqual(whole.values.slice(52 * part.from, 52 * part.to));
      expect(part.outcomes).toEqual(whole.outcomes.slice(part.from, part.to));
      expect(part.drawn).toEqual(whole.drawn.slice(3 * part.from, 3 * part.to));
    }
    expect(summariseEnsemble(plan, parts)).toEqual(summariseEnsemble(plan, [whole]));
    expect(() => summariseEnsemble(plan, parts.slice(1))).toThrow(RangeError);
    expect(() => summariseEnsemble(plan, [whole, ...parts])).toThrow(RangeError);
    expect(runEnsembleChunk({ ...plan, seed: 12 }, 0, 1)!.values).not.toEqual(whole.values.slice(0, 52));
  });

  it('follows each draw as a path of its own', () => {
    const chunk = runEnsembleChunk(plan, 0, 12)!;
    const bound = bindModel(
      spec,
      plan.rates.map((rate) => rate.path)
    );
    for (let i = 0; i < 12; i++) {
      bound.set(chunk.drawn.subarray(3 * i, 3 * i + 3));
      const values = chunk.values.subarray(52 * i);
      const start = { x: values[0]!, y: values[1]! };
      const path = simulate(bound.spec, { start, span: plan.span, samples: 26, rtol: 1e-8 });
      path.x.forEach((x, j) => expect(Math.abs(values[2 * j]! / x - 1)).toBeLessThan(1e-3));
      path.y.forEach((y, j) => expect(Math.abs(values[2 * j + 1]! / y - 1)).toBeLessThan(1e-3));
      expect(chunk.lowest[2 * i]).toBeLessThanOrEqual(Math.min(...path.x) * 1.001);
    }
  });

  it('puts bands, outcomes and losses together', () => {
    const summary = runEnsemble(plan)!;
    expect(summary.times).toHaveLength(26);
    for (let j = 0; j < 26; j++) {
      for (let i = 1; i < 5; i++) expect(summary.bands.x[i]![j]).toBeGreaterThanOrEqual(summary.bands.x[i - 1]![j]!);
    }
    expect(summary.outcomes.reduce((sum, { share }) => sum + share, 0)).toBeCloseTo(1, 12);
    expect(summary.failed).toBe(0);
    expect(summary.fellBelow.first).toBeNull();
    expect(summary.fellBelow.second).toBeGreaterThanOrEqual(0);
    expect(runEnsemble(plan, () => true)).toBeNull();
  });

  it('sees a species exhausted by its quota', () => {
    const taken: ModelSpec = { ...spec, first: { ...spec.first, removal: { quota: 800 } } };
    const summary = runEnsemble({ ...plan, spec: taken, rates: [], draws: 2, gone: { first: 1 } })!;
    expect(summary.fellBelow.first).toBe(1);
    expect(summary.outcomes).toEqual([{ outcome: 'neither', share: 1, standardError: 0 }]);
    expect(summary.bands.x[2]!.at(-1)).toBe(0);
  });

  it('refuses plans that make no sense', () => {
    expect(() => runEnsembleChunk(plan, 30, 50)).toThrow(RangeError);
    expect(() => runEnsemble({ ...plan, rates: [{ path: 'first.growth.A', mean: 1, cv: 0 }] })).toThrow(RangeError);
    expect(() => runEnsemble({ ...plan, rates: [{ path: 'feeding.a', mean: -1, cv: 0 }] })).toThrow(RangeError);
    expect(() => runEnsemble({ ...plan, rates: [{ path: 'feeding.a', mean: 1 }] })).toThrow(RangeError);
  });
});

describe('quantiles', () => {
  it('interpolate between neighbours', () => {
    const sorted = Float64Array.of(1, 2, 4, 8);
    expect([0, 0.5, 0.75, 1].map((p) => quantileOf(sorted, 4, p))).toEqual([1, 3, 5, 8]);
    expect(quantileOf(sorted, 0, 0.5)).toBeNaN();
  });

  it('leave out what is not known', () => {
    const parts = [Float64Array.of(1, 10, 2, Number.NaN), Float64Array.of(3, 30, 4, 40)];
    expect(bandsOf(parts, 2, [0.5])).toEqual({ shares: [0.5], x: [[2, 3]], y: [[20, 40]] });
  });
});

describe('cholesky', () => {
  it('takes a singular covariance, and no other kind of trouble', () => {
    expect([
      ...cholesky([
        [4, 2],
        [2, 1]
      ])
    ]).toEqual([2, 0, 1, 0]);
    expect(() =>
      cholesky([
        [1, 0.5],
        [0.4, 1]
      ])
    ).toThrow(RangeError);
    expect(() =>
      cholesky([
        [0, 1],
        [1, 1]
      ])
    ).toThrow(RangeError);
    expect(() => cholesky([[1, 0]])).toThrow(RangeError);
  });
});
