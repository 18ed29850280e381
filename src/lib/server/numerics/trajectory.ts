import type { TrajectoryRequest } from '$lib/contracts/trajectory';
import { simulate, type ModelSpec, type TrajectoryEvent, type TrajectoryResult } from '$lib/dynamics';
import { refusal } from '../errors';
import { crossCheck, type CrossCheck } from './crossCheck';
import { deadline } from './deadline';
import { refuseModel } from './refuseModel';

/** A trajectory on the wire. */
export interface TrajectoryAnswer {
  t: number[];
  x: number[];
  y: number[];
  events: TrajectoryEvent[];
  steps: TrajectoryResult['steps'];
  crossCheck: CrossCheck;
  /** What to keep in mind, in one sentence; null when there is nothing to say. */
  remark: string | null;
  engine: string;
}

/**
 * Follows a model from a start and checks the path by a second method.
 * Throws 422 for a model whose parts do not go together, and where the end cannot be reached to the accuracy asked for: a
 * path that grows beyond all numbers, or one that would take too long. The refusal says how far it came.
 */
export function computeTrajectory(request: TrajectoryRequest): TrajectoryAnswer {
  refuseModel(request.model);
  const { model, start, span, samples, times, rtol, atol, thresholds } = request;
  const result = simulate(model, {
    start,
    span,
    ...(times ? { times } : { samples }),
    rtol,
    // A tolerance of 0 asks for relative accuracy alone.
    atol: atol === 0 ? Number.MIN_VALUE : atol,
    thresholds,
    shouldStop: deadline()
  });
  requireReached(result);
  const check = checkPath(model, result, { rtol, atol });
  const { t, x, y, events, steps, remark, engine } = result;
  return { t, x, y, events, steps, crossCheck: check, remark, engine };
}

/** Milliseconds that the second opinion on one path may take. */
export const CHECK_MS = 1000;

/** The path by the other method, within `budgetMs`; without any time left it says that it took too long. */
export function checkPath(
  model: ModelSpec,
  result: TrajectoryResult,
  { rtol, atol }: { rtol: number; atol: number },
  budgetMs = CHECK_MS
): CrossCheck {
  if (budgetMs <= 0) return { method: 'odex', largestRelativeDifference: null, reason: 'It took too long.' };
  return crossCheck(model, result, { rtol, atol, budgetMs });
}

/** Throws the refusal of a path that did not reach its end. */
export function requireReached(result: TrajectoryResult): void {
  const { outcome } = result;
  if (outcome.status !== 'failed') return;
  const code = outcome.reason === 'budget' || outcome.reason === 'tooManySteps' ? 'engine.tooLong' : 'engine.failed';
  const message = `The run stopped at time ${Number(outcome.t.toPrecision(6))}: ${REASONS[outcome.reason]}`;
  throw refusal(code, { message, issues: [{ path: 'span.1', message }] });
}

const REASONS = {
  notFinite: 'an abundance grows beyond all numbers there. Shorten the run, or give the growth a limit.',
  stepTooSmall: 'the model changes too abruptly there to be followed. Shorten the run, or look at the rates.',
  tooManySteps: 'it would take too many steps to go on. Shorten the run, or ask for less accuracy.',
  budget: 'it was taking too long. Shorten the run, or ask for less accuracy.',
  stiff: 'the rates differ too widely in speed. Shorten the run, or look at the rates.'
} as const;
