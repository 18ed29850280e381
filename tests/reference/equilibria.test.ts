import { describe, expect, it } from 'vitest';
import { findEquilibria, type ModelSpec } from '$lib/dynamics';
import reference from './equilibria.json';
import { expectEquilibria, type EquilibriaCase } from './expectEquilibria';

const cases = reference.cases as EquilibriaCase[];

describe('equilibria with exact answers', () => {
  it.each(cases.map((testCase) => [testCase.id, testCase.title, testCase] as const))(
    '%s %s',
    (_id, _title, testCase) => {
      expectEquilibria(testCase);
    }
  );

  it('reports a line of equilibria by its two ends', () => {
    const testCase = cases.find(({ line }) => line !== undefined)!;
    const { continua } = findEquilibria(testCase.document as ModelSpec);
    expect(continua).toHaveLength(1);
    const ends = [continua[0]!.from, continua[0]!.to!].map(({ x, y }) => [x, y]);
    for (const end of [testCase.line!.from, testCase.line!.to]) {
      const nearest = Math.min(...ends.map(([x, y]) => Math.hypot(x! - end[0]!, y! - end[1]!)));
      expect(nearest).toBeLessThan(1e-7);
    }
    expect(continua[0]!.stability).toBe('stable');
  });

  it.each(cases.filter(({ infeasible }) => infeasible.length > 0).map((testCase) => [testCase.id, testCase] as const))(
    'lists real solutions with a negative abundance on request: %s',
    (_id, testCase) => {
      const report = findEquilibria(testCase.document as ModelSpec, { includeInfeasible: true });
      for (const [x, y] of testCase.infeasible) {
        const scale = Math.hypot(x!, y!);
        const match = report.equilibria.find((found) => Math.hypot(found.x - x!, found.y - y!) < 1e-9 * scale);
        expect(match?.feasible).toBe(false);
      }
    }
  );
});
