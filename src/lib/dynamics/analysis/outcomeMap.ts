/** What becomes of the two species as two parameters vary: a map whose borders are refined until they are as sharp as asked. */
import { withParameter } from '../model/parameters';
import type { ModelSpec } from '../model/spec';
import { findEquilibria } from './equilibria';
import { limitCycles } from './limitCycles';
import { outcomeFrom, type OutcomeOptions } from './outcome';
import type { EquilibriaReport } from './results';
import { requireRange } from './thresholds';

/** Where paths end, in words that do not depend on how many equilibria there are. */
export type OutcomeName =
  | 'both at rest'
  | 'both cycling'
  | 'first alone'
  | 'second alone'
  | 'neither'
  | 'without limit'
  | 'undecided'
  /** Closed orbits around a centre. */
  | 'both circling';

export interface OutcomeMapOptions {
  /** From here; without a start, every outcome that attracts is named. */
  start?: { x: number; y: number };
  /** Cells a side before refinement; default 8. */
  base?: number;
  /** Number of times a border cell is halved; default 4. */
  depth?: number;
  /** For the paths from the start. */
  path?: Pick<OutcomeOptions, 'horizon' | 'maxSteps'>;
  shouldStop?: () => boolean;
}

/** A square of the map, in parameter values. */
export interface OutcomeCell {
  a0: number;
  a1: number;
  b0: number;
  b1: number;
  /** Index into `classes`, at the centre of the cell. */
  outcome: number;
  /** A border passes: the corners do not agree, and the cell is as small as asked. */
  border: boolean;
}

export interface OutcomeMap {
  /** Each the outcomes that attract, in a fixed order; one name when a start was given. By first appearance. */
  classes: OutcomeName[][];
  cells: OutcomeCell[];
  /** Share of the map's area of each class; border cells count by their centre. */
  shares: number[];
  /** Width of the smallest cell as a share of the range: how sharply borders are known. */
  resolution: number;
  evaluations: number;
  /** False when stopped early; then cells are missing. */
  finished: boolean;
}

const ORDER: readonly OutcomeName[] = [
  'both at rest',
  'both cycling',
  'both circling',
  'first alone',
  'second alone',
  'neither',
  'without limit',
  'undecided'
];

function nameOf({ x, y }: { x: number; y: number }): OutcomeName {
  if (x > 0) return y > 0 ? 'both at rest' : 'first alone';
  return y > 0 ? 'second alone' : 'neither';
}

/** Every outcome that attracts something. */
function attractors(spec: ModelSpec, report: EquilibriaReport): OutcomeName[] {
  const names = new Set<OutcomeName>();
  const feasible = report.equilibria.filter((equilibrium) => equilibrium.feasible);
  for (const equilibrium of feasible) if (equilibrium.stability === 'stable') names.add(nameOf(equilibrium));
  for (const state of report.absorbing) if (state.stability === 'stable') names.add(nameOf(state));
  if (feasible.some(({ class: kind }) => kind === 'centre')) names.add('both circling');
  // A cycle that attracts goes round a point that repels, or lies outside one that goes round a point that attracts; only
  // the first is looked for, because the second would cost a search at every point of the map.
  const repelled = feasible.some(
    ({ x, y, determinant, stability }) => x > 0 && y > 0 && determinant > 0 && stability === 'unstable'
  );
  if (repelled && limitCycles(spec, report).some(({ stability }) => stability === 'stable')) names.add('both cycling');
  if (names.size === 0) names.add('undecided');
  return ORDER.filter((name) => names.has(name));
}

