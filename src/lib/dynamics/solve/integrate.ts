/** The driver: alone it knows steps, control, output, events and budgets. */
import { firstStep, makeStepControl, tolerancesFor } from './control';
import { makeEventTracker, type FoundEvent } from './events';
import { makeRecorder } from './recorder';
import type { Outcome, Problem, Solution, SolveOptions } from './problem';
import { makeRadau } from './radau';
import { makeDormandPrince } from './step';

/**
 * Beyond this |h lambda| the step is held by stability: the region ends at 3.3 on the real axis, but at tight tolerances
 * the fast mode spoils the error estimate well before. Steps held by accuracy alone stay below 1.
 */
const STABILITY_EDGE = 1.25;
/** Steps at the edge, not broken by six calm ones, that make a stretch. */
const STRETCH = 15;
const CALM = 6;
/**
 * A solution that has settled is always at the edge, which costs a few steps and means nothing; the system is called
 * stiff when the rest of the way would take more than this many steps of that size.
 */
const STIFF_REMAINDER = 1000;
/** Where the implicit method, some ten times dearer a step, begins to pay. */
const IMPLICIT_REMAINDER = 4000;
/** Implicit steps this much longer than the explicit ones were show that stability was what held those. */
const STIFF_GAIN = 20;
/** After this many steps an estimate of how many are still to come is trusted. */
const FORECAST_AFTER = 500;
const POLL_EVERY = 256;

/**
 * Integrates a system of ordinary differential equations.
 * @param problem right-hand side for n components, initial state, span (backwards when t1 < t0), events.
 * @param options tolerances, output times, budgets; see SolveOptions.
 * @returns states at the requested times actually reached, or at the steps when none were requested; events in the order
 *   met; the outcome. A failure of the mathematics is a value: what was reached before it is returned.
 * @throws RangeError for a span, tolerance or output time that is not a number.
 * @source dormandPrince1980, hairer1993 §II.4–6, hairer1996 §IV.2 and §IV.8, gustafsson1991
 */
export function integrate(problem: Problem, options: SolveOptions = {}): Solution {
  const [t0, t1] = problem.span;
  if (!Number.isFinite(t0) || !Number.isFinite(t1)) throw new RangeError('the span must be two finite numbers');
  const n = problem.y0.length;
  const y = Float64Array.from(problem.y0);
  const direction = t1 < t0 ? -1 : 1;
  const length = Math.abs(t1 - t0);
  const longest = Math.min(options.maxStep ?? length, length);
  const maxSteps = options.maxSteps ?? 200_000;
  const tolerances = tolerancesFor(n, options.rtol ?? 1e-8, options.atol ?? 1e-10);
  const specs = problem.events ?? [];
  const choice = options.fixedStep === undefined ? (options.method ?? 'auto') : (options.method ?? 'dormand-prince');

  let kind: Solution['method'] = choice === 'radau' ? 'radau' : 'dormand-prince';
  let method = kind === 'radau' ? makeRadau(problem, n, tolerances) : makeDormandPrince(problem.rhs, n, tolerances);
  let control = kind === 'radau' ? makeStepControl(1 / 6, 0) : makeStepControl();
  const tracker = specs.length > 0 ? makeEventTracker(specs, n) : null;
  const recorder = makeRecorder(n, direction, options.times, options.dense === true);

  const events: FoundEvent[] = [];
  let accepted = 0;
  let rejected = 0;
  let evaluationsBefore = 0;
  let edge = 0;
  let calm = 0;
  let stiff = false;
  let explicitSize = Infinity;
  let unfinite = false;
  let t = t0;
  let outcome: Outcome | null = null;

  let taken = 0;
  const prepare = (): void => method.prepare(y, taken);
  const finish = (result: Outcome): Solution => ({
    outcome: result,
    ...recorder.result(),
    events,
    steps: { accepted, rejected, evaluations: evaluationsBefore + method.evaluations },
    stiff,
    method: kind,
    tEnd: t,
    yEnd: y
  });

  recorder.begin(t, y);
  tracker?.begin(t, y);
  if (length === 0) return finish({ status: 'reached' });
  method.begin(t, y);
  if (!method.slope.every(Number.isFinite)) return finish({ status: 'failed', reason: 'notFinite', t });
  let size =
    options.fixedStep ?? firstStep(problem.rhs, t, y, method.slope, direction, longest, method.order, tolerances);
  evaluationsBefore += 1;

  while (outcome === null) {
    const tried = accepted + rejected;
    if (tried >= maxSteps) outcome = { status: 'failed', reason: 'tooManySteps', t };
    else if (tried % POLL_EVERY === 0 && options.shouldStop?.()) outcome = { status: 'failed', reason: 'budget', t };
    else if (size < 8 * Number.EPSILON * Math.max(Math.abs(t), length * 1e-6)) {
      outcome = { status: 'failed', reason: unfinite ? 'notFinite' : 'stepTooSmall', t };
    }
    if (outcome !== null) break;

    const remaining = Math.abs(t1 - t);
    // Stretched by up to a hundredth rather than leave a sliver of a step at the end.
    const isLast = size * 1.01 >= remaining;
    const h = direction * (isLast ? remaining : size);
    const error = method.attempt(t, y, h);
    if (!(error <= 1) && options.fixedStep === undefined) {
      rejected += 1;
      unfinite = !Number.isFinite(error);
      size = Math.abs(h) * control.afterRejected(error);
      continue;
    }

    accepted += 1;
    unfinite = false;
    const tNext = isLast ? t1 : t + h;
    taken = h;
    if (recorder.needs(tNext)) method.prepare(y, h);
    if (tracker !== null) {
      for (const event of tracker.scan(t, h, method.y1, method.interpolate, prepare)) {
        events.push(event);
        if (specs[event.event]!.terminal) outcome = { status: 'event', event: event.event, t: event.t };
      }
    }
    if (outcome?.status === 'event') {
      const last = events[events.length - 1]!;
      recorder.step(t, h, last.t, last.y, method);
      t = last.t;
      y.set(last.y);
      break;
    }
    recorder.step(t, h, tNext, method.y1, method);

    if (kind === 'dormand-prince') {
      const left = Math.abs(t1 - tNext) / Math.abs(h);
      if (method.stiffness(h) > STABILITY_EDGE) {
        calm = 0;
        edge += 1;
        if (edge >= STRETCH && left > STIFF_REMAINDER) stiff = true;
      } else if (++calm >= CALM) edge = 0;
      const overBudget = accepted >= FORECAST_AFTER && left > maxSteps - tried;
      if (choice === 'auto' && (overBudget || (stiff && edge >= STRETCH && left > IMPLICIT_REMAINDER))) {
        evaluationsBefore += method.evaluations;
        y.set(method.y1);
        method = makeRadau(problem, n, tolerances);
        control = makeStepControl(1 / 6, 0);
        kind = 'radau';
        t = tNext;
        size = Math.abs(h);
        explicitSize = size;
        method.begin(t, y);
        continue;
      }
    } else if (Math.abs(h) > STIFF_GAIN * explicitSize) stiff = true;

    method.accept(tNext, y, h);
    for (let i = 0; i < n; i++) y[i] = method.y1[i]!;
    t = tNext;
    if (isLast) outcome = { status: 'reached' };
    else if (options.fixedStep === undefined) size = Math.min(longest, Math.abs(h) * control.afterAccepted(error));
  }
  if (outcome.status === 'reached' && tracker !== null) {
    for (const event of tracker.finish()) {
      events.push(event);
      if (specs[event.event]!.terminal) outcome = { status: 'event', event: event.event, t: event.t };
    }
  }
  return finish(outcome);
}
