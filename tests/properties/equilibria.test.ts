import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { compile, findEquilibria, type EquilibriaReport, type Equilibrium, type ModelSpec } from '$lib/dynamics';
import { drafts, PATIENCE, roundModels, runs, scales, SEED, STARTS, UNIT, type Scale } from './models';
import { multistart, type Root } from './multistart';

/** Largest abundance in reach of the draws; equilibria beyond are not searched for by the independent method. */
const REACH = 30;

function isListed(report: EquilibriaReport, { x, y }: Root): boolean {
  const near = (p: number, q: number) => Math.abs(p - q) <= 1e-5 * (0.01 + Math.abs(q));
  return (
    report.equilibria.some((found) => near(found.x, x) && near(found.y, y)) ||
    report.continua.some((continuum) => {
      const { points } = continuum;
      // Distance to the polyline of the curve, generously.
      return points.some((p) => Math.hypot(p.x - x, p.y - y) < 0.1 * (1 + Math.hypot(x, y)));
    })
  );
}

/** A point far from any border: its class cannot hang on rounding, in any unit. */
const isFirm = (found: Equilibrium) => !found.borderline && found.multiplicity === 1;

function inUnits(found: Equilibrium, scale: Scale) {
  return { x: found.x / scale.x, y: found.y / scale.y, rate: found.trace * scale.time, class: found.class };
}

describe('equilibria of models of every kind', () => {
  it(
    'misses none that an independent search finds',
    () => {
      let compared = 0;
      let doubtful = 0;
      const kinds = new Set<string>();
      const compare = (spec: ModelSpec) => {
        const report = findEquilibria(spec);
        // Who says that something may be missing has not missed it; there must be few of those.
        if (!report.complete) {
          doubtful += 1;
          return;
        }
        const leslie = spec.interaction === 'consumer-resource' && spec.second.growth?.kind === 'leslie';
        for (const root of multistart(compile(spec), REACH, REACH, STARTS)) {
          // Next to a merger Newton's method itself is not to be trusted; the ceiling of leslie growth ends at x = 0.
          if (!(root.strength > 1e-6) || (leslie && root.x < 1e-6)) continue;
          compared += 1;
          expect(isListed(report, root), `${JSON.stringify(root)} of ${JSON.stringify(spec)}`).toBe(true);
        }
      };
      fc.assert(
        fc.property(drafts, (draft) => {
          kinds.add(draft.label.replace(/ [wd]\b/g, ''));
          compare(draft.write(UNIT));
        }),
        { seed: SEED, numRuns: runs(2500) }
      );
      fc.assert(fc.property(roundModels, compare), { seed: SEED + 4, numRuns: runs(1000) });
      // A law that nothing was held against proves nothing.
      expect(compared).toBeGreaterThan(runs(4000));
      expect(doubtful).toBeLessThan(runs(20));
      // Both forms of competition by nine pairs of growth; three responses by three growths by three kinds of consumer.
      expect(kinds.size).toBe(18 + 27);
    },
    PATIENCE
  );

  it(
    'does not hang on the last digit of a rate',
    () => {
      let firm = 0;
      fc.assert(
        fc.property(roundModels, (spec) => {
          const r = spec.first.growth.r;
          const growth = { ...spec.first.growth, r: r * (1 + 1e-13) };
          const moved = findEquilibria({ ...spec, first: { ...spec.first, growth } } as ModelSpec).equilibria;
          const near = (p: number, q: number) => Math.abs(p - q) <= 1e-3 * Math.abs(q);
          // What is away from all borders stays, with its class, when a rate moves by less than its last digits.
          for (const point of findEquilibria(spec).equilibria.filter(isFirm)) {
            firm += 1;
            const twin = moved.find(({ x, y }) => near(x, point.x) && near(y, point.y));
            expect(twin?.class, `${point.x} ${point.y} of ${JSON.stringify(spec)}`).toBe(point.class);
          }
        }),
        { seed: SEED + 5, numRuns: runs(1000) }
      );
      expect(firm).toBeGreaterThan(runs(300));
    },
    PATIENCE
  );

  it(
    'lists only points that rest, sorted, and proves nearly every list complete',
    () => {
      let complete = 0;
      const count = runs(2500);
      fc.assert(
        fc.property(drafts, scales, (draft, scale) => {
          const spec = draft.write(scale);
          const report = findEquilibria(spec);
          const system = compile(spec);
          const [rate, size] = [new Float64Array(2), new Float64Array(2)];
          report.equilibria.forEach((found, i) => {
            system.rhs(found.x, found.y, rate);
            system.magnitude(found.x, found.y, size);
            expect(Math.abs(rate[0]!)).toBeLessThanOrEqual(1e-9 * size[0]!);
            expect(Math.abs(rate[1]!)).toBeLessThanOrEqual(1e-9 * size[1]!);
            expect(found.x).toBeGreaterThanOrEqual(0);
            expect(found.y).toBeGreaterThanOrEqual(0);
            const next = report.equilibria[i + 1];
            if (next) expect(found.x < next.x || (found.x === next.x && found.y <= next.y)).toBe(true);
          });
          if (report.complete) complete += 1;
        }),
        { seed: SEED + 1, numRuns: count }
      );
      expect(complete / count).toBeGreaterThan(0.99);
    },
    PATIENCE
  );

  it(
    'gives the same answer in any unit',
    () => {
      fc.assert(
        fc.property(drafts, scales, (draft, scale) => {
          const here = findEquilibria(draft.write(UNIT)).equilibria.filter(isFirm);
          const there = findEquilibria(draft.write(scale)).equilibria.map((found) => inUnits(found, scale));
          for (const found of here) {
            const near = (p: number, q: number) => Math.abs(p - q) <= 1e-6 * Math.abs(q) + 1e-9;
            const twin = there.find(({ x, y }) => near(x, found.x) && near(y, found.y));
            expect(twin, `${found.x} ${found.y} of ${JSON.stringify(draft.write(scale))}`).toBeDefined();
            expect(twin?.class).toBe(found.class);
          }
        }),
        { seed: SEED + 2, numRuns: runs(2000) }
      );
    },
    PATIENCE
  );

  it(
    'eigenvalues belong to the Jacobian it reports',
    () => {
      fc.assert(
        fc.property(drafts, (draft) => {
          for (const { eigenvalues, jacobian, trace, determinant } of findEquilibria(draft.write(UNIT)).equilibria) {
            const [l, m] = eigenvalues;
            const scale =
              Math.abs(jacobian[0][0]) +
              Math.abs(jacobian[1][1]) +
              Math.sqrt(Math.abs(jacobian[0][1] * jacobian[1][0]));
            expect(Math.abs(l.re + m.re - trace)).toBeLessThanOrEqual(1e-9 * scale);
            expect(Math.abs(l.re * m.re - l.im * m.im - determinant)).toBeLessThanOrEqual(1e-9 * scale ** 2);
            expect(l.re).toBeGreaterThanOrEqual(m.re);
            expect(l.im).toBeGreaterThanOrEqual(0);
          }
        }),
        { seed: SEED + 3, numRuns: runs(1000) }
      );
    },
    PATIENCE
  );
});