function outcomeAt(spec: ModelSpec, options: OutcomeMapOptions): OutcomeName[] {
  const report = findEquilibria(spec);
  const { start } = options;
  if (!start) return attractors(spec, report);
  const end = outcomeFrom(spec, report, start, {
    ...options.path,
    ...(options.shouldStop && { shouldStop: options.shouldStop })
  });
  switch (end.kind) {
    case 'equilibrium':
      return [nameOf(report.equilibria[end.index]!)];
    case 'absorbing':
      return [nameOf(report.absorbing[end.index]!)];
    case 'cycle':
      return ['both cycling'];
    case 'unbounded':
      return ['without limit'];
    case 'undecided':
      return [report.equilibria.some(({ class: kind }) => kind === 'centre') ? 'both circling' : 'undecided'];
  }
}

/**
 * A map of outcomes over two parameters.
 * @param pathA, pathB two different parameters of the model. @param rangeA, rangeB both ends must make sound models.
 * @returns cells that cover the map without overlap, small along the borders. The same every time. An island that misses
 *   every corner and centre of the coarse cells is not seen. Cost: some milliseconds a point, some hundreds of points.
 * @throws RangeError for unknown or equal parameters, or ranges that make no model
 */
export function outcomeMap(
  spec: ModelSpec,
  pathA: string,
  rangeA: readonly [number, number],
  pathB: string,
  rangeB: readonly [number, number],
  options: OutcomeMapOptions = {}
): OutcomeMap {
  requireRange(spec, pathA, rangeA);
  requireRange(spec, pathB, rangeB);
  if (pathA === pathB) throw new RangeError('A map needs two different parameters.');
  for (const a of rangeA) requireRange(withParameter(spec, pathA, a), pathB, rangeB);
  const { base = 8, depth = 4, shouldStop = () => false } = options;
  if (!Number.isInteger(base) || !Number.isInteger(depth) || base < 1 || depth < 0) {
    throw new RangeError('Cells and halvings are whole numbers, and there must be a cell.');
  }
  // Corners and centres of the smallest cells lie on one lattice, so that nothing is worked out twice.
  const size = base * 2 ** (depth + 1);
  const at = ([low, high]: readonly [number, number], i: number): number =>
    i === size ? high : low + ((high - low) * i) / size;
  const known = new Map<number, number>();
  const names: string[] = [];
  const classes: OutcomeName[][] = [];
  let finished = true;
  const outcome = (i: number, j: number): number => {
    const key = i * (size + 1) + j;
    const before = known.get(key);
    if (before !== undefined) return before;
    const found = outcomeAt(withParameter(withParameter(spec, pathA, at(rangeA, i)), pathB, at(rangeB, j)), options);
    const name = found.join('; ');
    let index = names.indexOf(name);
    if (index < 0) {
      index = names.push(name) - 1;
      classes.push(found);
    }
    known.set(key, index);
    return index;
  };
  const cells: OutcomeCell[] = [];
  const shares: number[] = [];
  const visit = (i: number, j: number, width: number, level: number): void => {
    if (!finished || shouldStop()) {
      finished = false;
      return;
    }
    const half = width / 2;
    const centre = outcome(i + half, j + half);
    const corners = [outcome(i, j), outcome(i + width, j), outcome(i, j + width), outcome(i + width, j + width)];
    const border = corners.some((corner) => corner !== centre);
    if (border && level < depth) {
      for (const [di, dj] of [
        [0, 0],
        [half, 0],
        [0, half],
        [half, half]
      ] as const)
        visit(i + di, j + dj, half, level + 1);
      return;
    }
    shares[centre] = (shares[centre] ?? 0) + (width / size) ** 2;
    cells.push({
      a0: at(rangeA, i),
      a1: at(rangeA, i + width),
      b0: at(rangeB, j),
      b1: at(rangeB, j + width),
      outcome: centre,
      border
    });
  };
  const coarse = size / base;
  for (let row = 0; row < base; row++)
    for (let column = 0; column < base; column++) visit(column * coarse, row * coarse, coarse, 0);
  return {
    classes,
    cells,
    shares: classes.map((_, k) => shares[k] ?? 0),
    resolution: 1 / (base * 2 ** depth),
    evaluations: known.size,
    finished
  };
}
