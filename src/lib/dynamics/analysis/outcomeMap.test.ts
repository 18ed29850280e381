import { describe, expect, it } from 'vitest';
import type { ModelSpec } from '../model/spec';
import { outcomeMap, type OutcomeMap } from './outcomeMap';

const rivals: ModelSpec = {
  interaction: 'competition',
  first: { growth: { kind: 'logistic', r: 1, K: 100 } },
  second: { growth: { kind: 'logistic', r: 1, K: 100 } },
  competition: { form: 'coefficients', alpha12: 0.5, alpha21: 0.5 }
};
const saturating: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 1, K: 50 } },
  second: { mortality: 0.5 },
  feeding: { response: 'holling-2', a: 0.1, h: 0.5, e: 0.5 }
};
const classAt = (map: OutcomeMap, a: number, b: number) => {
  const cell = map.cells.find(({ a0, a1, b0, b1 }) => a >= a0 && a < a1 && b >= b0 && b < b1)!;
  return map.classes[cell.outcome]!.join('; ');
};

describe('outcomeMap', () => {
  const map = outcomeMap(rivals, 'competition.alpha12', [0.2, 2.1], 'competition.alpha21', [0.2, 2.1], {
    base: 4,
    depth: 3
  });

  it('draws the four outcomes of competition, with borders where each rival stops invading', () => {
    expect(classAt(map, 0.5, 0.5)).toBe('both at rest');
    expect(classAt(map, 1.5, 0.5)).toBe('second alone');
    expect(classAt(map, 0.5, 1.5)).toBe('first alone');
    expect(classAt(map, 1.5, 1.5)).toBe('first alone; second alone');
    for (const cell of map.cells) {
      const crosses = (low: number, high: number) => low <= 1 && high >= 1;
      // Off the borders alpha = 1 no cell is left in doubt, and none on them is taken for certain.
      expect(cell.border).toBe(crosses(cell.a0, cell.a1) || crosses(cell.b0, cell.b1));
    }
  });

  it('covers the map once, finely along the borders and coarsely elsewhere', () => {
    const area = map.cells.reduce((sum, { a0, a1, b0, b1 }) => sum + (a1 - a0) * (b1 - b0), 0);
    expect(area).toBeCloseTo(1.9 ** 2, 10);
    expect(map.shares.reduce((sum, share) => sum + share, 0)).toBeCloseTo(1, 12);
    const widths = map.cells.map(({ a0, a1 }) => (a1 - a0) / 1.9);
    expect(Math.min(...widths)).toBeCloseTo(map.resolution, 12);
    expect(Math.max(...widths)).toBeCloseTo(1 / 4, 12);
    expect(map.evaluations).toBeLessThan(700);
    // (1 - 0.2) of 1.9 each way, to the width of a cell.
    expect(Math.abs(map.shares[0]! - (0.8 / 1.9) ** 2)).toBeLessThan(map.resolution);
  });

  it('is the same every time', () => {
    const again = outcomeMap(rivals, 'competition.alpha12', [0.2, 2.1], 'competition.alpha21', [0.2, 2.1], {
      base: 4,
      depth: 3
    });
    expect(again).toEqual(map);
  });

  it('follows one start where the outcome depends on it', () => {
    const strong: ModelSpec = { ...rivals, competition: { form: 'coefficients', alpha12: 1.5, alpha21: 1.5 } };
    // Of two equal rivals that exclude each other the one with the larger start wins: the divide is x = y.
    const from = (x: number) =>
      outcomeMap(strong, 'competition.alpha12', [1.4, 1.6], 'first.growth.r', [0.99, 1.01], {
        base: 1,
        depth: 0,
        start: { x, y: 10 }
      });
    expect(from(14).classes).toEqual([['first alone']]);
    expect(from(7).classes).toEqual([['second alone']]);
  });

  it('tells resting from cycling: the border is the onset of oscillation', () => {
    const options = { base: 2, depth: 0 };
    const cycling = outcomeMap(saturating, 'first.growth.K', [10, 90], 'second.mortality', [0.45, 0.55], options);
    // At m = 0.5 the consumer lives from K = 20 on and cycles from 60 on; centres are at K = 30 and 70.
    expect(classAt(cycling, 12, 0.5)).toBe('both at rest');
    expect(classAt(cycling, 85, 0.5)).toBe('both cycling');
    const poor = outcomeMap(saturating, 'first.growth.K', [5, 15], 'second.mortality', [0.45, 0.55], options);
    expect(poor.classes).toEqual([['first alone']]);
  });

  it('stops when asked, and refuses what makes no map', () => {
    let asked = 0;
    const stopped = outcomeMap(rivals, 'competition.alpha12', [0.2, 2.1], 'competition.alpha21', [0.2, 2.1], {
      shouldStop: () => asked++ > 3
    });
    expect(stopped.finished).toBe(false);
    expect(() => outcomeMap(rivals, 'competition.alpha12', [0, 1], 'competition.alpha12', [0, 1])).toThrow(RangeError);
    expect(() => outcomeMap(rivals, 'competition.alpha12', [0, 1], 'first.growth.K', [0, 1])).toThrow(RangeError);
  });
});
