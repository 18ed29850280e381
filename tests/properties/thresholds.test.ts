import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkModel, findEquilibria, parametersOf, thresholds, withParameter, type ModelSpec } from '$lib/dynamics';
import { drafts, scales, SEED } from './models';

interface Question {
  spec: ModelSpec;
  path: string;
  range: [number, number];
}

/** Any number of any model, from a share of its value to a multiple of it; one that is 0 from there on. */
const questions: fc.Arbitrary<Question> = fc
  .record({ draft: drafts, scale: scales, pick: fc.nat(1000), factor: fc.constantFrom(2, 5, 50) })
  .map(({ draft, scale, pick, factor }): Question => {
    const spec = draft.write(scale);
    const all = parametersOf(spec);
    const { path, value } = all[pick % all.length]!;
    const size = Math.abs(value) || naturalSize(spec, path);
    return { spec, path, range: [value === 0 ? 0 : size / factor, size * factor] };
  })
  .filter(({ spec, path, range }) => range.every((p) => checkModel(withParameter(spec, path, p)).length === 0));

/** A value that matters for a number that is 0. */
function naturalSize(spec: ModelSpec, path: string): number {
  const { first, second } = spec;
  const rate = Math.abs(first.growth.r);
  const size = 'K' in first.growth ? first.growth.K : 1;
  const other = second.growth && 'K' in second.growth ? second.growth.K : 1;
  const abundance = path.startsWith('second') ? other : size;
  if (path.endsWith('effort')) return rate;
  if (path.endsWith('quota') || path.endsWith('stocking')) return 0.3 * rate * abundance;
  if (path.endsWith('alpha12')) return size / other;
  if (path.endsWith('alpha21')) return other / size;
  if (path.endsWith('b12')) return rate / other;
  return path.endsWith('b21') ? rate / size : 1 / other;
}

describe('branches of equilibria over one parameter', () => {
  it('pass through every equilibrium at values that they were not sought at, with its stability', () => {
    let compared = 0;
    fc.assert(
      fc.property(questions, fc.double({ min: 0.03, max: 0.97, noNaN: true }), ({ spec, path, range }, share) => {
        const report = thresholds(spec, path, range);
        // What is said to be uncertain may be.
        fc.pre(report.complete);
        const p = range[0] + share * (range[1] - range[0]);
        const width = range[1] - range[0];
        fc.pre(report.thresholds.every(({ value }) => Math.abs(value - p) > 1e-3 * width));
        const there = findEquilibria(withParameter(spec, path, p));
        fc.pre(there.continua.length === 0);
        const passed = report.branches.flatMap(({ parameter, x, y, stable }) =>
          parameter.slice(1).flatMap((to, i) => {
            const from = parameter[i]!;
            if ((from - p) * (to - p) > 0) return [];
            const part = (p - from) / (to - from);
            const between = (column: readonly number[]) => column[i]! + part * (column[i + 1]! - column[i]!);
            return [{ x: between(x), y: between(y), stable: stable[i]! || stable[i + 1]! }];
          })
        );
        expect(passed).toHaveLength(there.equilibria.length);
        const largest = (which: 'x' | 'y') => Math.max(...there.equilibria.map((point) => point[which]), 1e-300);
        for (const point of there.equilibria) {
          const match = passed.find(
            (one) =>
              Math.abs(one.x - point.x) < 0.02 * largest('x') &&
              Math.abs(one.y - point.y) < 0.02 * largest('y') &&
              (point.decidedBy !== 'linearisation' || one.stable === (point.stability === 'stable'))
          );
          expect(match, JSON.stringify({ p, point, passed })).toBeDefined();
        }
        for (const { value } of report.thresholds) {
          expect(value).toBeGreaterThan(range[0]);
          expect(value).toBeLessThan(range[1]);
        }
        compared += 1;
      }),
      { seed: SEED, numRuns: 60 }
    );
    expect(compared).toBeGreaterThan(0);
  });
});
