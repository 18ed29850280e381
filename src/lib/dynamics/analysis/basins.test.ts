import { describe, expect, it } from 'vitest';
import type { ModelSpec } from '../model/spec';
import { basinsOf } from './basins';
import { findEquilibria } from './equilibria';
import { limitCycles } from './limitCycles';
import { basinShares } from './outcome';
import { separatrices } from './separatrices';
import { suggestWindow } from './vectorField';

/** Which of two competitors wins depends on the start. */
const bistable: ModelSpec = {
  interaction: 'competition',
  first: { growth: { kind: 'logistic', r: 0.7, K: 100 } },
  second: { growth: { kind: 'logistic', r: 0.5, K: 90 } },
  competition: { form: 'coefficients', alpha12: 1.5, alpha21: 1.4 }
};
const coexisting: ModelSpec = { ...bistable, competition: { form: 'coefficients', alpha12: 0.5, alpha21: 0.4 } };
const cycling: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 1, K: 150 } },
  second: { mortality: 0.5 },
  feeding: { response: 'holling-2', a: 0.1, h: 0.5, e: 0.5 }
};
const allee: ModelSpec = {
  interaction: 'consumer-resource',
  first: { growth: { kind: 'allee', r: 0.4, K: 100, A: 20 } },
  second: { mortality: 0.21 },
  feeding: { response: 'holling-1', a: 0.01, e: 0.3 }
};
const quota: ModelSpec = {
  interaction: 'competition',
  first: { growth: { kind: 'logistic', r: 0.8, K: 100 }, removal: { quota: 12 } },
  second: { growth: { kind: 'logistic', r: 0.6, K: 80 } },
  competition: { form: 'coefficients', alpha12: 0.3, alpha21: 0.3 }
};

function parted(spec: ModelSpec) {
  const report = findEquilibria(spec);
  const cycles = limitCycles(spec, report);
  const window = suggestWindow(spec, report);
  return { report, cycles, window, ...basinsOf(spec, report, separatrices(spec, report, window), cycles, window) };
}

describe('basinsOf', () => {
  it('parts the plane along the divide, in the shares that following a grid of starts gives', () => {
    for (const spec of [bistable, allee, quota]) {
      const { report, cycles, window, basins } = parted(spec);
      const measured = basinShares(spec, report, window, 24, { cycles });
      expect(basins.reduce((sum, b) => sum + b.share, 0)).toBeCloseTo(1, 6);
      for (const { end, share } of measured.shares) {
        const same = basins.find((b) => b.end.kind === end.kind && b.end.index === end.index);
        // A cell on the divide goes to one side whole, so a grid of 24 x 24 is good to a few hundredths.
        if (share > 0.03) expect(same?.share, JSON.stringify(end)).toBeCloseTo(share, 1);
      }
    }
  });

  it('gives both winners their own side', () => {
    const { basins, by, report } = parted(bistable);
    expect(by).toBe('divides');
    const ends = basins.map((b) => report.equilibria[b.end.index ?? -1]);
    expect(ends.map((e) => (e && e.x > 0 ? 'first' : 'second')).sort()).toEqual(['first', 'second']);
  });

  it('leaves the plane whole where there is one end', () => {
    const { basins } = parted(coexisting);
    expect(basins).toHaveLength(1);
    expect(basins[0]!.end.kind).toBe('equilibrium');
    expect(basins[0]!.share).toBeCloseTo(1, 9);
  });

  it('names a cycle as an end', () => {
    const { basins } = parted(cycling);
    expect(basins.map((b) => b.end.kind)).toEqual(['cycle']);
  });
});
