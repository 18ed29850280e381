import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  checkModel,
  compile,
  evaluateExpression,
  findEquilibria,
  jacobianTrees,
  parametersOf,
  rateExpressions,
  withParameter
} from '$lib/dynamics';
import { drafts, scales, SEED, UNIT } from './models';

const states = fc.record({
  x: fc.integer({ min: 1, max: 800 }).map((n) => n / 100),
  y: fc.integer({ min: 1, max: 800 }).map((n) => n / 100)
});
const run = { seed: SEED, numRuns: 2000 };

describe('what is compiled, printed and differentiated is one and the same model', () => {
  it('draws sound models', () => {
    fc.assert(
      fc.property(drafts, scales, (draft, scale) => {
        expect(checkModel(draft.write(scale))).toEqual([]);
      }),
      run
    );
  });

  it('rates equal the printed expressions, in any unit', () => {
    fc.assert(
      fc.property(drafts, scales, states, (draft, scale, { x, y }) => {
        const spec = draft.write(scale);
        const system = compile(spec);
        const [rate, size] = [new Float64Array(2), new Float64Array(2)];
        system.rhs(x * scale.x, y * scale.y, rate);
        system.magnitude(x * scale.x, y * scale.y, size);
        rateExpressions(spec).forEach((expression, i) => {
          const value = evaluateExpression(expression, x * scale.x, y * scale.y);
          expect(Math.abs(value - rate[i]!)).toBeLessThanOrEqual(1e-13 * size[i]!);
        });
      }),
      run
    );
  });

  it('the Jacobian equals the derivative of the expressions and central differences', () => {
    fc.assert(
      fc.property(drafts, states, (draft, { x, y }) => {
        const spec = draft.write(UNIT);
        const system = compile(spec);
        const [j, size] = [new Float64Array(4), new Float64Array(2)];
        system.jacobian(x, y, j);
        system.magnitude(x, y, size);
        const trees = jacobianTrees(spec).flat();
        const at = (px: number, py: number) => {
          const out = new Float64Array(2);
          system.rhs(px, py, out);
          return out;
        };
        [0, 1, 2, 3].forEach((entry) => {
          const [row, column] = [entry >> 1, entry % 2];
          const here = column === 0 ? x : y;
          // The natural size of a slope: the terms of the rate over the abundance.
          const scale = size[row]! / here;
          expect(Math.abs(evaluateExpression(trees[entry]!, x, y) - j[entry]!)).toBeLessThanOrEqual(1e-12 * scale);
          const h = 1e-3 * here;
          const step = (multiple: number) =>
            column === 0 ? at(x + multiple * h, y)[row]! : at(x, y + multiple * h)[row]!;
          const slope = (8 * (step(1) - step(-1)) - (step(2) - step(-2))) / (12 * h);
          expect(Math.abs(slope - j[entry]!)).toBeLessThanOrEqual(1e-9 * scale);
        });
      }),
      run
    );
  });

  it('per-head rates times abundance, with what is added and taken, are the rates', () => {
    fc.assert(
      fc.property(drafts, states, (draft, { x, y }) => {
        const spec = draft.write(UNIT);
        const system = compile(spec);
        const [rate, perHead, size] = [new Float64Array(2), new Float64Array(2), new Float64Array(2)];
        system.rhs(x, y, rate);
        system.perHead(x, y, perHead);
        system.magnitude(x, y, size);
        [spec.first, spec.second].forEach((species, i) => {
          const net = (species.stocking ?? 0) - (species.removal?.quota ?? 0);
          expect(Math.abs(perHead[i]! * [x, y][i]! + net - rate[i]!)).toBeLessThanOrEqual(1e-13 * size[i]!);
        });
      }),
      run
    );
  });

  it('axes stay axes where nothing is added or taken by the unit', () => {
    fc.assert(
      fc.property(drafts, states, (draft, { x, y }) => {
        const system = compile(draft.write(UNIT));
        const rate = new Float64Array(2);
        if (system.firstAxisInvariant) {
          system.rhs(0, y, rate);
          expect(rate[0]! + 0).toBe(0);
        }
        if (system.secondAxisInvariant) {
          system.rhs(x, 0, rate);
          expect(rate[1]! + 0).toBe(0);
        }
      }),
      run
    );
  });

  it('every listed parameter can be written and read back, and nothing else changes', () => {
    fc.assert(
      fc.property(drafts, (draft) => {
        const spec = draft.write(UNIT);
        const before = parametersOf(spec);
        for (const { path, value } of before) {
          const after = parametersOf(withParameter(spec, path, value * 1.25 + 0.125));
          expect(after.map((p) => (p.path === path ? { ...p, value } : p))).toEqual(before);
        }
        expect(() => withParameter(spec, 'first.growth.unheard', 1)).toThrow(RangeError);
      }),
      { ...run, numRuns: 200 }
    );
  });

  it('the same document gives the same bytes', () => {
    fc.assert(
      fc.property(drafts, scales, (draft, scale) => {
        const once = JSON.stringify(findEquilibria(draft.write(scale)));
        expect(JSON.stringify(findEquilibria(draft.write(scale)))).toBe(once);
      }),
      { ...run, numRuns: 200 }
    );
  });
});
