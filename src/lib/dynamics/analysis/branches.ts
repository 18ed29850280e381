/**
 * Every branch of equilibria of a model over a range of one parameter: complete lists of equilibria at several values are
 * joined by continuation, and what begins where another branch loses or gains a species is followed too.
 */
import type { ModelSpec } from '../model/spec';
import { locate, tangentAt, walk, type CurvePoint } from './continuation';
import { findEquilibria } from './equilibria';
import { faceKeyOf, faceOf, familyOf, type Face, type FaceKey, type Family } from './faces';
import type { Equilibrium } from './results';
import { agrees, apart, passes, touches } from './stretches';

export interface BranchOptions {
  /** Number of equal parts of the range at whose ends all equilibria are found and proven; default 12. */
  parts?: number;
  /** Longest step along a branch, as a share of the range; default 1/80. */
  longest?: number;
  /** Asked now and then; true stops the search. */
  shouldStop?: () => boolean;
}

/** One branch inside the closed quadrant and the range, its points in order. */
export interface Branch {
  face: Face;
  points: CurvePoint[];
  /** What each end is: the end of the range, an abundance of 0, the other end, an abundance without bound, or lost. */
  ends: [BranchEnd, BranchEnd];
}
export type BranchEnd = 'range' | 'x = 0' | 'y = 0' | 'closed' | 'unbounded' | 'lost';

export interface Branches {
  family: Family;
  faces: Record<FaceKey, Face>;
  branches: Branch[];
  /** Why something may be missing, each a clause; empty when every equilibrium at every seeded value lies on a branch. */
  doubts: string[];
  /** Number of values at which all equilibria were found. */
  seeded: number;
  stopped: boolean;
}

/** An equilibrium found at one value of the parameter. */
interface Seed {
  face: FaceKey;
  q: number;
  x: number;
  y: number;
  /** Index of the branch it lies on, or null. */
  branch: number | null;
}

/** Abundances this many times the largest in sight are without bound. */
const BEYOND = 1e7;
/** Two points nearer than this, in units of the scale, are one. */
const SAME = 1e-7;

function seedsOf(
  family: Family,
  parts: number,
  stop: () => boolean
): { seeds: Seed[]; doubts: string[]; sizes: [number, number]; seeded: number } {
  const seeds: Seed[] = [];
  const doubts: string[] = [];
  const curves: number[] = [];
  let sizeX = 0;
  let sizeY = 0;
  let seeded = 0;
  for (let i = 0; i <= parts && !stop(); i++) {
    const q = i === parts ? family.q1 : family.q0 + ((family.q1 - family.q0) * i) / parts;
    const { spec, p } = family.at(q);
    const report = findEquilibria(spec);
    seeded += 1;
    if (!report.complete) doubts.push(`the equilibria at ${Number(p.toPrecision(6))} are not proven to be all`);
    if (report.continua.length > 0) curves.push(Number(p.toPrecision(6)));
    for (const { x, y } of report.equilibria as Equilibrium[]) {
      seeds.push({ face: faceKeyOf(family, x, y), q, x, y, branch: null });
      sizeX = Math.max(sizeX, x);
      sizeY = Math.max(sizeY, y);
    }
  }
  if (curves.length === 1) doubts.push(`at ${curves[0]} a whole curve of states is at rest`);
  else if (curves.length > 1)
    doubts.push(`at ${curves.length} values from ${curves[0]} on a whole curve of states is at rest`);
  return { seeds, doubts, sizes: [sizeX || 1, sizeY || 1], seeded };
}

/** What a branch must not pass: the ends of the range and the axes. */
interface Limit {
  end: BranchEnd;
  /** Positive inside. */
  test: (z: Float64Array) => number;
}

function limitsOf(family: Family, face: Face): Limit[] {
  const limits: Limit[] = [
    { end: 'range', test: (z) => face.q(z) - family.q0 },
    { end: 'range', test: (z) => family.q1 - face.q(z) }
  ];
  if (face.key === 'both' || face.key === 'first') limits.push({ end: 'x = 0', test: (z) => face.plane(z).x });
  if (face.key === 'both' || face.key === 'second') limits.push({ end: 'y = 0', test: (z) => face.plane(z).y });
  return limits;
}

