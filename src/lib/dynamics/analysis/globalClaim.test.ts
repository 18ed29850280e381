import { describe, expect, it } from 'vitest';
import type { ConsumerSpec, ModelSpec, SpeciesSpec } from '../model/spec';
import { findEquilibria } from './equilibria';
import { globalClaim } from './globalClaim';
import { basinShares, outcomeFrom } from './outcome';
import { simulate } from './trajectory';

const logistic = (r: number, K: number, managed: Omit<SpeciesSpec, 'growth'> = {}): SpeciesSpec => ({
  growth: { kind: 'logistic', r, K },
  ...managed
});
const rivals = (
  alpha12: number,
  alpha21: number,
  first = logistic(1, 100),
  second = logistic(0.8, 100)
): ModelSpec => ({
  interaction: 'competition',
  first,
  second,
  competition: { form: 'coefficients', alpha12, alpha21 }
});
const feeding = (
  K: number,
  response: 'holling-1' | 'holling-2' | 'holling-3' = 'holling-2',
  second: ConsumerSpec = { mortality: 0.5 }
): ModelSpec => ({
  interaction: 'consumer-resource',
  first: logistic(1, K),
  second,
  feeding: { response, a: 0.1, e: 0.5, ...(response !== 'holling-1' && { h: 0.5 }) }
});
const claimOf = (spec: ModelSpec) => globalClaim(spec, findEquilibria(spec));

describe('globalClaim', () => {
  it('gives all starts to the only point that attracts, by theorem', () => {
    const cases: [ModelSpec, string][] = [
      [rivals(0.5, 0.5), 'coexistence'],
      [rivals(0.5, 1.5), 'exclusion'],
      [rivals(0.5, 1), 'exclusion at the threshold'],
      [feeding(45), 'a spiral'],
      [feeding(20), 'a consumer at its threshold'],
      [feeding(15), 'a consumer that starves'],
      [feeding(50, 'holling-1', { growth: { kind: 'leslie', r: 0.4, g: 0.2 } }), 'a ceiling that follows']
    ];
    for (const [spec, what] of cases) {
      const report = findEquilibria(spec);
      const claim = globalClaim(spec, report);
      expect(claim, what).toMatchObject({ by: 'theorem', claim: 'Every start with both species present ends here.' });
      expect(report.equilibria[claim!.equilibrium!]!.stability).toBe('stable');
    }
  });

  it('leaves it to the start where two attract', () => {
    expect(claimOf(rivals(1.5, 1.6))).toMatchObject({ by: 'none', equilibrium: null });
  });

  it('sees a cycle forced where nothing attracts', () => {
    expect(claimOf(feeding(90))).toMatchObject({ by: 'theorem', equilibrium: null });
    expect(claimOf(feeding(90))!.claim).toContain('ends on a cycle');
  });

  it('sees every start lost where a quota leaves no resting point', () => {
    const spec: ModelSpec = { ...feeding(100), first: logistic(1, 100, { removal: { quota: 26 } }) };
    expect(claimOf(spec)).toMatchObject({ by: 'theorem', claim: 'From every start a species under a quota runs out.' });
    for (const start of [
      { x: 99, y: 0.1 },
      { x: 40, y: 30 }
    ]) {
      const path = simulate(spec, { start, span: [0, 500], samples: 2 });
      expect(path.events.map(({ kind }) => kind)).toContain('ran out');
    }
    expect(claimOf({ ...spec, first: logistic(1, 100, { removal: { quota: 9 } }) })?.by).toBe('none');
  });

  it('claims by measurement only what was measured, and says so', () => {
    const spec: ModelSpec = { ...rivals(0.2, 0.2), first: logistic(1, 100, { removal: { quota: 1 } }) };
    const report = findEquilibria(spec);
    const shares = basinShares(spec, report, { xMin: 20, xMax: 120, yMin: 1, yMax: 120 }, 6);
    expect(shares.shares).toHaveLength(1);
    expect(globalClaim(spec, report, shares)).toMatchObject({
      by: 'measured',
      equilibrium: shares.shares[0]!.end.index
    });
    const mixed = basinShares(spec, report, { xMax: 20, yMax: 100 }, 10);
    expect(mixed.shares.length).toBeGreaterThan(1);
    expect(globalClaim(spec, report, mixed)?.by).toBe('none');
  });

  it('says nothing of growth without limit, and not too much of curves and closed orbits', () => {
    const exponential: SpeciesSpec = { growth: { kind: 'exponential', r: 0.5 } };
    expect(claimOf({ ...feeding(1, 'holling-1'), first: exponential } as ModelSpec)?.by).toBe('none');
    expect(claimOf(rivals(1, 1))?.by).toBe('none');
  });

  it('is right wherever paths are followed', () => {
    let seed = 3;
    const draw = (low: number, high: number): number => {
      seed = (seed * 1664525 + 1013904223) >>> 0;
      return low + (high - low) * (seed / 2 ** 32);
    };
    let proven = 0;
    for (let i = 0; i < 150; i++) {
      const consumers: ConsumerSpec[] = [
        { mortality: draw(0.1, 0.8) },
        { mortality: draw(0.1, 0.8), selfLimitation: draw(0, 0.05), stocking: draw(0, 0.3) },
        { growth: { kind: 'leslie', r: draw(0.1, 1), g: draw(0.1, 1) } },
        { growth: { kind: 'logistic', r: draw(0.1, 1), K: draw(1, 40) } }
      ];
      const allee: SpeciesSpec = { growth: { kind: 'allee', r: 1, K: 60, A: draw(1, 20) } };
      const spec: ModelSpec =
        i % 3 === 0
          ? rivals(draw(0.1, 2), draw(0.1, 2), logistic(1, 100, { stocking: i % 6 === 0 ? draw(0, 3) : 0 }))
          : ({
              ...feeding(
                draw(10, 70),
                (['holling-1', 'holling-2', 'holling-3'] as const)[(i % 7) % 3]!,
                consumers[i % 4]!
              ),
              ...(i % 5 === 0 && { first: allee })
            } as ModelSpec);
      const report = findEquilibria(spec);
      const claim = globalClaim(spec, report);
      if (claim?.by !== 'theorem' || claim.equilibrium === null || claim.claim.includes('divide')) continue;
      proven += 1;
      for (const start of [
        { x: draw(0.01, 1), y: draw(0.01, 1) },
        { x: draw(50, 150), y: draw(20, 80) }
      ]) {
        const end = outcomeFrom(spec, report, start, { cycles: [] });
        // A point that attracts as slowly as 1/t is not reached within the horizon.
        if (end.kind === 'undecided' && report.equilibria[claim.equilibrium]!.borderline) continue;
        expect(end, JSON.stringify(spec)).toMatchObject({ kind: 'equilibrium', index: claim.equilibrium });
      }
    }
    expect(proven).toBeGreaterThan(60);
  });
});
