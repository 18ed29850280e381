import { expect } from 'vitest';
import { findEquilibria, type Complex, type EquilibriaReport, type Equilibrium, type ModelSpec } from '$lib/dynamics';

export interface ExpectedEquilibrium {
  point: number[];
  jacobian: number[][];
  eigenvalues: Complex[];
  class: string;
  stability: string;
  coincidentRoots: number;
  nonlinearBehaviour?: string;
  onCurve?: boolean;
}
export interface EquilibriaCase {
  id: string;
  title: string;
  document: unknown;
  tolerance: { point: number; eigenvalue: number };
  isolated: number;
  equilibria: ExpectedEquilibrium[];
  infeasible: number[][];
  line?: { from: number[]; to: number[] };
}

/** The case files use textbook names; a Hopf point is a centre of the linearisation only, so its class is non-hyperbolic. */
function expectedClass(expected: ExpectedEquilibrium): string {
  if (expected.class.startsWith('non-hyperbolic')) return 'non-hyperbolic';
  if (expected.class.startsWith('centre')) {
    return expected.nonlinearBehaviour?.startsWith('true nonlinear centre') ? 'centre' : 'non-hyperbolic';
  }
  return expected.class.replace('star (proper node)', 'star').replace('improper (degenerate) node', 'degenerate node');
}

function expectStability(found: Equilibrium, expected: ExpectedEquilibrium): void {
  if (expected.stability === 'asymptotically stable') expect(found.stability).toBe('stable');
  else if (expected.stability === 'unstable') expect(found.stability).toBe('unstable');
  else {
    // The linearisation does not decide: something else must have, and agree with what is known.
    expect(found.decidedBy).not.toBe('linearisation');
    const behaviour = expected.nonlinearBehaviour ?? '';
    if (behaviour.startsWith('true nonlinear centre')) expect(found.stability).toBe('neutral');
    if (behaviour.includes('supercritical')) expect(found.stability).toBe('stable');
    if (behaviour.includes('attracts every state')) expect(found.stability).toBe('stable');
  }
}

/** Asserts every feasible equilibrium of a case, each value within the tolerance that the case states. */
export function expectEquilibria(
  testCase: EquilibriaCase,
  report: EquilibriaReport = findEquilibria(testCase.document as ModelSpec)
): void {
  const wanted = testCase.equilibria.filter((expected) => expected.onCurve !== true);
  expect(report.equilibria.map(({ x, y }) => [x, y])).toHaveLength(testCase.isolated);
  expect(report.complete, report.completeness).toBe(true);
  wanted.forEach((expected, i) => {
    const found = report.equilibria[i]!;
    const scale = Math.max(...expected.point.map(Math.abs));
    [found.x, found.y].forEach((value, axis) => {
      const target = expected.point[axis]!;
      expect(Math.abs(value - target)).toBeLessThanOrEqual(testCase.tolerance.point * (Math.abs(target) || scale));
    });
    const largest = Math.max(...expected.eigenvalues.map(({ re, im }) => Math.hypot(re, im)));
    expected.eigenvalues.forEach(({ re, im }, which) => {
      const value = found.eigenvalues[which]!;
      expect(Math.hypot(value.re - re, value.im - im)).toBeLessThanOrEqual(testCase.tolerance.eigenvalue * largest);
    });
    expect(found.class).toBe(expectedClass(expected));
    expect(found.multiplicity).toBe(expected.coincidentRoots);
    expectStability(found, expected);
  });
}
