import { describe, expect, it } from 'vitest';
import type { ConsumerResourceModel, ConsumerSpec, FeedingSpec, SpeciesSpec } from '../model/spec';
import { findEquilibria } from './equilibria';
import { excludeCycles } from './excludeCycles';
import { simulate } from './trajectory';

const feeding = (
  K: number,
  response: Partial<FeedingSpec> = {},
  consumer: ConsumerSpec = { mortality: 0.5 },
  managed: Omit<SpeciesSpec, 'growth'> = {}
): ConsumerResourceModel => ({
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 1, K }, ...managed },
  second: consumer,
  feeding: { response: 'holling-2', a: 0.1, h: 0.5, e: 0.5, ...response }
});

describe('excludeCycles', () => {
  it('excludes them up to where the equilibrium lets go, and not beyond', () => {
    // Hopf point at K = 60.
    for (const K of [25, 45, 59, 59.99]) expect(excludeCycles(feeding(K))?.by, `K = ${K}`).toBe('Dulac');
    for (const K of [60.01, 61, 90, 150]) expect(excludeCycles(feeding(K)), `K = ${K}`).toBeNull();
  });

  it('excludes them for every proportional response with a ceiling, also with a consumer that follows the resource', () => {
    const proportional = { response: 'holling-1', h: undefined } as const;
    expect(excludeCycles(feeding(500, proportional))?.by).toBe('Dulac');
    expect(excludeCycles(feeding(500, proportional, { growth: { kind: 'leslie', r: 0.3, g: 0.2 } }))?.by).toBe('Dulac');
    expect(excludeCycles(feeding(500, proportional, { mortality: 0.3, selfLimitation: 0.1 }))?.by).toBe('Dulac');
  });

  it('excludes nothing where all orbits are closed', () => {
    const closed: ConsumerResourceModel = {
      ...feeding(1, { response: 'holling-1', h: undefined }),
      first: { growth: { kind: 'exponential', r: 1 } }
    };
    expect(excludeCycles(closed)).toBeNull();
    // Nor under a sigmoid response where e = 2 m h.
    const sigmoid: ConsumerResourceModel = {
      ...closed,
      second: { mortality: 0.5 },
      feeding: { response: 'holling-3', a: 0.1, h: 0.5, e: 0.5 }
    };
    expect(excludeCycles(sigmoid)).toBeNull();
    expect(excludeCycles({ ...sigmoid, feeding: { ...sigmoid.feeding, e: 0.55 } })?.by).toBe('Dulac');
  });

  it('never excludes a cycle that must be there, around a point that lets go of paths that stay bounded', () => {
    let forced = 0;
    let excluded = 0;
    let seed = 5;
    const draw = (low: number, high: number): number => {
      seed = (seed * 1664525 + 1013904223) >>> 0;
      return low + (high - low) * (seed / 2 ** 32);
    };
    for (let i = 0; i < 1500; i++) {
      const response = (['holling-1', 'holling-2', 'holling-3'] as const)[i % 3]!;
      const shape: Partial<FeedingSpec> =
        response === 'holling-1'
          ? { response, h: undefined }
          : { response, h: draw(0.1, 1), interference: i % 2 ? draw(0, 0.2) : 0 };
      const consumers: ConsumerSpec[] = [
        { mortality: draw(0.05, 0.6) },
        { mortality: draw(0.05, 0.6), selfLimitation: draw(0, 0.03) },
        { growth: { kind: 'leslie', r: draw(0.02, 0.5), g: draw(0.1, 2) } },
        { growth: { kind: 'logistic', r: draw(0.05, 0.5), K: draw(1, 30) } }
      ];
      const spec = feeding(
        draw(10, 200),
        { ...shape, a: draw(0.01, 0.4), e: draw(0.1, 0.8) },
        consumers[i % 4]!,
        i % 5 === 0 ? { stocking: draw(0, 2), removal: { effort: draw(0, 0.5) } } : {}
      );
      const { equilibria } = findEquilibria(spec);
      const inside = equilibria.filter(({ x, y }) => x > 0 && y > 0);
      const proof = excludeCycles(spec);
      if (proof) excluded += 1;
      if (equilibria.some(({ stability }) => stability !== 'unstable') || inside.length !== 1) continue;
      forced += 1;
      expect(proof, JSON.stringify(spec)).toBeNull();
    }
    expect(forced).toBeGreaterThan(100);
    expect(excluded).toBeGreaterThan(300);
  });

  it('leaves no choice to paths from far apart', () => {
    for (const spec of [feeding(59), feeding(40, { response: 'holling-3', a: 0.02, h: 0.4, e: 0.6 })]) {
      expect(excludeCycles(spec)).not.toBeNull();
      const inside = findEquilibria(spec).equilibria.find(({ x, y }) => x > 0 && y > 0)!;
      for (const start of [
        { x: 1e-3, y: 200 },
        { x: 300, y: 1e-4 }
      ]) {
        const path = simulate(spec, { start, span: [0, 40_000], samples: 2, rtol: 1e-6 });
        expect(path.x[1]! / inside.x).toBeCloseTo(1, 4);
        expect(path.y[1]! / inside.y).toBeCloseTo(1, 4);
      }
    }
  });
});
