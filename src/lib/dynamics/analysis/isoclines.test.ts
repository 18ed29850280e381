import { describe, expect, it } from 'vitest';
import { compile } from '../model/compile';
import type { ModelSpec } from '../model/spec';
import { findEquilibria } from './equilibria';
import { isoclines } from './isoclines';
import { suggestWindow, vectorField } from './vectorField';

const models: [string, ModelSpec][] = [
  [
    'saturating consumer',
    {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'logistic', r: 1, K: 60 } },
      second: { mortality: 0.5 },
      feeding: { response: 'holling-2', a: 0.1, h: 0.5, e: 0.5 }
    }
  ],
  [
    'ceiling that follows, quota and interference',
    {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'logistic', r: 1, K: 60 }, removal: { quota: 3 } },
      second: { growth: { kind: 'leslie', r: 0.3, g: 0.4 }, removal: { quota: 0.2 } },
      feeding: { response: 'holling-3', a: 0.01, h: 0.5, e: 0.5, interference: 0.2 }
    }
  ],
  [
    'one-sided competition under stocking',
    {
      interaction: 'competition',
      first: { growth: { kind: 'allee', r: 1, K: 100, A: 20 } },
      second: { growth: { kind: 'logistic', r: 1, K: 50 }, stocking: 2 },
      competition: { form: 'encounters', b12: 0, b21: 0.01 }
    }
  ]
];

describe('isoclines', () => {
  it.each(models)('of a %s are where nothing changes, and pass through every equilibrium', (_name, spec) => {
    const report = findEquilibria(spec);
    const window = suggestWindow(spec, report);
    const system = compile(spec);
    const curves = isoclines(spec, window);
    const [rate, size] = [new Float64Array(2), new Float64Array(2)];
    for (const { species, points } of curves) {
      const which = species === 'first' ? 0 : 1;
      for (const { x, y } of points) {
        system.rhs(x, y, rate);
        system.magnitude(x, y, size);
        // At x = 0 a following ceiling has no value.
        if (x > 0) expect(Math.abs(rate[which]!)).toBeLessThanOrEqual(1e-9 * size[which]! + 1e-12);
        expect(x).toBeLessThanOrEqual(window.xMax * (1 + 1e-9));
        expect(y).toBeLessThanOrEqual(window.yMax * (1 + 1e-9));
      }
    }
    for (const { x, y } of report.equilibria) {
      for (const species of ['first', 'second'] as const) {
        const nearest = Math.min(
          ...curves
            .filter((curve) => curve.species === species)
            .flatMap(({ points }) =>
              points.slice(1).map((q, i) => {
                const p = points[i]!;
                const [ux, uy] = [(q.x - p.x) / window.xMax, (q.y - p.y) / window.yMax];
                const [vx, vy] = [(x - p.x) / window.xMax, (y - p.y) / window.yMax];
                const share = Math.min(1, Math.max(0, (ux * vx + uy * vy) / (ux * ux + uy * uy)));
                return Math.hypot(vx - share * ux, vy - share * uy);
              })
            )
        );
        expect(nearest).toBeLessThan(2e-3);
      }
    }
  });

  it('marks the axes on which a species is absent, and only where they are invariant', () => {
    const trivial = isoclines(models[2]![1], { xMax: 120, yMax: 60 }).filter((curve) => curve.trivial);
    expect(trivial.map(({ species }) => species)).toEqual(['first']);
  });
});

describe('the frame and the field', () => {
  it('frames every equilibrium with room to spare, on round numbers', () => {
    for (const [, spec] of models) {
      const report = findEquilibria(spec);
      const { xMax, yMax } = suggestWindow(spec, report, [{ x: 130, y: 1 }]);
      expect(xMax).toBeGreaterThan(130);
      for (const { x, y } of report.equilibria) {
        expect(x).toBeLessThan(xMax);
        expect(y).toBeLessThan(yMax);
      }
    }
  });

  it('samples rates at cell centres', () => {
    const field = vectorField(models[0]![1], { xMax: 10, yMax: 4 }, 5, 2);
    expect(field).toHaveLength(10);
    expect(field[0]).toMatchObject({ x: 1, y: 1 });
    expect(field[9]).toMatchObject({ x: 9, y: 3 });
    expect(field[0]!.dx).toBeCloseTo(1 - 1 / 60 - 0.1 / 1.05, 12);
  });
});