/** Walks one way until a limit, the start again, or nowhere. */
function oneWay(
  family: Family,
  face: Face,
  start: CurvePoint,
  sizes: readonly [number, number],
  longest: number,
  stop: () => boolean
): { points: CurvePoint[]; end: BranchEnd } {
  const limits = limitsOf(family, face);
  const points: CurvePoint[] = [];
  let here = start;
  for (const next of walk(face.curve, start.z, start.tangent, { longest })) {
    if (stop()) return { points, end: 'lost' };
    let cut: { share: number; z: Float64Array; end: BranchEnd } | null = null;
    const beyond = turnOutside(family, face, here, next);
    if (beyond) {
      // The branch leaves the range and comes back within one step: it ends where it leaves.
      const out = limits.find(({ test }) => test(beyond.z) < 0);
      const place = out && out.test(here.z) > 0 ? locate(face.curve, here, beyond, out.test) : null;
      if (!place) return { points, end: 'range' };
      snap(family, face, place.z, 'range');
      points.push({ z: place.z, tangent: here.tangent });
      return { points, end: 'range' };
    }
    for (const { end, test } of limits) {
      if (test(next.z) >= 0) continue;
      // The start may lie on the limit itself: then the walk leads out at once.
      if (!(test(here.z) > 0)) return { points, end };
      const found = locate(face.curve, here, next, test);
      if (found && (cut === null || found.share < cut.share)) cut = { ...found, end };
    }
    if (cut) {
      snap(family, face, cut.z, cut.end);
      points.push({ z: cut.z, tangent: next.tangent });
      return { points, end: cut.end };
    }
    points.push(next);
    const { x, y } = face.plane(next.z);
    if (x > BEYOND * sizes[0] || y > BEYOND * sizes[1]) return { points, end: 'unbounded' };
    if (points.length > 4 && agrees(face, next, start) && passes(face, here, next, start.z))
      return { points, end: 'closed' };
    here = next;
  }
  return { points, end: 'lost' };
}

/** The turning point between two points inside the range when it lies outside; null otherwise. */
function turnOutside(family: Family, face: Face, a: CurvePoint, b: CurvePoint): CurvePoint | null {
  const last = a.z.length - 1;
  if (!(a.tangent[last]! * b.tangent[last]! < 0)) return null;
  const inside = (q: number): boolean => q >= family.q0 && q <= family.q1;
  if (!inside(face.q(b.z))) return null;
  const place = locate(face.curve, a, b, (z) => face.fold(z).value);
  if (place === null || inside(face.q(place.z))) return null;
  return { z: place.z, tangent: a.tangent };
}

/** Puts a point located on a limit exactly there. */
function snap(family: Family, face: Face, z: Float64Array, end: BranchEnd): void {
  const last = z.length - 1;
  if (end === 'range')
    z[last] = Math.abs(z[last]! - family.q0) < Math.abs(z[last]! - family.q1) ? family.q0 : family.q1;
  else if (end === 'x = 0') z[0] = 0;
  else if (end === 'y = 0') z[face.key === 'both' ? 1 : 0] = 0;
  if (face.key === 'both' && end !== 'range') {
    // Both may be lost at once, as where a ceiling follows the resource.
    const scale = new Float64Array(3);
    face.curve.scale(z, scale);
    for (const i of [0, 1]) if (Math.abs(z[i]!) < 1e-12 * scale[i]!) z[i] = 0;
  }
  // An axis that is met at the very end of the range is met exactly there.
  for (const q of [family.q0, family.q1]) if (Math.abs(z[last]! - q) < 1e-12 * (family.q1 - family.q0)) z[last] = q;
}

/** Marks the seeds that a stretch of a branch passes. */
function claim(face: Face, a: CurvePoint, b: CurvePoint, seeds: readonly Seed[], branch: number): void {
  const [qa, qb] = [face.q(a.z), face.q(b.z)];
  const [low, high] = [Math.min(qa, qb), Math.max(qa, qb)];
  const near = seeds.filter(({ face: key, q }) => key === face.key && q >= low && q <= high);
  for (const q of new Set(near.map((seed) => seed.q))) {
    // Near a fold both halves lie close by: the curve itself, solved at this very value, tells which one is meant.
    const z = qa === q ? a.z : qb === q ? b.z : locate(face.curve, a, b, (at) => face.q(at) - q)?.z;
    if (!z) continue;
    const here = near
      .filter((seed) => seed.q === q)
      .map((seed) => ({ seed, off: apart(face, z, face.unknowns(seed.x, seed.y, q)) }))
      .sort((p, r) => p.off - r.off);
    const [first, second] = here;
    // All equilibria at this value are known, so the nearest is the one, unless another is nearly as near.
    if (first && (first.off < SAME || first.off < 0.01 * Math.min(0.1, second?.off ?? 1))) first.seed.branch ??= branch;
  }
}

/**
 * @param spec a model without issues. @param path a parameter of it. @param range its first and last value, sound at both.
 * @returns branches clipped to the quadrant and the range, and what could not be settled. Never throws on valid input.
 * @source kuznetsov2004 §10.2
 */
