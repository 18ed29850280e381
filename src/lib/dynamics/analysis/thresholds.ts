/** Values of one parameter at which the equilibria of a model change in number or in stability. */
import { checkModel } from '../model/check';
import { parametersOf, withParameter } from '../model/parameters';
import type { ModelSpec, SpeciesKey } from '../model/spec';
import { ENGINE_VERSION } from '../version';
import { branchesOf, invasionRates, type Branch, type BranchOptions, type Branches } from './branches';
import { locate, type CurvePoint } from './continuation';
import type { Family } from './faces';
import { firstLyapunov, higherTerms, signOfWeighed } from './normalForm';

export type ThresholdKind = 'transcritical' | 'saddle-node' | 'hopf' | 'homoclinic-suspected';

export interface ParameterThreshold {
  kind: ThresholdKind;
  /** Value of the parameter. */
  value: number;
  /** The equilibrium that changes. */
  x: number;
  y: number;
  /**
   * Of a Hopf point: whether a stable cycle grows beyond it (supercritical) or an unstable one shrinks onto it
   * (subcritical). Null for the others, and where the next terms do not decide.
   */
  criticality: 'supercritical' | 'subcritical' | null;
}

/** A branch of equilibria as columns of equal length, threshold points included. */
export interface EquilibriumBranch {
  parameter: number[];
  x: number[];
  y: number[];
  /** Both eigenvalues have a negative real part there; false at a threshold itself. */
  stable: boolean[];
}

export interface ThresholdReport {
  parameter: string;
  range: [number, number];
  branches: EquilibriumBranch[];
  /** Ascending by value. */
  thresholds: ParameterThreshold[];
  /** True when every equilibrium at every seeded value is proven known and lies on a branch followed to its ends. */
  complete: boolean;
  /** What was shown and what was not, in one sentence or two. */
  completeness: string;
  engine: string;
}

/** A trace or rate below this part of its own terms is zero: no sign is read from rounding. */
const ROUNDING = 1e-11;
/** Thresholds of one kind nearer than this part of the range, at the same state, are one. */
const SAME = 1e-7;

/** A function along a branch whose change of sign is a threshold, with the size of the terms it is summed from. */
interface Test {
  at(z: Float64Array): { value: number; size: number };
  judge(z: Float64Array): ParameterThreshold | null;
}

/** @throws RangeError naming what is wrong with the question */
export function requireRange(spec: ModelSpec, path: string, [p0, p1]: readonly [number, number]): void {
  if (!parametersOf(spec).some((parameter) => parameter.path === path)) {
    throw new RangeError(`This model has no parameter ${path}.`);
  }
  if (!Number.isFinite(p0) || !Number.isFinite(p1) || !(p1 > p0)) {
    throw new RangeError('The range must be two numbers, the second the larger.');
  }
  for (const p of [p0, p1]) {
    const issue = checkModel(withParameter(spec, path, p))[0];
    if (issue) throw new RangeError(`At ${p} this is no model: ${issue.path} ${issue.message}`);
  }
}

function slopesAt(family: Family, q: number, x: number, y: number): [number, number, number, number] {
  const j = new Float64Array(4);
  family.at(q).system.jacobian(x, y, j);
  return [j[0]!, j[1]!, j[2]!, j[3]!];
}

function isStable([a, b, c, d]: readonly [number, number, number, number]): boolean {
  return b === 0 || c === 0 ? a < 0 && d < 0 : a + d < 0 && a * d - b * c > 0;
}

