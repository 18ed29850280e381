import { describe, expect, it } from 'vitest';
import type { ModelSpec } from '../model/spec';
import { findEquilibria } from './equilibria';
import { separatrices } from './separatrices';
import { simulate } from './trajectory';

const rivals = (alpha12: number, alpha21: number, K2 = 1, r2 = 1): ModelSpec => ({
  interaction: 'competition',
  first: { growth: { kind: 'logistic', r: 1, K: 1 } },
  second: { growth: { kind: 'logistic', r: r2, K: K2 } },
  competition: { form: 'coefficients', alpha12, alpha21 }
});
const endOf = (spec: ModelSpec, start: { x: number; y: number }, time = 400) => {
  const path = simulate(spec, { start, span: [0, time], samples: 2, rtol: 1e-9 });
  return { x: path.x[1]!, y: path.y[1]! };
};

describe('separatrices', () => {
  it('give the diagonal between equal rivals, from the saddle to the origin and out of the window', () => {
    const spec = rivals(1.5, 1.5);
    const curves = separatrices(spec, findEquilibria(spec), { xMax: 1.2, yMax: 1.2 });
    expect(curves).toHaveLength(2);
    expect(curves.map((c) => c.ends).sort()).toEqual(['equilibrium', 'window']);
    for (const { points } of curves) {
      expect(points[0]!.x).toBeCloseTo(0.4, 10);
      for (const p of points) expect(Math.abs(p.x - p.y)).toBeLessThan(1e-6);
    }
  });

  it('part the starts: a step to either side ends elsewhere', () => {
    const spec = rivals(1.8, 1.3, 0.9, 0.6);
    const curves = separatrices(spec, findEquilibria(spec), { xMax: 1.2, yMax: 1.2 });
    expect(curves).toHaveLength(2);
    for (const curve of curves) {
      for (const p of curve.points.filter((q) => q.x > 0.05 && q.x < 1.2 && q.y < 1.2)) {
        const right = endOf(spec, { x: p.x + 2e-3, y: p.y });
        const left = endOf(spec, { x: p.x - 2e-3, y: p.y });
        expect(right.x).toBeGreaterThan(0.99);
        expect(left.x).toBeLessThan(0.01);
      }
    }
  });

  it('rise from a saddle on the axis where it parts the interior', () => {
    // Below the Allee threshold the resource is lost, and with it the consumer.
    const spec: ModelSpec = {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'allee', r: 0.5, K: 100, A: 20 } },
      second: { mortality: 0.4 },
      feeding: { response: 'holling-1', a: 0.01, e: 0.5 }
    };
    const report = findEquilibria(spec);
    const curves = separatrices(spec, report, { xMax: 120, yMax: 80 });
    const rising = curves.filter((c) => report.equilibria[c.saddle]!.y === 0 && report.equilibria[c.saddle]!.x === 20);
    expect(rising).toHaveLength(1);
    const { points } = rising[0]!;
    let tested = 0;
    for (let i = 1; i < points.length - 1; i++) {
      const [before, p, after] = [points[i - 1]!, points[i]!, points[i + 1]!];
      if (p.y < 1 || p.y > 80 || p.x > 120) continue;
      const along = Math.hypot(after.x - before.x, after.y - before.y);
      const across = { x: (after.y - before.y) / along, y: (before.x - after.x) / along };
      const survives = [0.3, -0.3].map((d) => endOf(spec, { x: p.x + d * across.x, y: p.y + d * across.y }).x > 50);
      expect(survives).toEqual([true, false]);
      tested += 1;
    }
    expect(tested).toBeGreaterThan(5);
  });

  it('give the ways out of a saddle on request, to the equilibria they end in', () => {
    const spec = rivals(1.5, 1.5);
    const report = findEquilibria(spec);
    const curves = separatrices(spec, report, { xMax: 1.2, yMax: 1.2 }, ['unstable']);
    const ends = curves.map((c) => report.equilibria[c.endsAt ?? -1]);
    expect(ends.map((p) => [p?.x, p?.y]).sort()).toEqual([
      [0, 1],
      [1, 0]
    ]);
  });

  it('are few points, and none where there is no saddle inside', () => {
    const spec = rivals(1.8, 1.3, 0.9, 0.6);
    for (const curve of separatrices(spec, findEquilibria(spec), { xMax: 1.2, yMax: 1.2 })) {
      expect(curve.points.length).toBeLessThan(120);
    }
    const settled = rivals(0.5, 0.5);
    expect(separatrices(settled, findEquilibria(settled), { xMax: 1.2, yMax: 1.2 })).toEqual([]);
  });
});
