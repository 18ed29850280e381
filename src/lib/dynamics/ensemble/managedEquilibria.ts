/** Stable resting places in floating point where something is added or taken by the unit: stocking and quotas. */
import { eliminate, firstAlone, secondAlone } from '../analysis/elimination';
import { coefficientsOf, type Coefficients } from '../model/coefficients';
import { compile } from '../model/compile';
import type { ModelSpec, System } from '../model/spec';
import { REAL } from '../numeric/ring';
import { positiveRootsInto } from './floatRoots';

/** Told of each resting place that holds; `isCertain` is false on the border between holding and not. */
export type Seen = (x: number, y: number, isCertain: boolean) => void;

const poly = new Float64Array(16);
const roots = new Float64Array(16);
const slopes = new Float64Array(2);
const size = new Float64Array(2);
const jacobian = new Float64Array(4);
/** Largest share of its own terms that a rate may keep at a point called an equilibrium. */
const RESTING = 1e-9;
const BORDER = 1e-9;

function rootsOf(coefficients: readonly number[]): number[] {
  if (coefficients.length < 2) return [];
  poly.set(coefficients);
  return Array.from(roots.subarray(0, positiveRootsInto(poly, coefficients.length - 1, roots)));
}

const valueOf = (a: readonly number[], x: number): number => a.reduceRight((value, c) => value * x + c, 0);

/** Two steps of Newton's method, and whether what is reached rests. */
function polished(system: System, x: number, y: number): { x: number; y: number } | null {
  for (let i = 0; ; i++) {
    system.rhs(x, y, slopes);
    system.magnitude(x, y, size);
    system.jacobian(x, y, jacobian);
    if (i === 3) break;
    const [a, b, c, d] = [jacobian[0]!, jacobian[1]!, jacobian[2]!, jacobian[3]!];
    const determinant = a * d - b * c;
    const dx = (d * slopes[0]! - b * slopes[1]!) / determinant;
    const dy = (a * slopes[1]! - c * slopes[0]!) / determinant;
    // Only the last digits are wanted; a step that goes further leads to another root.
    if (!(Math.abs(dx) < 1e-3 * x) || !(Math.abs(dy) < 1e-3 * y)) break;
    x -= dx;
    y -= dy;
  }
  const rests = Math.abs(slopes[0]!) <= RESTING * size[0]! && Math.abs(slopes[1]!) <= RESTING * size[1]!;
  return rests ? { x, y } : null;
}

/** Reports a point of the smooth equations when it is stable. */
function judge(system: System, x: number, y: number, seen: Seen): void {
  system.jacobian(x, y, jacobian);
  const [a, b, c, d] = [jacobian[0]!, jacobian[1]!, jacobian[2]!, jacobian[3]!];
  const scale = Math.abs(a) + Math.abs(d) + Math.sqrt(Math.abs(b * c));
  const trace = a + d;
  const determinant = a * d - b * c;
  const isCertain =
    Math.abs(determinant) > BORDER * scale * scale && (determinant < 0 || Math.abs(trace) > BORDER * scale);
  if (!isCertain || (determinant > 0 && trace < 0)) seen(x, y, isCertain);
}

function interior(system: System, k: Coefficients<number>, seen: Seen): void {
  const elimination = eliminate(REAL, k);
  if (elimination === null) return;
  if (elimination.along === 'both') {
    const others = rootsOf(elimination.second);
    for (const x of rootsOf(elimination.first)) for (const y of others) judge(system, x, y, seen);
    return;
  }
  for (const t of rootsOf(elimination.resultant)) {
    const u = valueOf(elimination.top, t) / valueOf(elimination.bottom, t);
    if (!(u > 0 && u < Infinity)) continue;
    const found = elimination.along === 'first' ? polished(system, t, u) : polished(system, u, t);
    if (found) judge(system, found.x, found.y, seen);
  }
}

/** Levels of one species alone that hold while the other is held at 0 by its quota. */
function alone(own: readonly number[], isUntouched: boolean, seen: (n: number, isCertain: boolean) => void): void {
  for (const n of rootsOf(own)) {
    let slope = 0;
    let terms = 0;
    for (let j = own.length - 1; j > 0; j--) {
      slope = slope * n + j * own[j]!;
      terms = terms * n + Math.abs(j * own[j]!);
    }
    const isCertain = Math.abs(slope) > BORDER * terms;
    if (slope < 0 || !isCertain) seen(n, isCertain);
  }
  if (!isUntouched) return;
  const lowest = own.find((c) => c !== 0);
  if (lowest === undefined || lowest < 0) seen(0, lowest !== undefined);
}

/**
 * Stable equilibria of the smooth equations, and states that hold only because a quota has exhausted a species, by the
 * elimination that the proven search uses, without its proof. @param spec a model without issues. Never throws.
 */
export function seeManaged(spec: ModelSpec, seen: Seen): void {
  const system = compile(spec);
  const k = coefficientsOf(REAL, spec);
  interior(system, k, seen);
  const follows = k.leslie !== 0;
  if (k.s1 === 0 && !follows) for (const y of rootsOf(secondAlone(REAL, k))) judge(system, 0, y, seen);
  if (k.s2 === 0) for (const x of rootsOf(firstAlone(REAL, k))) judge(system, x, 0, seen);
  if (k.s1 === 0 && k.s2 === 0 && !follows) judge(system, 0, 0, seen);
  const held1 = k.s1 < 0;
  const held2 = k.s2 < 0;
  if (held1 && !follows) alone(secondAlone(REAL, k), k.s2 === 0, (y, isCertain) => seen(0, y, isCertain));
  if (held2) alone(firstAlone(REAL, k), k.s1 === 0, (x, isCertain) => seen(x, 0, isCertain));
  if (held1 && (held2 || follows)) seen(0, 0, true);
}
