import { describe, expect, it } from 'vitest';
import type { ModelSpec, SpeciesSpec } from '../model/spec';
import { findEquilibria } from './equilibria';

const exponential = (r: number, managed: Omit<SpeciesSpec, 'growth'> = {}): SpeciesSpec => ({
  growth: { kind: 'exponential', r },
  ...managed
});
const meeting = (first: SpeciesSpec, second: SpeciesSpec, b12: number, b21: number): ModelSpec => ({
  interaction: 'competition',
  first,
  second,
  competition: { form: 'encounters', b12, b21 }
});

describe('curves of equilibria without an end', () => {
  it('attract on one part of an axis and repel on the other, however far out the change lies', () => {
    // Along y = 0 the consumer grows at e a x - m: from 0.75 / 0.025 upwards.
    const feeding = findEquilibria({
      interaction: 'consumer-resource',
      first: exponential(3, { removal: { effort: 3 } }),
      second: { mortality: 0.75 },
      feeding: { response: 'holling-1', a: 0.05, e: 0.5 }
    });
    expect(feeding.continua).toHaveLength(1);
    expect(feeding.continua[0]).toMatchObject({ from: { x: 0, y: 0 }, to: null, stability: 'undetermined' });
    expect(feeding.continua[0]!.remark).toContain('Attracts while the first species is below 30 and repels above');
    // What is drawn shows the change.
    expect(feeding.continua[0]!.points.at(-1)!.x).toBeGreaterThan(30);

    const rivals = meeting({ growth: { kind: 'logistic', r: 6e-7, K: 2e9 } }, exponential(0), 1e-13, 2e-3);
    const [axis] = findEquilibria(rivals).continua;
    expect(axis).toMatchObject({ from: { x: 0, y: 0 }, to: null, stability: 'undetermined' });
    expect(axis!.remark).toContain('Repels while the second species is below 6000000 and attracts above');
  });

  it('attract all along where the consumer starves at any abundance', () => {
    const report = findEquilibria({
      interaction: 'consumer-resource',
      first: exponential(0),
      second: { mortality: 0.25 },
      feeding: { response: 'holling-3', a: 0.02, h: 0.5, e: 0.125 }
    });
    expect(report.continua).toEqual([expect.objectContaining({ to: null, stability: 'stable' })]);
  });

  it('are listed once where two equations give the same axis', () => {
    const report = findEquilibria(meeting(exponential(0), exponential(0), 0, 0.2));
    expect(report.continua).toHaveLength(2);
    expect(report.equilibria).toEqual([]);
    expect(report.complete).toBe(true);
  });

  it('may run to infinity on both sides', () => {
    // Both are only stocked and lose by encounters: x y = 10 whoever is there.
    const report = findEquilibria(meeting(exponential(0, { stocking: 1 }), exponential(0, { stocking: 2 }), 0.1, 0.2));
    expect(report.continua).toHaveLength(1);
    const [curve] = report.continua;
    expect(curve).toMatchObject({ to: null, stability: 'stable' });
    for (const { x, y } of curve!.points) expect(x * y).toBeCloseTo(10, 9);
    expect(curve!.remark).toContain('no end on either side');
  });

  it('end on the axis they leave, not where the drawing stops', () => {
    const report = findEquilibria(meeting(exponential(0), exponential(-1, { stocking: 2 }), 0, 0.2));
    expect(report.continua).toEqual([expect.objectContaining({ from: { x: 0, y: 2 }, to: null, stability: 'stable' })]);
  });

  it('are no answer where nothing moves at all', () => {
    const report = findEquilibria(meeting(exponential(0), exponential(0), 0, 0));
    expect(report).toMatchObject({ equilibria: [], continua: [], complete: false });
    expect(report.completeness).toContain('every one of them is at rest');
  });
});

describe('a consumer that does not die', () => {
  it('rests nowhere with the resource, and the list is proven complete', () => {
    const report = findEquilibria({
      interaction: 'consumer-resource',
      first: { growth: { kind: 'logistic', r: 0.25, K: 50 } },
      second: { mortality: 0, removal: { quota: 0.25 } },
      feeding: { response: 'holling-2', a: 0.01, h: 0.1, e: 0.2, interference: 0.5 }
    });
    expect(report.complete).toBe(true);
    for (const { x, y } of report.equilibria) expect(x > 0 && y > 0).toBe(true);
    const untaken = findEquilibria({
      interaction: 'consumer-resource',
      first: exponential(0.75),
      second: { mortality: 0 },
      feeding: { response: 'holling-3', a: 0.5, h: 0.4, e: 0.5, interference: 1 }
    });
    expect(untaken).toMatchObject({ complete: true, equilibria: [] });
    expect(untaken.continua).toEqual([expect.objectContaining({ from: { x: 0, y: 0 }, to: null })]);
  });
});