function testsOf(family: Family, { face }: Branch): Test[] {
  const plain = (kind: ThresholdKind, z: Float64Array): ParameterThreshold => ({
    kind,
    value: family.value(face.q(z)),
    ...face.plane(z),
    criticality: null
  });
  const jacobian = (z: Float64Array) => {
    const { x, y } = face.plane(z);
    return slopesAt(family, face.q(z), x, y);
  };
  const tests: Test[] = [{ at: (z) => face.fold(z), judge: (z) => plain('saddle-node', z) }];
  const magnitude = new Float64Array(2);
  /** Terms that the growth per head of each species is summed from; an absent one is looked at just off its axis. */
  const perHead = (z: Float64Array): [number, number] => {
    const { x, y } = face.plane(z);
    const off = 1e-9 * (Math.max(x, y) || 1);
    const [px, py] = [x || off, y || off];
    family.at(face.q(z)).system.magnitude(px, py, magnitude);
    return [magnitude[0]! / px, magnitude[1]! / py];
  };
  for (const { into, rate } of invasionRates(family, face)) {
    const invader = into === 'first' || face.key === 'second' ? 0 : 1;
    tests.push({
      at: (z) => ({ value: rate(z), size: perHead(z)[invader] }),
      judge: (z) => plain('transcritical', z)
    });
  }
  if (face.key !== 'both') return tests;
  tests.push({
    at(z) {
      const [a, , , d] = jacobian(z);
      const [ofFirst, ofSecond] = perHead(z);
      return { value: a + d, size: ofFirst + ofSecond };
    },
    judge(z) {
      const [a, b, c, d] = jacobian(z);
      if (!(a * d - b * c > 0)) return null;
      const { x, y } = face.plane(z);
      // What is left of the trace is rounding; the coefficient is that of the pair on the imaginary axis.
      const mean = (a - d) / 2;
      const sign = signOfWeighed(firstLyapunov([mean, b, c, -mean], higherTerms(family.at(face.q(z)).spec, x, y)));
      const criticality = sign === 0 ? null : sign < 0 ? 'supercritical' : 'subcritical';
      return { ...plain('hopf', z), criticality };
    }
  });
  return tests;
}

interface Found {
  threshold: ParameterThreshold;
  /** Where on the branch: between point `after` and the next. */
  after: number;
  share: number;
  z: Float64Array;
}

/** Changes of sign along a branch; points at which a test is zero within rounding are looked past. */
function foundOn(family: Family, branch: Branch, doubts: string[]): Found[] {
  const { face, points } = branch;
  const found: Found[] = [];
  for (const { at, judge } of testsOf(family, branch)) {
    let last: { index: number; sign: number } | null = null;
    points.forEach((point, index) => {
      const { value, size } = at(point.z);
      if (!(Math.abs(value) > ROUNDING * size)) return;
      const sign = Math.sign(value);
      const from = last;
      last = { index, sign };
      if (from === null || from.sign === sign) return;
      // A test that is zero all along a stretch, as for the classical model, is a property and no threshold.
      if (index - from.index > 3) return;
      const place = locate(face.curve, points[from.index]!, point, (z) => at(z).value);
      if (place === null) {
        doubts.push(`a change near ${Number(family.value(face.q(point.z)).toPrecision(6))} could not be located`);
        return;
      }
      const threshold = judge(place.z);
      if (threshold) found.push({ threshold, after: from.index, share: place.share, z: place.z });
    });
  }
  return found.sort((p, q) => p.after - q.after || p.share - q.share);
}

/** Ends on an axis inside the range, where a species is lost from a branch. */
function lostAt(family: Family, { face, points, ends }: Branch): ParameterThreshold[] {
  const inside = (q: number): boolean => {
    const margin = 1e-9 * (family.q1 - family.q0);
    return q > family.q0 + margin && q < family.q1 - margin;
  };
  return ends.flatMap((end, i): ParameterThreshold[] => {
    const { z } = points[i === 0 ? 0 : points.length - 1]!;
    if ((end !== 'x = 0' && end !== 'y = 0') || !inside(face.q(z))) return [];
    return [{ kind: 'transcritical', value: family.value(face.q(z)), ...face.plane(z), criticality: null }];
  });
}

function columnsOf(family: Family, { face, points }: Branch, found: readonly Found[]): EquilibriumBranch {
  const columns: EquilibriumBranch = { parameter: [], x: [], y: [], stable: [] };
  const push = (z: Float64Array, stable: boolean): void => {
    const { x, y } = face.plane(z);
    columns.parameter.push(family.value(face.q(z)));
    columns.x.push(x);
    columns.y.push(y);
    columns.stable.push(stable);
  };
  const stableAt = (z: Float64Array): boolean => {
    const { x, y } = face.plane(z);
    return isStable(slopesAt(family, face.q(z), x, y));
  };
  let next = 0;
  points.forEach((point: CurvePoint, index) => {
    push(point.z, stableAt(point.z));
    for (; next < found.length && found[next]!.after === index; next++) push(found[next]!.z, false);
  });
  return columns;
}

