import { describe, expect, it } from 'vitest';
import { withParameter } from '../model/parameters';
import type { ModelSpec } from '../model/spec';
import { cycleBranches, thresholdsWithCycles } from './cycleBranch';
import { findEquilibria } from './equilibria';
import { limitCycles } from './limitCycles';

const saturating: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 1, K: 60 } },
  second: { mortality: 0.5 },
  feeding: { response: 'holling-2', a: 0.1, h: 0.5, e: 0.5 }
};
const crowded: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'allee', r: 0.4, K: 100, A: 20 } },
  second: { mortality: 0.1, selfLimitation: 0.01 },
  feeding: { response: 'holling-1', a: 0.02, e: 0.6 }
};

describe('cycleBranches', () => {
  it('grows a stable cycle out of the onset as the square root of the distance from it', () => {
    const branches = cycleBranches(saturating, 'first.growth.K', [50, 66]);
    expect(branches).toHaveLength(1);
    const [branch] = branches;
    expect(branch!.from.value).toBeCloseTo(60, 9);
    expect(branch!.period[0]).toBeCloseTo(15.390597961942369, 9);
    expect(branch!.end).toEqual({ kind: 'range', value: 66, at: null });
    expect(branch!.stable.slice(1).every(Boolean)).toBe(true);
    expect(branch!.folds).toEqual([]);
    const widths = branch!.parameter.map((K, i) => [K - 60, branch!.xMax[i]! - branch!.xMin[i]!] as const);
    const [near, far] = [widths.find(([off]) => off > 0.01)!, widths.find(([off]) => off > 0.1)!];
    expect(Math.log(far[1] / near[1]) / Math.log(far[0] / near[0])).toBeCloseTo(0.5, 2);
    // The last one is the cycle that a search at that very value finds.
    const spec = withParameter(saturating, 'first.growth.K', 66);
    const [cycle] = limitCycles(spec, findEquilibria(spec));
    expect(branch!.period.at(-1)! / cycle!.period).toBeCloseTo(1, 8);
    expect(branch!.xMax.at(-1)! / cycle!.xMax).toBeCloseTo(1, 7);
    expect(branch!.multiplier.at(-1)! / cycle!.multiplier).toBeCloseTo(1, 5);
  });

  it('follows a cycle that repels until it runs into the saddle beside it', () => {
    const report = thresholdsWithCycles(crowded, 'feeding.a', [0.0115, 0.0125]);
    const [branch] = report.cycles;
    expect(branch!.stable.slice(1)).not.toContain(true);
    expect(branch!.period.at(-1)!).toBeGreaterThan(2 * branch!.period[0]!);
    expect(branch!.end.kind).toBe('homoclinic-suspected');
    const saddle = findEquilibria(withParameter(crowded, 'feeding.a', branch!.end.value)).equilibria.find(
      ({ class: kind, x, y }) => kind === 'saddle' && x > 0 && y > 0
    )!;
    expect(branch!.end.at!.x).toBeCloseTo(saddle.x, 6);
    expect(report.thresholds.map(({ kind }) => kind)).toEqual(['homoclinic-suspected', 'hopf', 'saddle-node']);
  });

  it('has nothing to follow where nothing begins to oscillate', () => {
    expect(cycleBranches(saturating, 'first.growth.K', [21, 40])).toEqual([]);
  });
});
