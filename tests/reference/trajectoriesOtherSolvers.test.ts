/** The same paths through two general-purpose integrators written by others. */
import { compile, simulate } from '$lib/dynamics';
import * as mathjs from 'mathjs';
import { Solver } from 'odex';
import { describe, expect, it } from 'vitest';
import { trajectoryCases } from './trajectoryCases';

/** Missing from the package's own types. */
type SolveODE = (
  f: (t: number, z: number[]) => number[],
  span: [number, number],
  start: number[],
  options: { tol: number; maxIter: number }
) => { t: number[]; y: number[][] };
const { solveODE } = mathjs as unknown as { solveODE: SolveODE };

const smooth = trajectoryCases.filter((c) => ['S-TR-01', 'S-TR-02', 'S-TR-03', 'S-TR-08'].includes(c.id));

describe('agreement with other integrators', () => {
  for (const c of smooth) {
    const system = compile(c.document);
    const slope = new Float64Array(2);
    const f = (_: number, z: number[]): number[] => {
      system.rhs(z[0]!, z[1]!, slope);
      return [slope[0]!, slope[1]!];
    };
    const end = c.times.at(-1) ?? 10;

    it(`odex: ${c.title}`, () => {
      const ours = simulate(c.document, { start: c.start, span: [0, end], samples: 2, rtol: 1e-9 });
      const solver = new Solver(2);
      solver.relativeTolerance = 1e-11;
      solver.absoluteTolerance = 1e-12;
      const other = solver.solve(f, 0, [c.start.x, c.start.y], end).y;
      expect(Math.abs(ours.x[1]! / other[0]! - 1)).toBeLessThan(1e-8);
      expect(Math.abs(ours.y[1]! / other[1]! - 1)).toBeLessThan(1e-8);
    });

    it(`mathjs: ${c.title}`, () => {
      const ours = simulate(c.document, { start: c.start, span: [0, end], samples: 2, rtol: 1e-9 });
      // Its tolerance is on the slope alone, and it stops at the end of the span.
      const solved = solveODE(f, [0, end], [c.start.x, c.start.y], { tol: 1e-7, maxIter: 1e6 });
      const other = solved.y.at(-1)!;
      expect(solved.t.at(-1)).toBeCloseTo(end, 9);
      expect(Math.abs(ours.x[1]! / other[0]! - 1)).toBeLessThan(1e-5);
      expect(Math.abs(ours.y[1]! / other[1]! - 1)).toBeLessThan(1e-5);
    });
  }
});