function merged(family: Family, all: readonly ParameterThreshold[], branches: readonly Branch[]): ParameterThreshold[] {
  const span = Math.abs(family.value(family.q1) - family.value(family.q0));
  const size = (which: 'x' | 'y'): number =>
    Math.max(0, ...branches.flatMap(({ face, points }) => points.map(({ z }) => face.plane(z)[which]))) || 1;
  const [sizeX, sizeY] = [size('x'), size('y')];
  const kept: ParameterThreshold[] = [];
  for (const one of [...all].sort((p, q) => p.value - q.value)) {
    const known = kept.some(
      (other) =>
        other.kind === one.kind &&
        Math.abs(other.value - one.value) <= SAME * Math.min(span, Math.abs(one.value) || span) &&
        Math.abs(other.x - one.x) <= 1e-5 * sizeX &&
        Math.abs(other.y - one.y) <= 1e-5 * sizeY
    );
    if (!known) kept.push(one);
  }
  return kept;
}

function completenessOf({ doubts, seeded, stopped }: Branches): string {
  if (stopped) return 'Stopped before the range was searched through.';
  if (doubts.length > 0) return `Not certain to be complete: ${[...new Set(doubts)].join('; ')}.`;
  return (
    `At ${seeded} values of the parameter all equilibria are proven known, and each lies on a branch that was followed to ` +
    'its ends. A closed loop of equilibria that exists only between two neighbouring values would not be seen.'
  );
}

/**
 * All branches of equilibria over one parameter, and where they change.
 * @param spec a model without issues
 * @param path a parameter as parametersOf lists it; one that the document leaves out counts from 0
 * @param range first and last value, both of which must make a sound model. Thresholds strictly inside are reported.
 * @returns branches in the closed quadrant and thresholds: saddle-node, where two equilibria merge and vanish; transcritical,
 *   where a species enters or is lost on an axis; hopf, where a pair of eigenvalues crosses the imaginary axis. Located by
 *   bracketing on the branch itself to about 1e-12. Cost: some ten milliseconds a branch.
 * @throws RangeError for an unknown parameter or a range that makes no sense
 * @source kuznetsov2004 §3.3, §3.5, §10.2
 */
export function thresholds(
  spec: ModelSpec,
  path: string,
  range: readonly [number, number],
  options: BranchOptions = {}
): ThresholdReport {
  requireRange(spec, path, range);
  const all = branchesOf(spec, path, range, options);
  const { family, branches } = all;
  const found: ParameterThreshold[] = [];
  const columns = branches.map((branch) => {
    const here = foundOn(family, branch, all.doubts);
    found.push(...here.map(({ threshold }) => threshold), ...lostAt(family, branch));
    return columnsOf(family, branch, here);
  });
  return {
    parameter: path,
    range: [range[0], range[1]],
    branches: columns,
    thresholds: merged(family, found, branches),
    complete: all.doubts.length === 0 && !all.stopped,
    completeness: completenessOf(all),
    engine: ENGINE_VERSION
  };
}

/** A value of a lever at which an equilibrium has a wanted abundance. */
export interface LeverValue {
  value: number;
  x: number;
  y: number;
  stable: boolean;
}

/**
 * Values of a lever that hold a species at a level.
 * @param species whose abundance. @param level the wanted one, > 0. @param range where to look.
 * @returns every equilibrium of the range at that level with its lever value, ascending; empty when there is none. An
 *   unstable one holds nothing by itself.
 * @throws RangeError as thresholds does
 */
export function leverForLevel(
  spec: ModelSpec,
  path: string,
  species: SpeciesKey,
  level: number,
  range: readonly [number, number],
  options: BranchOptions = {}
): LeverValue[] {
  requireRange(spec, path, range);
  const { family, branches } = branchesOf(spec, path, range, options);
  const values: LeverValue[] = [];
  for (const { face, points } of branches) {
    const over = (z: Float64Array): number => (species === 'first' ? face.plane(z).x : face.plane(z).y) - level;
    points.forEach((point, i) => {
      const before = points[i - 1];
      // A point exactly at the level counts with the stretch that ends there.
      if (!before || over(before.z) === 0 || over(before.z) * over(point.z) > 0) return;
      const place = locate(face.curve, before, point, over);
      if (!place) return;
      const { x, y } = face.plane(place.z);
      const q = face.q(place.z);
      values.push({ value: family.value(q), x, y, stable: isStable(slopesAt(family, q, x, y)) });
    });
  }
  return values.sort((p, q) => p.value - q.value);
}