export function branchesOf(
  spec: ModelSpec,
  path: string,
  range: readonly [number, number],
  options: BranchOptions = {}
): Branches {
  const { parts = 12, longest = 1 / 80, shouldStop = () => false } = options;
  const family = familyOf(spec, path, range);
  let stopped = false;
  let asked = 0;
  const stop = (): boolean => {
    if (!stopped && asked++ % 16 === 0) stopped = shouldStop();
    return stopped;
  };
  const { seeds, doubts, sizes, seeded } = seedsOf(family, parts, stop);
  const sizeOn = (key: FaceKey, which: 'x' | 'y'): number =>
    Math.max(0, ...seeds.filter((seed) => seed.face === key).map((seed) => seed[which])) ||
    sizes[which === 'x' ? 0 : 1];
  const make = (key: FaceKey): Face => faceOf(family, key, sizeOn(key, 'x'), sizeOn(key, 'y'));
  const faces = { both: make('both'), first: make('first'), second: make('second'), neither: make('neither') };
  const branches: Branch[] = [];

  const trace = (face: Face, z: Float64Array): void => {
    const tangent = tangentAt(face.curve, z);
    const p = Number(family.value(face.q(z)).toPrecision(6));
    if (tangent === null) {
      doubts.push(`a state at ${p} could not be followed`);
      return;
    }
    const start: CurvePoint = { z, tangent };
    const ahead = oneWay(family, face, start, sizes, longest, stop);
    const turned: CurvePoint = { z, tangent: tangent.map((entry) => -entry) };
    const behind =
      ahead.end === 'closed'
        ? { points: [], end: 'closed' as const }
        : oneWay(family, face, turned, sizes, longest, stop);
    const back = behind.points
      .reverse()
      .map((point) => ({ z: point.z, tangent: point.tangent.map((entry) => -entry) }));
    const points = [...back, start, ...ahead.points];
    if ((ahead.end === 'lost' || behind.end === 'lost') && !stopped) {
      doubts.push(`the branch through ${p} could not be followed to its end`);
    }
    if (points.length < 2) return;
    const index = branches.push({ face, points, ends: [behind.end, ahead.end] }) - 1;
    for (let i = 1; i < points.length; i++) claim(face, points[i - 1]!, points[i]!, seeds, index);
  };

  for (const seed of seeds) {
    if (stop()) break;
    if (seed.branch !== null) continue;
    const before = branches.length;
    trace(faces[seed.face], faces[seed.face].unknowns(seed.x, seed.y, seed.q));
    if (branches.length > before) seed.branch = before;
  }
  // What meets an axis goes on, or begins, on another face: at every such place each face has to have its branch.
  for (let i = 0; i < branches.length && !stop(); i++) {
    for (const place of meetings(family, branches[i]!)) {
      const face = faces[place.face];
      const z = face.unknowns(place.x, place.y, place.q);
      const known = branches.some(
        (branch) => branch.face === face && branch.points.some((b, k) => touches(face, branch.points[k - 1], b, z))
      );
      if (!known) trace(face, z);
    }
  }
  return { family, faces, branches, doubts, seeded, stopped };
}

interface Meeting {
  face: FaceKey;
  x: number;
  y: number;
  q: number;
}

/** A ceiling that follows the resource leaves the model undefined without it: nothing is at rest at x = 0. */
function followsResource(family: Family): boolean {
  return family.at(family.q0).spec.second.growth?.kind === 'leslie';
}

/** Growth per head of the absent species along a branch on an axis: zero where the branch of the inside meets it. */
export function invasionRates(family: Family, face: Face): { into: FaceKey; rate: (z: Float64Array) => number }[] {
  const j = new Float64Array(4);
  const own = (z: Float64Array, entry: 0 | 3): number => {
    const { x, y } = face.plane(z);
    family.at(face.q(z)).system.jacobian(x, y, j);
    return j[entry]!;
  };
  switch (face.key) {
    case 'both':
      return [];
    case 'first':
      return [{ into: 'both', rate: (z) => own(z, 3) }];
    case 'second':
      return [{ into: 'both', rate: (z) => own(z, 0) }];
    case 'neither':
      return [
        { into: 'first', rate: (z) => own(z, 0) },
        { into: 'second', rate: (z) => own(z, 3) }
      ];
  }
}

/** Places where a branch meets another face: its own ends on an axis, and changes of sign of an invader's growth. */
function meetings(family: Family, { face, points, ends }: Branch): Meeting[] {
  const found: Meeting[] = [];
  ends.forEach((end, i) => {
    if (end !== 'x = 0' && end !== 'y = 0') return;
    const point = points[i === 0 ? 0 : points.length - 1]!;
    const { x, y } = face.plane(point.z);
    const key = faceKeyOf(family, x, y);
    if (key !== face.key && !(x === 0 && followsResource(family))) found.push({ face: key, x, y, q: face.q(point.z) });
  });
  for (const { into, rate } of invasionRates(family, face)) {
    for (let i = 1; i < points.length; i++) {
      const [a, b] = [points[i - 1]!, points[i]!];
      if (!(rate(a.z) * rate(b.z) < 0)) continue;
      const place = locate(face.curve, a, b, rate);
      if (place) found.push({ face: into, ...face.plane(place.z), q: face.q(place.z) });
    }
  }
  return found;
}
