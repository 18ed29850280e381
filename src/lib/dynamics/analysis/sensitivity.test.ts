import { describe, expect, it } from 'vitest';
import { parametersOf, withParameter } from '../model/parameters';
import type { ModelSpec } from '../model/spec';
import { findEquilibria } from './equilibria';
import { invasion } from './invasion';
import { eigenvalueSensitivity, equilibriumSensitivity } from './sensitivity';

const feeding: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 1.1, K: 90 }, removal: { effort: 0.2, quota: 1 } },
  second: { mortality: 0.3, removal: { effort: 0.05 } },
  feeding: { response: 'holling-2', a: 0.04, h: 0.6, e: 0.45, interference: 0.02 }
};
const interior = (spec: ModelSpec) => findEquilibria(spec).equilibria.find(({ y }) => y > 0)!;
const nearest = (spec: ModelSpec, here: { x: number; y: number }) =>
  findEquilibria(spec).equilibria.reduce((p, q) =>
    Math.hypot(q.x - here.x, q.y - here.y) < Math.hypot(p.x - here.x, p.y - here.y) ? q : p
  );

describe('sensitivities', () => {
  it('equal what moving each parameter does', () => {
    const here = interior(feeding);
    for (const { path, value } of parametersOf(feeding)) {
      const h = 1e-5 * (value || 1e-2);
      const [up, down] = [
        nearest(withParameter(feeding, path, value + h), here),
        nearest(withParameter(feeding, path, value - h), here)
      ];
      const [shift] = equilibriumSensitivity(feeding, here, [path]);
      const close = (found: number, measured: number) =>
        expect(Math.abs(found - measured)).toBeLessThanOrEqual(1e-5 * Math.abs(measured) + 1e-8);
      close(shift!.dx, (up.x - down.x) / (2 * h));
      close(shift!.dy, (up.y - down.y) / (2 * h));
      const [turn] = eigenvalueSensitivity(feeding, here, [path]);
      close(turn!.derivatives[0].re, (up.eigenvalues[0].re - down.eigenvalues[0].re) / (2 * h));
      close(turn!.derivatives[0].im, (up.eigenvalues[0].im - down.eigenvalues[0].im) / (2 * h));
    }
  });

  it('refuses a parameter that the model does not have', () => {
    expect(() => equilibriumSensitivity(feeding, { x: 1, y: 1 }, ['competition.alpha12'])).toThrow(RangeError);
  });
});

describe('invasion', () => {
  it('gives growth per head of the rare species beside the resident', () => {
    const founderControl: ModelSpec = {
      interaction: 'competition',
      first: { growth: { kind: 'logistic', r: 0.7, K: 100 } },
      second: { growth: { kind: 'logistic', r: 0.5, K: 90 } },
      competition: { form: 'coefficients', alpha12: 1.5, alpha21: 1.4 }
    };
    const found = invasion(founderControl);
    expect(found.map(({ resident, invader, canInvade }) => [resident, invader, canInvade])).toEqual([
      ['first', 'second', false],
      ['second', 'first', false]
    ]);
    expect(found[0]!.rate).toBeCloseTo(0.5 * (1 - (1.4 * 100) / 90), 12);
    expect(found[1]!.rate).toBeCloseTo(0.7 * (1 - (1.5 * 90) / 100), 12);
  });

  it('says null where the rare species neither grows nor declines', () => {
    const balanced: ModelSpec = {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'logistic', r: 1, K: 20 } },
      second: { mortality: 0.5 },
      feeding: { response: 'holling-2', a: 0.1, h: 0.5, e: 0.5 }
    };
    expect(invasion(balanced)).toEqual([expect.objectContaining({ resident: 'first', canInvade: null })]);
  });
});
