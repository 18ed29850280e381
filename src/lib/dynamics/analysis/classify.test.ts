import { describe, expect, it } from 'vitest';
import type { ModelSpec } from '../model/spec';
import { classify } from './classify';
import { centreManifold, firstLyapunov, higherTerms, type HigherTerms } from './normalForm';

const spec: ModelSpec = {
  interaction: 'competition',
  first: { growth: { kind: 'logistic', r: 1, K: 1 } },
  second: { growth: { kind: 'logistic', r: 1, K: 1 } },
  competition: { form: 'coefficients', alpha12: 0.5, alpha21: 0.5 }
};
const kindOf = (a: number, b: number, c: number, d: number) => classify(spec, 1, 1, [a, b, c, d], null).class;

/** Forms of x' = y + sum of given cubic and quadratic terms, y' = -x + ..., from partial derivatives. */
function forms(f: Record<string, number>, g: Record<string, number>): HigherTerms {
  const at = (p: Record<string, number>, key: string) => p[key] ?? 0;
  const second = (p: Record<string, number>, u: readonly number[], v: readonly number[]) =>
    at(p, 'xx') * u[0]! * v[0]! + at(p, 'xy') * (u[0]! * v[1]! + u[1]! * v[0]!) + at(p, 'yy') * u[1]! * v[1]!;
  const third = (p: Record<string, number>, u: readonly number[], v: readonly number[], w: readonly number[]) =>
    at(p, 'xxx') * u[0]! * v[0]! * w[0]! + at(p, 'yyy') * u[1]! * v[1]! * w[1]!;
  return {
    second: (u, v) => [second(f, u, v), second(g, u, v)],
    third: (u, v, w) => [third(f, u, v, w), third(g, u, v, w)]
  };
}

describe('classify', () => {
  it.each([
    [-1, 0, 0, -2, 'stable node'],
    [1, 0.1, 0, 2, 'unstable node'],
    [1, 3, 1, -2, 'saddle'],
    [-1, 5, -5, -1, 'stable spiral'],
    [1, 5, -5, 1, 'unstable spiral'],
    [-1, 0, 0, -1, 'stable star'],
    [2, 0, 0, 2, 'unstable star'],
    [-1, 1, 0, -1, 'stable degenerate node'],
    [1, 0, 3, 1, 'unstable degenerate node'],
    [-1, 2, 0, 0, 'non-hyperbolic']
  ] as const)('[[%d, %d], [%d, %d]] is a %s', (a, b, c, d, kind) => {
    expect(kindOf(a, b, c, d)).toBe(kind);
  });

  it('does not care in which units the populations are counted', () => {
    for (const unit of [1e-9, 1, 1e9]) {
      expect(kindOf(-1e-8, 5e-8 * unit, -5e-8 / unit, -1e-8)).toBe('stable spiral');
      expect(kindOf(-1, 2 * unit, 3 / unit, -6 - 1e-6)).toBe('stable node');
      expect(kindOf(-1, 2 * unit, 3 / unit, -6 + 1e-6)).toBe('saddle');
    }
  });

  it('keeps two very different rates apart from zero on an axis', () => {
    expect(classify(spec, 1, 0, [-1, 5, 0, 3e-12], null).borderline).toBe(true);
    expect(classify(spec, 1, 0, [-1, 5, 0, 0.2], null).borderline).toBe(false);
  });

  it('gives return time by the slow direction and period by the turning', () => {
    expect(classify(spec, 1, 1, [-4, 0, 0, -0.5], null)).toMatchObject({ returnTime: 2, period: null });
    const spiral = classify(spec, 1, 1, [-0.5, 2, -2, -0.5], null);
    expect(spiral.returnTime).toBeCloseTo(2, 12);
    expect(spiral.period).toBeCloseTo(Math.PI, 12);
  });
});

describe('normal forms', () => {
  it('finds x^3 damping of an oscillator attracting, whichever way it turns', () => {
    for (const turn of [1, -1]) {
      const damped = forms({ xxx: -6 }, {});
      expect(firstLyapunov([0, turn, -turn, 0], damped).value).toBeLessThan(0);
      expect(firstLyapunov([0, turn, -turn, 0], forms({ xxx: 6 }, {})).value).toBeGreaterThan(0);
    }
  });

  it('weighs quadratic terms by their products', () => {
    // x' = -y + x^2, y' = x + b x^2 has 16 a = -f_xx g_xx = -4 b at omega = 1.
    for (const b of [1, -1]) {
      const { value } = firstLyapunov([0, -1, 1, 0], forms({ xx: 2 }, { xx: 2 * b }));
      expect(16 * value).toBeCloseTo(-4 * b, 12);
    }
  });

  it("bends the centre manifold: x' = x y, y' = -y - x^2 gives u' = -u^3", () => {
    const manifold = centreManifold([0, 0, 0, -1], forms({ xy: 1 }, { xx: -2 }));
    expect(manifold.quadratic.value).toBe(0);
    const [dx] = manifold.direction;
    expect(manifold.cubic.value / dx ** 2).toBeCloseTo(-1, 12);
  });

  it('takes derivatives of a saturating response to the third order', () => {
    const saturating: ModelSpec = {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'exponential', r: 0 } },
      second: { mortality: 0 },
      feeding: { response: 'holling-2', a: 1, h: 1, e: 1 }
    };
    // x y/(1 + x): third x-derivative 6 y/(1 + x)^4, second -2 y/(1 + x)^3.
    const terms = higherTerms(saturating, 1, 2);
    expect(terms.second([1, 0], [1, 0])[1]).toBeCloseTo((-2 * 2) / 8, 12);
    expect(terms.third([1, 0], [1, 0], [1, 0])[1]).toBeCloseTo((6 * 2) / 16, 12);
    expect(terms.second([1, 0], [0, 1])[1]).toBeCloseTo(1 / 4, 12);
  });
});
