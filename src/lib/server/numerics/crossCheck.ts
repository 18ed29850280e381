/** A second opinion on a trajectory: the same model through another method, written by others. */
import {
  compile,
  coordinatesFor,
  formFor,
  netAdditionOf,
  type Form,
  type ModelSpec,
  type TrajectoryResult
} from '$lib/dynamics';
import { Outcome, Solver } from 'odex';

export interface CrossCheck {
  method: 'odex';
  /**
   * Largest difference at any output time, each species relative to the largest abundance it reaches on the path; null
   * when the other method could not finish, and `reason` says why. Deep dips therefore count by what they do to the path
   * afterwards, not by their own ratio.
   */
  largestRelativeDifference: number | null;
  reason: string | null;
}

export interface CrossCheckOptions {
  /** The accuracy the trajectory was asked for; the check runs a hundred times tighter, within reason. */
  rtol?: number;
  atol?: number;
  /** Most evaluations of the right-hand side, default 400 000. */
  maxEvaluations?: number;
  /** Most milliseconds, default 3000. */
  budgetMs?: number;
}

/** Extrapolation gains nothing from tolerances nearer to rounding than this. */
const TIGHTEST = 1e-12;
/** Ends an integration from inside a callback; never leaves this module. */
class OutOfBudget extends Error {}

/** What the engine says of its path between two moments at which the equations change. */
interface Leg {
  from: number;
  to: number;
  forms: [Form, Form];
}

function legsOf(spec: ModelSpec, result: TrajectoryResult): Leg[] {
  const x = result.x[0] ?? 0;
  const y = result.y[0] ?? 0;
  let forms: [Form, Form] = [formFor(x, netAdditionOf(spec, 'first')), formFor(y, netAdditionOf(spec, 'second'))];
  let from = result.t[0] ?? 0;
  const legs: Leg[] = [];
  for (const event of result.events) {
    if (event.kind !== 'ran out') continue;
    if (event.t !== from || legs.length === 0) legs.push({ from, to: event.t, forms });
    from = event.t;
    forms = event.species === 'first' ? ['zero', forms[1]] : [forms[0], 'zero'];
  }
  return [...legs, { from, to: result.t.at(-1) ?? from, forms }];
}

/**
 * Integrates the model again with an extrapolation method and compares at the output times.
 * @param spec the model. @param result what `simulate` gave for it, from its first output time on.
 * @returns the difference, or why there is none. Never throws for numerical reasons and never runs past its budget.
 * @source hairer1993 §II.9 (the other method)
 */
export function crossCheck(spec: ModelSpec, result: TrajectoryResult, options: CrossCheckOptions = {}): CrossCheck {
  const none = (reason: string): CrossCheck => ({ method: 'odex', largestRelativeDifference: null, reason });
  if (result.t.length < 2) return none('There is nothing to compare.');
  if (result.steps.accepted === 0) return none('The path stays at its start: there was nothing to integrate.');
  const rtol = Math.max(TIGHTEST, (options.rtol ?? 1e-8) * 1e-2);
  const atol = (options.atol ?? 1e-10) * 1e-2;
  const maxEvaluations = options.maxEvaluations ?? 400_000;
  const deadline = Date.now() + (options.budgetMs ?? 3000);
  const system = compile(spec);
  const largestX = Math.max(...result.x);
  const largestY = Math.max(...result.y);
  let evaluations = 0;
  let difference = 0;
  let next = 0;
  let x = result.x[0] ?? 0;
  let y = result.y[0] ?? 0;
  const compare = (otherX: number, otherY: number, i: number): void => {
    if (largestX > 0) difference = Math.max(difference, Math.abs(otherX - (result.x[i] ?? NaN)) / largestX);
    if (largestY > 0) difference = Math.max(difference, Math.abs(otherY - (result.y[i] ?? NaN)) / largestY);
  };

  try {
    for (const leg of legsOf(spec, result)) {
      const c = coordinatesFor(system, leg.forms);
      const state = new Float64Array(2);
      const slope = new Float64Array(2);
      const direction = leg.to < leg.from ? -1 : 1;
      const due = (limit: number): boolean =>
        next < result.t.length && direction * (limit - (result.t[next] ?? Infinity)) >= 0;
      while (due(leg.from)) compare(x, y, next++);
      if (leg.to === leg.from) continue;
      c.fromPlane(x, y, state);
      const solver = new Solver(2);
      const tolerances = c.tolerances(rtol, atol);
      // The package wants every tolerance above 0.
      solver.relativeTolerance = tolerances.rtol.map((v) => Math.max(v, 1e-16));
      solver.absoluteTolerance = tolerances.atol;
      solver.initialStepSize = Math.abs(leg.to - leg.from) * 1e-4;
      solver.maxSteps = maxEvaluations;
      solver.denseOutput = true;
      const derivative = (t: number, z: number[]): number[] => {
        evaluations += 1;
        if (evaluations > maxEvaluations) throw new OutOfBudget('It needed too many steps.');
        if (evaluations % 4096 === 0 && Date.now() > deadline) throw new OutOfBudget('It took too long.');
        state[0] = z[0] ?? NaN;
        state[1] = z[1] ?? NaN;
        c.rhs(t, state, slope);
        if (!Number.isFinite(slope[0]) || !Number.isFinite(slope[1])) {
          throw new OutOfBudget('It left the range of numbers.');
        }
        return [slope[0] ?? NaN, slope[1] ?? NaN];
      };
      const solved = solver.solve(
        derivative,
        leg.from,
        [state[0] ?? NaN, state[1] ?? NaN],
        leg.to,
        (_, __, t, z, dense) => {
          while (due(t)) {
            const time = result.t[next] ?? NaN;
            const inside = dense !== undefined && time !== t;
            state[0] = inside ? dense(0, time) : (z[0] ?? NaN);
            state[1] = inside ? dense(1, time) : (z[1] ?? NaN);
            compare(c.x(state), c.y(state), next++);
          }
        }
      );
      if (solved.outcome !== Outcome.Converged) return none('It needed too many steps.');
      state[0] = solved.y[0] ?? NaN;
      state[1] = solved.y[1] ?? NaN;
      x = c.x(state);
      y = c.y(state);
    }
    while (next < result.t.length) compare(x, y, next++);
  } catch (error) {
    if (error instanceof OutOfBudget) return none(error.message);
    throw error;
  }
  return Number.isFinite(difference)
    ? { method: 'odex', largestRelativeDifference: difference, reason: null }
    : none('It left the range of numbers.');
}
