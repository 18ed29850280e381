/** For tests: a report of equilibria at points already known, with classes from the Jacobian alone. */
import { compile } from '../model/compile';
import type { ModelSpec } from '../model/spec';
import type { EquilibriaReport, Equilibrium, EquilibriumClass } from './results';

export function reportAt(spec: ModelSpec, points: readonly (readonly [number, number])[]): EquilibriaReport {
  const system = compile(spec);
  const j = new Float64Array(4);
  const equilibria = points.map(([x, y]): Equilibrium => {
    system.jacobian(x, y, j);
    const trace = j[0]! + j[3]!;
    const determinant = j[0]! * j[3]! - j[1]! * j[2]!;
    const root = trace * trace - 4 * determinant;
    const half = Math.sqrt(Math.abs(root)) / 2;
    const flat = Math.abs(trace) < 1e-12 * Math.sqrt(Math.abs(determinant));
    const shape = root < 0 ? 'spiral' : 'node';
    const kind: EquilibriumClass =
      determinant < 0 ? 'saddle' : flat ? 'centre' : `${trace < 0 ? 'stable' : 'unstable'} ${shape}`;
    return {
      x,
      y,
      feasible: x >= 0 && y >= 0,
      multiplicity: 1,
      jacobian: [
        [j[0]!, j[1]!],
        [j[2]!, j[3]!]
      ],
      trace,
      determinant,
      eigenvalues:
        root < 0
          ? [
              { re: trace / 2, im: half },
              { re: trace / 2, im: -half }
            ]
          : [
              { re: trace / 2 + half, im: 0 },
              { re: trace / 2 - half, im: 0 }
            ],
      class: kind,
      stability: determinant < 0 ? 'unstable' : flat ? 'neutral' : trace < 0 ? 'stable' : 'unstable',
      decidedBy: 'linearisation',
      borderline: false,
      returnTime: null,
      period: null,
      remark: null
    };
  });
  return { equilibria, continua: [], absorbing: [], complete: true, completeness: '', engine: '' };
}
