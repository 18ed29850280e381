import type { RatePath } from '$lib/contracts/content';
import {
  eigenvalueSensitivity,
  equilibriumSensitivity,
  parametersOf,
  withParameter,
  type EquilibriaReport,
  type ModelSpec
} from '$lib/dynamics';
import type { Assembled } from './assemble';
import type { RareGrowth } from './invasions';
import { pointsOf, type LetteredPoint, type PointErrors } from './points';

/**
 * Standard errors of results by the delta method: var(Y) = Σ (∂Y/∂p)² var(p), the estimates being independent. Exact
 * numbers add nothing. For an r typed in the crowding form the independent estimates are a and K, with r = a·K.
 * First order: right where an error moves the answer along a straight line, too small near a fold.
 */

type Resolved = Assembled['resolved'];

/** One independent estimate: its standard error, and how far each parameter of the model moves with it. */
interface Estimate {
  se: number;
  moves: Map<string, number>;
}

function estimatesOf(model: ModelSpec, resolved: Resolved): Estimate[] {
  const present = new Set(parametersOf(model).map((parameter) => parameter.path));
  const estimates = new Map<RatePath, Estimate>();
  for (const rate of Object.values(resolved)) {
    if (!present.has(rate.path)) continue;
    if (rate.crowding) {
      const capacity = resolved[capacityOf(rate.path)];
      estimates.set(rate.path, { se: rate.crowding.se ?? 0, moves: new Map([[rate.path, capacity?.value ?? 0]]) });
    } else {
      estimates.set(rate.path, { se: rate.se ?? 0, moves: new Map([[rate.path, 1]]) });
    }
  }
  for (const rate of Object.values(resolved)) {
    if (rate.crowding) estimates.get(capacityOf(rate.path))?.moves.set(rate.path, rate.crowding.value);
  }
  return [...estimates.values()].filter((estimate) => estimate.se > 0);
}

const capacityOf = (path: RatePath): RatePath => (path.startsWith('first') ? 'first.growth.K' : 'second.growth.K');

/** @param slope derivative of the result with respect to a parameter of the model. Null where an error is not finite. */
function combine(estimates: readonly Estimate[], slope: (path: string) => number): number | null {
  if (estimates.length === 0) return null;
  let variance = 0;
  for (const { se, moves } of estimates) {
    let total = 0;
    for (const [path, weight] of moves) total += slope(path) * weight;
    variance += (total * se) ** 2;
  }
  return Number.isFinite(variance) ? Math.sqrt(variance) : null;
}

function pathsIn(estimates: readonly Estimate[]): string[] {
  return [...new Set(estimates.flatMap((estimate) => [...estimate.moves.keys()]))];
}

/**
 * Standard errors of the levels of one equilibrium, in abundance.
 * @returns null for a species that is absent there, where no rate has an error, or at a fold.
 */
export function equilibriumSE(model: ModelSpec, at: { x: number; y: number }, resolved: Resolved): PointErrors {
  const estimates = estimatesOf(model, resolved);
  const slopes = new Map(equilibriumSensitivity(model, at, pathsIn(estimates)).map((each) => [each.path, each]));
  const along = (key: 'dx' | 'dy') => combine(estimates, (path) => slopes.get(path)?.[key] ?? Number.NaN);
  return { seX: at.x > 0 ? along('dx') : null, seY: at.y > 0 ? along('dy') : null };
}

/** Standard error of the real and imaginary part of both eigenvalues, 1/time, in the order of the report. */
export function eigenvalueSE(
  model: ModelSpec,
  at: { x: number; y: number },
  resolved: Resolved
): [{ re: number | null; im: number | null }, { re: number | null; im: number | null }] {
  const estimates = estimatesOf(model, resolved);
  const slopes = new Map(
    eigenvalueSensitivity(model, at, pathsIn(estimates)).map((each) => [each.path, each.derivatives])
  );
  const of = (index: 0 | 1, part: 're' | 'im') =>
    combine(estimates, (path) => slopes.get(path)?.[index][part] ?? Number.NaN);
  return [
    { re: of(0, 're'), im: of(0, 'im') },
    { re: of(1, 're'), im: of(1, 'im') }
  ];
}

/** A state held by a quota is an equilibrium of the model without that quota, the species being gone. */
function withoutHeldQuotas(model: ModelSpec, point: LetteredPoint): ModelSpec {
  return (point.absorbing?.held ?? []).reduce((spec, key) => withParameter(spec, `${key}.removal.quota`, 0), model);
}

/** Standard errors of every point of a report, by letter: what `pointParagraph` and `factsFor` take. */
export function errorsOf(model: ModelSpec, report: EquilibriaReport, resolved: Resolved): Record<string, PointErrors> {
  return Object.fromEntries(
    pointsOf(report).map((point) => [point.letter, equilibriumSE(withoutHeldQuotas(model, point), point, resolved)])
  );
}

/** Standard error of the growth of an invader when rare, 1/time; null where it cannot be told apart or has none. */
export function invasionSE(
  model: ModelSpec,
  report: EquilibriaReport,
  invasion: RareGrowth,
  resolved: Resolved
): number | null {
  const point = pointsOf(report).find((candidate) => candidate.letter === invasion.letter);
  if (!point?.equilibrium) return null;
  // With the invader absent the Jacobian is triangular, so that its growth when rare is one of the two eigenvalues.
  const [first, second] = point.equilibrium.eigenvalues;
  const index = Math.abs(first.re - invasion.rate) <= Math.abs(second.re - invasion.rate) ? 0 : 1;
  return eigenvalueSE(model, point, resolved)[index].re;
}
