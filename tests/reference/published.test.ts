import { describe, expect, it } from 'vitest';
import { findEquilibria, withParameter, type ModelSpec } from '$lib/dynamics';
import { expectEquilibria, type EquilibriaCase } from './expectEquilibria';
import published from './published.json';

const cases = published.cases;
const documentOf = (id: string) => cases.find((testCase) => testCase.id === id)!.document as unknown as ModelSpec;

describe('published worked examples', () => {
  it.each(
    cases
      .filter((testCase) => 'equilibria' in testCase)
      .map((testCase) => [testCase.id, testCase.title, testCase] as const)
  )('%s %s', (_id, _title, testCase) => {
    expectEquilibria(testCase as unknown as EquilibriaCase);
  });

  // Shih (2005): equilibrium m/(e a), r/a and small-amplitude period 2 pi / sqrt(r m).
  it('gives the small-amplitude period of the classical model', () => {
    const centre = findEquilibria(documentOf('PUB-06')).equilibria[1]!;
    expect([centre.x, centre.y]).toEqual([60, 40]);
    expect(centre.period! / 12.82549830161864 - 1).toBeLessThan(1e-12);
    expect(centre).toMatchObject({ class: 'centre', stability: 'neutral', decidedBy: 'conserved quantity' });
  });

  // Carpenter (2018): posterior means for hare and lynx.
  it('turns published hare and lynx rates into their equilibrium and period', () => {
    const centre = findEquilibria(documentOf('PUB-07')).equilibria[1]!;
    expect(Math.abs(centre.x / 33.21839140484267 - 1)).toBeLessThan(1e-9);
    expect(Math.abs(centre.y / 19.708755117262065 - 1)).toBeLessThan(1e-9);
    expect(Math.abs(centre.period! / 9.498808376605743 - 1)).toBeLessThan(1e-9);
  });

  // Rosenzweig (1971), May (1972): persistence at K = m/(a (e - m h)), Hopf point at K = (e + m h)/(a h (e - m h)).
  it('meets the persistence and Hopf thresholds of the saturating consumer at their formulas', () => {
    const at = (K: number) => {
      const base = documentOf('PUB-08');
      const spec = withParameter(
        { ...base, first: { growth: { kind: 'logistic', r: 1, K } } } as ModelSpec,
        'first.growth.K',
        K
      );
      return findEquilibria(spec).equilibria;
    };
    const persistence = at(20);
    expect(persistence).toHaveLength(2);
    expect(persistence[1]).toMatchObject({
      x: 20,
      y: 0,
      multiplicity: 2,
      decidedBy: 'centre manifold',
      stability: 'stable'
    });
    const hopf = at(60)[1]!;
    expect(hopf).toMatchObject({ x: 20, decidedBy: 'first Lyapunov coefficient', stability: 'stable' });
    expect(hopf.eigenvalues[0].re).toBe(0);
    expect(Math.abs(hopf.eigenvalues[0].im / 0.408248290463863 - 1)).toBeLessThan(1e-10);
    expect(at(59.999)[1]!.class).toBe('stable spiral');
    expect(at(60.001)[1]!.class).toBe('unstable spiral');
  });
});
