/** The fast ways of the ensembles against the general ones, over models of every kind. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { compile, findEquilibria, simulate, type ModelSpec } from '$lib/dynamics';
import {
  CLASS_CODES,
  equilibriaFast,
  hasFastEquilibria,
  makeEquilibriaTable,
  POINT_WIDTH
} from '$lib/dynamics/ensemble/fastEquilibria';
import { seeManaged } from '$lib/dynamics/ensemble/managedEquilibria';
import { planarModelOf } from '$lib/dynamics/solve/planar';
import { drafts, scales, SEED, UNIT } from './models';

/** The same model with nothing added or taken by the unit. */
function withoutConstants(spec: ModelSpec): ModelSpec {
  const bare = structuredClone(spec);
  for (const species of [bare.first, bare.second]) {
    delete species.stocking;
    if (species.removal) delete species.removal.quota;
  }
  return bare;
}

describe('the fast ways', () => {
  it('have the slopes of the compiled model', () => {
    const [ours, theirs, size] = [new Float64Array(2), new Float64Array(2), new Float64Array(2)];
    fc.assert(
      fc.property(drafts, scales, fc.double({ min: 0.01, max: 20, noNaN: true }), (draft, scale, at) => {
        const spec = draft.write(scale);
        const system = compile(spec);
        const { kernel, rates } = planarModelOf(spec);
        const [x, y] = [at * scale.x, scale.y / at];
        kernel.slopes(x, y, rates, ours);
        system.rhs(x, y, theirs);
        system.magnitude(x, y, size);
        for (const i of [0, 1]) expect(Math.abs(ours[i]! - theirs[i]!)).toBeLessThanOrEqual(1e-13 * size[i]!);
      }),
      { seed: SEED, numRuns: 2000 }
    );
  });

  it('find the equilibria that the proven search finds, with their classes', () => {
    const table = makeEquilibriaTable();
    let compared = 0;
    fc.assert(
      fc.property(drafts, scales, (draft, scale) => {
        const spec = withoutConstants(draft.write(scale));
        const report = findEquilibria(spec);
        const firm = report.equilibria.every((found) => !found.borderline && found.multiplicity === 1);
        if (!report.complete || report.continua.length > 0 || !firm) return;
        const { rates } = planarModelOf(spec);
        expect(hasFastEquilibria(rates)).toBe(true);
        const isSigmoid = spec.interaction === 'consumer-resource' && spec.feeding.response === 'holling-3';
        equilibriaFast(rates, isSigmoid, table);
        expect(table.count, JSON.stringify(spec)).toBe(report.equilibria.length);
        const isNear = (value: number, expected: number, size: number): boolean =>
          Math.abs(value - expected) <= 1e-6 * size;
        for (const found of report.equilibria) {
          const at = Array.from({ length: table.count }, (_, i) => i).filter(
            (i) =>
              isNear(table.points[i * POINT_WIDTH]!, found.x, found.x) &&
              isNear(table.points[i * POINT_WIDTH + 1]!, found.y, found.y)
          );
          expect(at, `${JSON.stringify(found)} of ${JSON.stringify(spec)}`).toHaveLength(1);
          const p = table.points.subarray(at[0]! * POINT_WIDTH);
          const [larger, smaller] = found.eigenvalues;
          const size = Math.hypot(larger.re, larger.im) + Math.hypot(smaller.re, smaller.im);
          const ours = [p[6]!, p[7]!, p[8]!, p[9]!];
          const theirs = [larger.re, larger.im, smaller.re, smaller.im];
          expect(ours.every((value, i) => isNear(value, theirs[i]!, size))).toBe(true);
          expect(CLASS_CODES[table.classes[at[0]!]!]).toBe(found.class);
        }
        compared += report.equilibria.length;
      }),
      { seed: SEED, numRuns: 700 }
    );
    expect(compared).toBeGreaterThan(1200);
  });

  it('find the states that hold under quotas and stocking', () => {
    let compared = 0;
    fc.assert(
      fc.property(drafts, scales, (draft, scale) => {
        const spec = draft.write(scale);
        const report = findEquilibria(spec);
        const firm = report.equilibria.every((found) => !found.borderline && found.multiplicity === 1);
        if (!report.complete || report.continua.length > 0 || !firm) return;
        const expected = [...report.equilibria, ...report.absorbing]
          .filter((found) => found.stability === 'stable')
          .sort((p, q) => p.x - q.x || p.y - q.y);
        const found: { x: number; y: number }[] = [];
        seeManaged(spec, (x, y, isCertain) => {
          if (isCertain) found.push({ x, y });
        });
        expect(found.length, JSON.stringify(spec)).toBe(expected.length);
        for (const { x, y } of expected) {
          const isNear = (p: { x: number; y: number }): boolean =>
            Math.abs(p.x - x) <= 1e-6 * x && Math.abs(p.y - y) <= 1e-6 * y;
          expect(found.some(isNear), JSON.stringify(spec)).toBe(true);
        }
        if (report.absorbing.length > 0 || report.equilibria.some((p) => p.x > 0 && p.y > 0)) compared += 1;
      }),
      { seed: SEED + 1, numRuns: 700 }
    );
    expect(compared).toBeGreaterThan(250);
  });

  it('follow the path that the general way follows', () => {
    let compared = 0;
    // A level that is never met makes `simulate` watch for it, which only the general way can.
    const thresholds = [{ species: 'first', above: 1e299 } as const];
    fc.assert(
      fc.property(drafts, fc.double({ min: 0.1, max: 5, noNaN: true }), (draft, at) => {
        const spec = draft.write(UNIT);
        const options = { start: { x: at, y: 1 / at }, span: [0, 20] as const, samples: 11, rtol: 1e-7 };
        const fast = simulate(spec, options);
        const general = simulate(spec, { ...options, thresholds });
        expect(fast.outcome.status).toBe(general.outcome.status);
        expect(fast.t).toEqual(general.t);
        general.x.forEach((x, i) => {
          expect(Math.abs(fast.x[i]! - x)).toBeLessThanOrEqual(2e-7 * x + 1e-10);
          expect(Math.abs(fast.y[i]! - general.y[i]!)).toBeLessThanOrEqual(2e-7 * general.y[i]! + 1e-10);
        });
        if (fast.steps.evaluations !== general.steps.evaluations) compared += 1;
      }),
      { seed: SEED, numRuns: 80 }
    );
    expect(compared).toBeGreaterThan(25);
  });
});
