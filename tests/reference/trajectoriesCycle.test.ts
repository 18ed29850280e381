import { findEquilibria, limitCycles } from '$lib/dynamics';
import { describe, expect, it } from 'vitest';
import { limitCycleCase as known } from './trajectoryCases';

describe('a limit cycle with known answers', () => {
  it(known.title, () => {
    const cycles = limitCycles(known.document, findEquilibria(known.document));
    expect(cycles).toHaveLength(1);
    const cycle = cycles[0]!;
    const within = (value: number, wanted: number, tolerance: number) =>
      expect(Math.abs(value / wanted - 1)).toBeLessThan(tolerance);
    within(cycle.period, known.period, known.tolerance.period);
    within(cycle.xMin, known.xMin, known.tolerance.extremes);
    within(cycle.xMax, known.xMax, known.tolerance.extremes);
    within(cycle.yMin, known.yMin, known.tolerance.extremes);
    within(cycle.yMax, known.yMax, known.tolerance.extremes);
    within(cycle.xMean, known.xMean, known.tolerance.means);
    within(cycle.yMean, known.yMean, known.tolerance.means);
    within(cycle.multiplier, known.multiplier, known.tolerance.multiplier);
    // The section passes through the equilibrium's consumers, rising: the point the case gives.
    within(cycle.points[0]!.x, known.pointX, known.tolerance.extremes);
    within(cycle.points[0]!.y, known.pointY, known.tolerance.extremes);
  });
});
