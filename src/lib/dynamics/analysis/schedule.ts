/** Animals added or taken at set times: the path stops at each, jumps, and starts again from there. */
import type { ModelSpec, SpeciesKey } from '../model/spec';
import type { TrajectoryEvent, TrajectoryOptions, TrajectoryResult } from './trajectory';

/** One act at one time. Exactly one of `add`, `remove` and `removeShare` is given. */
export interface Pulse {
  t: number;
  species: SpeciesKey;
  /** Abundance added, >= 0. */
  add?: number;
  /** Abundance taken, >= 0; what is not there is not taken. */
  remove?: number;
  /** Share taken, 0 to 1. */
  removeShare?: number;
}

/** What a pulse came to. */
export interface AppliedPulse {
  t: number;
  species: SpeciesKey;
  before: number;
  after: number;
}

type Run = (spec: ModelSpec, options: TrajectoryOptions) => TrajectoryResult;

function requireSchedule(schedule: readonly Pulse[], [t0, t1]: readonly [number, number]): void {
  if (!(t1 > t0)) throw new RangeError('A schedule needs a span that ends after it starts.');
  for (const { t, add, remove, removeShare } of schedule) {
    if (!(t >= t0 && t <= t1)) throw new RangeError(`The pulse at ${t} lies outside the span.`);
    const given = [add, remove, removeShare].filter((amount) => amount !== undefined);
    const [amount] = given;
    if (given.length !== 1 || !Number.isFinite(amount) || !(amount! >= 0)) {
      throw new RangeError(`The pulse at ${t} must give one of add, remove and removeShare, 0 or more.`);
    }
    if (removeShare !== undefined && !(removeShare <= 1)) throw new RangeError(`At ${t} more than all would be taken.`);
  }
}

function afterPulse(n: number, { add, remove, removeShare }: Pulse): number {
  if (add !== undefined) return n + add;
  if (remove !== undefined) return Math.max(0, n - remove);
  // Taking all leaves nothing, whatever rounding makes of 1 - 1.
  return removeShare === 1 ? 0 : n * (1 - (removeShare ?? 0));
}

/** Levels passed in the instant of a pulse. */
function crossed(pulse: AppliedPulse, options: TrajectoryOptions): TrajectoryEvent[] {
  const { t, species, before, after } = pulse;
  const events = (options.thresholds ?? []).flatMap((threshold): TrajectoryEvent[] => {
    if (threshold.species !== species) return [];
    const { below, above } = threshold;
    const list: TrajectoryEvent[] = [];
    if (below !== undefined && before >= below && after < below)
      list.push({ t, species, kind: 'fell below', value: below });
    if (above !== undefined && before <= above && after > above)
      list.push({ t, species, kind: 'rose above', value: above });
    return list;
  });
  if (before > 0 && after === 0) events.push({ t, species, kind: 'ran out', value: 0 });
  return events;
}

/**
 * Follows a path through scheduled additions and removals.
 * @param times output times, in order
 * @param schedule acts inside the span, in any order; those of one time are done in the order given
 * @param run follows one stretch without a schedule
 * @returns as `run` does, with what each act came to. An output time at a pulse shows the state after it. A species taken to
 *   0 has run out, and stays away until it is stocked or added again. Failures of the mathematics are values.
 * @throws RangeError for an act outside the span, or one that is not exactly one of the three kinds
 */
export function simulateSchedule(
  spec: ModelSpec,
  options: TrajectoryOptions,
  times: readonly number[],
  schedule: readonly Pulse[],
  run: Run
): TrajectoryResult & { pulses: AppliedPulse[] } {
  const { span } = options;
  requireSchedule(schedule, span);
  const ordered = schedule
    .map((pulse, order) => ({ pulse, order }))
    .sort((a, b) => a.pulse.t - b.pulse.t || a.order - b.order);
  const stops = [...new Set(ordered.map(({ pulse }) => pulse.t))];
  const state = { ...options.start };
  const whole: TrajectoryResult & { pulses: AppliedPulse[] } = {
    t: [],
    x: [],
    y: [],
    events: [],
    steps: { accepted: 0, rejected: 0, evaluations: 0 },
    outcome: { status: 'reached' },
    remark: null,
    stiff: false,
    engine: '',
    pulses: []
  };
  let from = span[0];
  const ends = stops.includes(span[1]) ? stops : [...stops, span[1]];
  const maxSteps = options.maxSteps ?? 200_000;
  for (const to of ends) {
    const last = to === span[1] && !stops.includes(to);
    const own = times.filter((t) => t >= from && (last ? t <= to : t < to));
    if (to > from || last) {
      const { samples: _, ...rest } = options;
      const piece = run(spec, {
        ...rest,
        start: { ...state },
        span: [from, to],
        times: own.at(-1) === to ? own : [...own, to],
        maxSteps: Math.max(1, maxSteps - whole.steps.accepted - whole.steps.rejected)
      });
      const kept = own.length;
      whole.t.push(...piece.t.slice(0, kept));
      whole.x.push(...piece.x.slice(0, kept));
      whole.y.push(...piece.y.slice(0, kept));
      whole.events.push(...piece.events);
      for (const key of ['accepted', 'rejected', 'evaluations'] as const) whole.steps[key] += piece.steps[key];
      whole.stiff ||= piece.stiff;
      whole.remark = piece.remark ?? whole.remark;
      whole.engine = piece.engine;
      if (piece.outcome.status !== 'reached') return { ...whole, outcome: piece.outcome };
      state.x = piece.x.at(-1) ?? state.x;
      state.y = piece.y.at(-1) ?? state.y;
    }
    for (const { pulse } of ordered) {
      if (pulse.t !== to) continue;
      const axis = pulse.species === 'first' ? 'x' : 'y';
      const applied = { t: to, species: pulse.species, before: state[axis], after: afterPulse(state[axis], pulse) };
      state[axis] = applied.after;
      whole.pulses.push(applied);
      whole.events.push(...crossed(applied, options));
    }
    if (to === span[1] && !last) {
      // Nothing is left to integrate: the end of the span shows what the last pulse left.
      for (const t of times.filter((time) => time === to)) {
        whole.t.push(t);
        whole.x.push(state.x);
        whole.y.push(state.y);
      }
    }
    from = to;
  }
  return whole;
}
