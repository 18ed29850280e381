import { compile } from '../model/compile';
import { parametersOf, withParameter } from '../model/parameters';
import type { ModelSpec } from '../model/spec';
import type { Complex } from './results';

/** How far an equilibrium moves per unit of one parameter. */
export interface EquilibriumSensitivity {
  path: string;
  /** Abundance per unit of the parameter; not finite at a fold, where the equilibrium moves infinitely fast. */
  dx: number;
  dy: number;
}

/** How an eigenvalue pair moves per unit of one parameter, the shift of the equilibrium included. */
export interface EigenvalueSensitivity {
  path: string;
  /** Derivatives of [real, imaginary] of both eigenvalues, larger real part first. */
  derivatives: [Complex, Complex];
}

/** Relative step of the fourth-order central difference: its error and rounding are then both near 1e-12. */
const STEP = 1e-3;

/** Four-point central difference of a vector function of one parameter. */
function difference(spec: ModelSpec, path: string, evaluate: (spec: ModelSpec, change: number) => number[]): number[] {
  const present = parametersOf(spec).find((parameter) => parameter.path === path);
  if (!present) throw new RangeError(`This model has no parameter ${path}.`);
  // Every rate depends rationally on its parameters, so that a step into the negative for a value of 0 is harmless.
  const step = STEP * (Math.abs(present.value) || naturalStep(spec, path));
  const at = (multiple: number) =>
    evaluate(withParameter(spec, path, present.value + multiple * step), multiple * step);
  const [twiceBelow, below, above, twiceAbove] = [at(-2), at(-1), at(1), at(2)];
  return above.map((value, i) => (8 * (value - below[i]!) - (twiceAbove[i]! - twiceBelow[i]!)) / (12 * step));
}

/** Scale of a parameter that is 0: the fastest rate of the model, divided by the power of abundance it multiplies. */
function naturalStep(spec: ModelSpec, path: string): number {
  const rates = parametersOf(spec).filter(({ path: p }) => p.endsWith('.r') || p === 'second.mortality');
  const rate = Math.max(0, ...rates.map(({ value }) => Math.abs(value))) || 1;
  const abundances = parametersOf(spec).filter(({ path: p }) => p.endsWith('.K'));
  const abundance = Math.max(0, ...abundances.map(({ value }) => value)) || 1;
  if (path.endsWith('effort')) return rate;
  if (path.endsWith('quota') || path.endsWith('stocking')) return rate * abundance;
  if (path.endsWith('alpha12') || path.endsWith('alpha21')) return 1;
  return path.endsWith('b12') || path.endsWith('b21') || path.endsWith('selfLimitation') ? rate / abundance : 1;
}

/**
 * Shift of an equilibrium with each parameter: -J^-1 df/dp, by the implicit function theorem.
 * @param spec a model without issues
 * @param at an equilibrium of it
 * @param paths parameters as parametersOf lists them
 * @returns one entry a path, in order; for an equilibrium on an invariant axis the absent species stays absent
 * @throws RangeError for an unknown path
 * @source strogatz2015 §8.1
 */
export function equilibriumSensitivity(
  spec: ModelSpec,
  at: { x: number; y: number },
  paths: readonly string[]
): EquilibriumSensitivity[] {
  const { x, y } = at;
  const j = new Float64Array(4);
  compile(spec).jacobian(x, y, j);
  const [a, b, c, d] = j as unknown as [number, number, number, number];
  const determinant = a * d - b * c;
  const rates = new Float64Array(2);
  return paths.map((path) => {
    const [f1 = 0, f2 = 0] = difference(spec, path, (changed) => {
      compile(changed).rhs(x, y, rates);
      return [...rates];
    });
    // On an invariant axis the absent species decides nothing, not even at a fold across it.
    if (y === 0 && f2 === 0 && c === 0) return { path, dx: x === 0 && f1 === 0 ? 0 : -f1 / a + 0, dy: 0 };
    if (x === 0 && f1 === 0 && b === 0) return { path, dx: 0, dy: -f2 / d + 0 };
    // Minus a numerator of 0 is printed as 0, not as -0.
    return { path, dx: (b * f2 - d * f1) / determinant + 0, dy: (c * f1 - a * f2) / determinant + 0 };
  });
}

/**
 * Shift of both eigenvalues with each parameter, the equilibrium moving along.
 * @returns one entry a path, in order; not finite where the eigenvalues coincide or the equilibrium is at a fold
 * @throws RangeError for an unknown path
 */
export function eigenvalueSensitivity(
  spec: ModelSpec,
  at: { x: number; y: number },
  paths: readonly string[]
): EigenvalueSensitivity[] {
  const shifts = equilibriumSensitivity(spec, at, paths);
  const j = new Float64Array(4);
  compile(spec).jacobian(at.x, at.y, j);
  const trace = j[0]! + j[3]!;
  const determinant = j[0]! * j[3]! - j[1]! * j[2]!;
  const discriminant = trace ** 2 - 4 * determinant;
  const root = Math.sqrt(Math.abs(discriminant));
  return shifts.map(({ path, dx, dy }) => {
    // Along the moving equilibrium: J(p + s, x + s dx) is differentiated in s.
    const [dTrace = 0, dDeterminant = 0] = difference(spec, path, (changed, change) => {
      compile(changed).jacobian(at.x + change * dx, at.y + change * dy, j);
      return [j[0]! + j[3]!, j[0]! * j[3]! - j[1]! * j[2]!];
    });
    const dDiscriminant = 2 * trace * dTrace - 4 * dDeterminant;
    const half = dDiscriminant / (4 * root);
    if (discriminant < 0) {
      return {
        path,
        derivatives: [
          { re: dTrace / 2, im: -half },
          { re: dTrace / 2, im: half }
        ]
      };
    }
    return {
      path,
      derivatives: [
        { re: dTrace / 2 + half, im: 0 },
        { re: dTrace / 2 - half, im: 0 }
      ]
    };
  });
}
