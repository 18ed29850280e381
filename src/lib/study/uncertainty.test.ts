import { describe, expect, it } from 'vitest';
import { findEquilibria, type ModelSpec } from '$lib/dynamics';
import { assemble } from './assemble';
import { invasionsOf } from './invasions';
import { pointsOf } from './points';
import { crayfish, crayfishContent, goatContent, goats, rate } from './testStudies';
import { eigenvalueSE, equilibriumSE, errorsOf, invasionSE } from './uncertainty';

function whole(...args: Parameters<typeof assemble>) {
  const { model, resolved } = assemble(...args);
  if (!model) throw new Error('The test study is not whole.');
  return { model, resolved, report: findEquilibria(model) };
}

/** Rest point of the goats by hand: x from e F = m + E, y from the growth of the broom. */
function goatsAtRest(p: { r: number; K: number; a: number; h: number; e: number; m: number }) {
  const x = p.m / (p.a * (p.e - p.m * p.h));
  return { x, y: (p.r / p.a) * (1 - x / p.K) * (1 + p.a * p.h * x) };
}

describe('equilibriumSE', () => {
  it('gives a lone species the error of its capacity', () => {
    const { model, resolved } = whole(crayfish, crayfishContent());
    const found = equilibriumSE(model, { x: 900, y: 0 }, resolved);
    expect(found.seX).toBeCloseTo(90, 6);
    expect(found.seY).toBeNull();
  });

  it('agrees with a sum over central differences of the formula', () => {
    const { model, resolved } = whole(goats, goatContent());
    const base = { r: 0.35, K: 4200, a: 0.2778, h: 0.002, e: 0.0014, m: 0.32 };
    const at = goatsAtRest(base);
    let [varX, varY] = [0, 0];
    for (const key of Object.keys(base) as (keyof typeof base)[]) {
      const step = 1e-6 * base[key];
      const up = goatsAtRest({ ...base, [key]: base[key] + step });
      const down = goatsAtRest({ ...base, [key]: base[key] - step });
      // Every rate of this study has a CV of 10 %.
      varX += (((up.x - down.x) / (2 * step)) * 0.1 * base[key]) ** 2;
      varY += (((up.y - down.y) / (2 * step)) * 0.1 * base[key]) ** 2;
    }
    const found = equilibriumSE(model, at, resolved);
    expect((found.seX ?? 0) / Math.sqrt(varX)).toBeCloseTo(1, 6);
    expect((found.seY ?? 0) / Math.sqrt(varY)).toBeCloseTo(1, 6);
  });

  it('adds nothing for exact numbers', () => {
    const content = crayfishContent();
    content.rates = content.rates.map((entry) => ({ ...entry, uncertainty: { kind: 'exact' } }));
    const { model, resolved } = whole(crayfish, content);
    expect(equilibriumSE(model, { x: 900, y: 0 }, resolved)).toEqual({ seX: null, seY: null });
  });

  it('lets r of the crowding form lean on the error of K', () => {
    const plain = crayfishContent();
    const crowded = crayfishContent();
    crowded.rates[0] = rate('first.growth.r', 0.55 / 900, 'har/{ind}/a', { kind: 'exact' }, 'crowding');
    plain.rates[0] = rate('first.growth.r', 0.55, '/a', { kind: 'exact' });
    // A sole start of growth: the eigenvalue at (0, 0) is r itself, and its error is that of K alone.
    const { model, resolved } = whole(crayfish, crowded);
    const [, slower] = eigenvalueSE(model, { x: 0, y: 0 }, resolved);
    expect(slower.re).toBeCloseTo(0.1 * 0.55, 8);
    const exact = whole(crayfish, plain);
    expect(eigenvalueSE(exact.model, { x: 0, y: 0 }, exact.resolved)[1].re).toBeCloseTo(0, 12);
  });
});

describe('errorsOf', () => {
  it('has errors for every letter, held states included', () => {
    const { model, resolved, report } = whole(goats, goatContent({ quota: 65 }));
    const errors = errorsOf(model, report, resolved);
    const held = pointsOf(report).find((point) => point.absorbing && point.x > 0);
    expect(Object.keys(errors)).toEqual(pointsOf(report).map((point) => point.letter));
    expect(errors[held?.letter ?? '']?.seX).toBeCloseTo(420, 6);
  });
});

describe('invasionSE', () => {
  it('matches the formula r₂ (1 − α₂₁ K₁/K₂)', () => {
    const { model, resolved, report } = whole(crayfish, crayfishContent());
    const invasion = invasionsOf(crayfish, report, model as ModelSpec).find((each) => each.invader === 'second');
    if (!invasion) throw new Error('No invasion.');
    const share = (0.6 * 900) / 1100;
    const byHand = 0.1 * Math.hypot(0.95 * (1 - share), Math.sqrt(3) * 0.95 * share);
    expect(invasionSE(model, report, invasion, resolved)).toBeCloseTo(byHand, 8);
  });
});
