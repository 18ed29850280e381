import { describe, expect, it } from 'vitest';
import type { ConsumerResourceModel, ModelSpec } from '../model/spec';
import { findEquilibria } from './equilibria';
import { limitCycles } from './limitCycles';
import { basinShares, outcomeFrom } from './outcome';

const rivals = (alpha12: number, alpha21: number): ModelSpec => ({
  interaction: 'competition',
  first: { growth: { kind: 'logistic', r: 1, K: 1 } },
  second: { growth: { kind: 'logistic', r: 1, K: 1 } },
  competition: { form: 'coefficients', alpha12, alpha21 }
});
const consumer = (K: number, quota = 0): ConsumerResourceModel => ({
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 1, K } },
  second: { mortality: 0.5, removal: { quota } },
  feeding: { response: 'holling-2', a: 0.1, h: 0.5, e: 0.5 }
});

describe('outcomeFrom', () => {
  it('tells which rival is left', () => {
    const spec = rivals(1.5, 1.5);
    const report = findEquilibria(spec);
    for (const [start, x] of [
      [{ x: 0.5, y: 0.49 }, 1],
      [{ x: 0.2, y: 0.21 }, 0]
    ] as const) {
      const end = outcomeFrom(spec, report, start);
      expect(end.kind).toBe('equilibrium');
      if (end.kind === 'equilibrium') expect(report.equilibria[end.index]!.x).toBe(x);
    }
  });

  it('tells a cycle from a point', () => {
    const cycling = consumer(90);
    const report = findEquilibria(cycling);
    expect(limitCycles(cycling, report)).toHaveLength(1);
    expect(outcomeFrom(cycling, report, { x: 21, y: 16 })).toMatchObject({ kind: 'cycle', index: 0 });
    expect(outcomeFrom(cycling, report, { x: 80, y: 2 })).toMatchObject({ kind: 'cycle', index: 0 });
    const settling = consumer(40);
    expect(outcomeFrom(settling, findEquilibria(settling), { x: 5, y: 2 }).kind).toBe('equilibrium');
  });

  it('tells that a quota ends a species, and in which state that leaves the other', () => {
    const spec = consumer(40, 5);
    const report = findEquilibria(spec);
    const end = outcomeFrom(spec, report, { x: 20, y: 3 });
    expect(end.kind).toBe('absorbing');
    if (end.kind === 'absorbing') {
      expect(report.absorbing[end.index]).toMatchObject({ x: 40, y: 0, held: ['second'] });
    }
  });

  it('tells growth without limit, and leaves closed orbits undecided', () => {
    const free: ModelSpec = {
      interaction: 'competition',
      first: { growth: { kind: 'exponential', r: 0.3 } },
      second: { growth: { kind: 'exponential', r: 0.2 } },
      competition: { form: 'encounters', b12: 0.01, b21: 0.02 }
    };
    expect(outcomeFrom(free, findEquilibria(free), { x: 10, y: 1 }).kind).toBe('unbounded');
    const classical: ModelSpec = {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'exponential', r: 0.8 } },
      second: { mortality: 0.3 },
      feeding: { response: 'holling-1', a: 0.02, e: 0.25 }
    };
    expect(outcomeFrom(classical, findEquilibria(classical), { x: 10, y: 1 }).kind).toBe('undecided');
  });

  it('knows a start that is already there', () => {
    const spec = rivals(0.5, 0.5);
    const report = findEquilibria(spec);
    const k = report.equilibria.findIndex((p) => p.stability === 'stable');
    const { x, y } = report.equilibria[k]!;
    expect(outcomeFrom(spec, report, { x, y })).toEqual({ kind: 'equilibrium', index: k, time: 0 });
  });
});

describe('basinShares', () => {
  it('halves the square between equal rivals', () => {
    const spec = rivals(1.5, 1.5);
    const report = findEquilibria(spec);
    const basins = basinShares(spec, report, { xMax: 1, yMax: 1 }, 10);
    // The ten starts on the diagonal run into the saddle, as far as anyone can tell.
    const ends = basins.shares.filter((s) => s.end.kind === 'equilibrium');
    expect(ends.map((s) => s.share)).toEqual([0.45, 0.45]);
    expect(basins.grid).toHaveLength(100);
    expect(basins).toEqual(basinShares(spec, report, { xMax: 1, yMax: 1 }, 10));
    for (let row = 0; row < 10; row++) {
      for (let column = 0; column < row; column++) {
        const { index } = basins.shares[basins.grid[10 * row + column]!]!.end;
        expect(report.equilibria[index!]!.y).toBe(1);
      }
    }
  });
});
