/**
 * Follows a model piece by piece: where a quota exhausts a species, or a stocked one has settled in, the equations or the
 * coordinates change and the integration starts again from there.
 */
import type { SpeciesKey, System } from '../model/spec';
import { integrate } from '../solve/integrate';
import type { EventSpec, Outcome, Solution } from '../solve/problem';
import { coordinatesFor, formFor, netAdditionOf, type Coordinates, type Form, type Forms } from './coordinates';

/** Something the caller wants to hear of; the path ends there when `spec.terminal`. */
export interface Watched<T> {
  spec: EventSpec;
  tag: T;
}

export interface PathRequest<T> {
  start: { x: number; y: number };
  /** Species already held at 0 by their quota; worked out from the start when absent. */
  forms?: Forms;
  span: readonly [number, number];
  /** Tolerances of the steps, relative and absolute in abundance. */
  rtol: number;
  atol: number;
  /** Output times; an empty list for none. */
  times: Float64Array;
  maxSteps: number;
  shouldStop?: (() => boolean) | undefined;
  /** What to watch for in the coordinates of the coming piece. */
  watch?: (c: Coordinates) => Watched<T>[];
  /** Called with every piece, in order. */
  onPiece?: (solution: Solution, c: Coordinates) => void;
}

export type PathMoment<T> = { t: number; x: number; y: number } &
  /** `from` is the abundance just before: above 0 only for a species that is gone in an instant. */
  ({ kind: 'ran out'; species: SpeciesKey; from: number } | { kind: 'watched'; tag: T });

export interface Path<T> {
  /** `event` when a watched terminal event ended the path: the last of `moments`. */
  outcome: { status: 'reached' } | { status: 'event' } | Extract<Outcome, { status: 'failed' }>;
  moments: PathMoment<T>[];
  t: number;
  x: number;
  y: number;
  forms: Forms;
  steps: { accepted: number; rejected: number; evaluations: number };
  stiff: boolean;
}

const LARGEST = 1e300;
/** A ceiling that follows the resource collapses with it; the last part of the way is the same to any accuracy asked. */
const COLLAPSE = 1e-12;
/** A species stocked from nothing is followed by its logarithm once this share of the span's stocking has built up. */
const SETTLED = 1e-3;

type Own = 'ran out 0' | 'ran out 1' | 'overflow' | 'settled in';

/** A reader of one coordinate less a level of abundance. */
export function levelOf(c: Coordinates, species: 0 | 1, level: number): EventSpec['value'] {
  const target = c.forms[species] === 'log' ? Math.log(level) : level;
  return (_, z) => z[species]! - target;
}

/**
 * @param system a compiled model. @param request start, span, tolerances, what to watch; see PathRequest.
 * @returns the moments met and where the path ended. Failures of the mathematics are values.
 * @throws RangeError for a span or tolerances that make no sense.
 */
export function followPath<T>(system: System, request: PathRequest<T>): Path<T> {
  const { spec } = system;
  const net = [netAdditionOf(spec, 'first'), netAdditionOf(spec, 'second')] as const;
  const [t0, t1] = request.span;
  const followsResource =
    spec.interaction === 'consumer-resource' && spec.second.growth?.kind === 'leslie' && net[0] < 0;
  const floor = followsResource ? COLLAPSE * request.start.x : 0;

  const ownEvents = (c: Coordinates): Watched<Own>[] => {
    const list: Watched<Own>[] = [];
    for (const i of [0, 1] as const) {
      const form = c.forms[i];
      if (form === 'zero') continue;
      list.push({
        spec: { value: levelOf(c, i, LARGEST), direction: 1, terminal: true, betweenSteps: true },
        tag: 'overflow'
      });
      if (form !== 'plain') continue;
      if (net[i] < 0 && t1 >= t0) {
        const value = levelOf(c, i, i === 0 ? floor : 0);
        list.push({
          spec: { value, direction: -1, terminal: true, betweenSteps: true },
          tag: i === 0 ? 'ran out 0' : 'ran out 1'
        });
      } else if (net[i] > 0) {
        const value = levelOf(c, i, SETTLED * Math.abs(t1 - t0) * net[i]);
        list.push({ spec: { value, direction: 1, terminal: true, betweenSteps: true }, tag: 'settled in' });
      }
    }
    return list;
  };

  let { x, y } = request.start;
  let t = t0;
  let forms: [Form, Form] = request.forms ? [...request.forms] : [formFor(x, net[0]), formFor(y, net[1])];
  let done = 0;
  const path: Path<T> = {
    outcome: { status: 'reached' },
    moments: [],
    t,
    x,
    y,
    forms,
    steps: { accepted: 0, rejected: 0, evaluations: 0 },
    stiff: false
  };

  for (;;) {
    const c = coordinatesFor(system, forms);
    const own = ownEvents(c);
    const watched = request.watch?.(c) ?? [];
    const z = new Float64Array(2);
    c.fromPlane(x, y, z);
    const solution = integrate(
      {
        rhs: c.rhs,
        jacobian: c.jacobian,
        y0: z,
        span: [t, t1],
        events: [...own.map((w) => w.spec), ...watched.map((w) => w.spec)]
      },
      {
        ...c.tolerances(request.rtol, request.atol),
        times: request.times.subarray(done),
        maxSteps: request.maxSteps - path.steps.accepted - path.steps.rejected,
        ...(request.shouldStop && { shouldStop: request.shouldStop })
      }
    );
    done += solution.t.length;
    request.onPiece?.(solution, c);
    path.steps.accepted += solution.steps.accepted;
    path.steps.rejected += solution.steps.rejected;
    path.steps.evaluations += solution.steps.evaluations;
    path.stiff ||= solution.stiff;
    for (const event of solution.events) {
      const seen = watched[event.event - own.length];
      if (seen) path.moments.push({ t: event.t, x: c.x(event.y), y: c.y(event.y), kind: 'watched', tag: seen.tag });
    }
    t = solution.tEnd;
    x = c.x(solution.yEnd);
    y = c.y(solution.yEnd);
    const { outcome } = solution;
    const stop = outcome.status === 'event' ? own[outcome.event]?.tag : undefined;
    if (stop === undefined || stop === 'overflow') {
      if (stop === 'overflow') path.outcome = { status: 'failed', reason: 'notFinite', t };
      else path.outcome = outcome.status === 'event' ? { status: 'event' } : outcome;
      return Object.assign(path, { t, x, y, forms });
    }
    if (stop === 'settled in') {
      const settle = (form: Form, n: number, i: 0 | 1): Form => (form === 'zero' ? form : formFor(n, net[i]));
      forms = [settle(forms[0], x, 0), settle(forms[1], y, 1)];
    } else if (stop === 'ran out 0') {
      x = 0;
      path.moments.push({ t, x, y, kind: 'ran out', species: 'first', from: 0 });
      forms = ['zero', forms[1]];
      if (followsResource) {
        // The consumer's ceiling is a multiple of nothing: it is gone in the same instant, and so is what is stocked later.
        if (y > 0) path.moments.push({ t, x, y: 0, kind: 'ran out', species: 'second', from: y });
        y = 0;
        forms = ['zero', 'zero'];
      }
    } else {
      y = 0;
      path.moments.push({ t, x, y, kind: 'ran out', species: 'second', from: 0 });
      forms = [forms[0], 'zero'];
    }
  }
}
