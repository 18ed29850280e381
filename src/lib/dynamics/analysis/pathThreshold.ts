/**
 * How far a lever may be set before the path from a given start loses a species. A resting point that still exists says
 * nothing about that: the path from today may leave its basin at a far smaller value than the one at which the point goes.
 */
import { compile } from '../model/compile';
import { withParameter } from '../model/parameters';
import type { ModelSpec, SpeciesKey } from '../model/spec';
import type { Coordinates } from './coordinates';
import { followPath, levelOf, type Watched } from './path';
import { requireRange } from './thresholds';

export interface PathThresholdOptions {
  /** Time over which the path has to survive. */
  horizon: number;
  /** What has to survive. */
  survive: SpeciesKey | 'both';
  /**
   * Abundance below which a species counts as lost, one number or one a species; default a millionth of its start. A
   * species that runs out under a quota is lost in any case.
   */
  level?: number | Partial<Record<SpeciesKey, number>>;
  /** Values of the coarse scan, both ends included; default 33. */
  scan?: number;
  /** Wanted width of the bracket around a change, as a share of the range; default 1e-9. */
  tolerance?: number;
  /** Relative accuracy of the paths; default 1e-9. */
  rtol?: number;
  shouldStop?: () => boolean;
}

export interface ScannedPath {
  value: number;
  /** Null where the path could not be followed to the horizon. */
  survives: boolean | null;
  /** When the first species was lost; null when none was. */
  lostAt: number | null;
}

/** A value of the lever at which survival begins or ends. */
export interface SurvivalChange {
  /** Neighbouring values, one on either side, as near as asked. */
  below: number;
  above: number;
  survivesAbove: boolean;
}

export interface PathThreshold {
  /** `mixed`: survival comes and goes as the lever is raised. `undecided`: some paths could not be followed. */
  verdict: 'always' | 'never' | 'lost above' | 'gained above' | 'mixed' | 'undecided';
  /**
   * `lost above`: the largest value with survival. `gained above`: the smallest. `mixed`: the largest value up to which
   * every scanned path survives, null when the first already does not. Otherwise null.
   */
  value: number | null;
  /** Whether the scan saw at most one change. A window of loss narrower than the scan can be missed. */
  monotone: boolean;
  changes: SurvivalChange[];
  scanned: ScannedPath[];
  /** What was found, in one sentence or two. */
  remark: string;
}

const KEYS = ['first', 'second'] as const;
const DEFAULT_LEVEL = 1e-6;

/** One path at one lever value, ended at the first loss. */
function followTo(
  spec: ModelSpec,
  start: { x: number; y: number },
  levels: Partial<Record<SpeciesKey, number>>,
  options: PathThresholdOptions
): { survives: boolean | null; lostAt: number | null } {
  const watched = KEYS.filter((key) => levels[key] !== undefined);
  const abundance = { first: start.x, second: start.y };
  if (watched.some((key) => !(abundance[key] > levels[key]!))) return { survives: false, lostAt: 0 };
  const watch = (c: Coordinates): Watched<SpeciesKey>[] =>
    watched.flatMap((key) => {
      const i = key === 'first' ? 0 : 1;
      if (c.forms[i] === 'zero') return [];
      return [{ spec: { value: levelOf(c, i, levels[key]!), direction: -1, terminal: true }, tag: key }];
    });
  const rtol = (options.rtol ?? 1e-9) / 10;
  const path = followPath(compile(spec), {
    start,
    span: [0, options.horizon],
    rtol,
    atol: rtol * Math.min(...watched.map((key) => Math.max(levels[key]!, 1e-6 * abundance[key]))),
    times: new Float64Array(0),
    maxSteps: 200_000,
    shouldStop: options.shouldStop,
    watch
  });
  const loss = path.moments.find((moment) => moment.kind === 'watched' || watched.includes(moment.species));
  if (loss) return { survives: false, lostAt: loss.t };
  return { survives: path.outcome.status === 'reached' ? true : null, lostAt: null };
}

function levelsOf(start: { x: number; y: number }, options: PathThresholdOptions): Partial<Record<SpeciesKey, number>> {
  const { survive, level } = options;
  const levels: Partial<Record<SpeciesKey, number>> = {};
  for (const key of KEYS) {
    if (survive !== 'both' && survive !== key) continue;
    const given = typeof level === 'number' ? level : level?.[key];
    levels[key] = given ?? DEFAULT_LEVEL * (key === 'first' ? start.x : start.y);
    if (!(levels[key]! >= 0) || !Number.isFinite(levels[key]!)) throw new RangeError('A level must be 0 or more.');
  }
  return levels;
}

function verdictOf(scanned: readonly ScannedPath[], changes: readonly SurvivalChange[]): PathThreshold['verdict'] {
  if (scanned.some(({ survives }) => survives === null)) return 'undecided';
  if (changes.length === 0) return scanned[0]!.survives ? 'always' : 'never';
  if (changes.length > 1) return 'mixed';
  return changes[0]!.survivesAbove ? 'gained above' : 'lost above';
}

function remarkOn(verdict: PathThreshold['verdict'], horizon: number, count: number): string {
  const time = Number(horizon.toPrecision(6));
  switch (verdict) {
    case 'always':
      return `Every one of ${count} paths over the range survives to time ${time}.`;
    case 'never':
      return `None of ${count} paths over the range survives to time ${time}.`;
    case 'lost above':
    case 'gained above':
      return `Survival to time ${time} changes once among ${count} values of the range; between neighbouring values it was not looked at.`;
    case 'mixed':
      return `Survival to time ${time} comes and goes as the lever is raised: the value is the largest up to which every path looked at survives, and every change is listed.`;
    case 'undecided':
      return 'Some paths could not be followed to their end, so that nothing is claimed for the whole range.';
  }
}

/**
 * The value of a lever up to which the path from a start survives.
 * @param spec a model without issues. @param start abundances >= 0 at time 0. @param leverPath a parameter of the model.
 * @param range values looked at, ascending. @param options horizon, what has to survive and at what level.
 * @returns the value, every change of survival between the values of a coarse scan, located by bisection, and whether
 *   there was only one. Cost: some seventy paths. The same every time.
 * @throws RangeError for an unknown lever, a range that makes no model, a start or horizon that makes no sense
 */
export function pathThreshold(
  spec: ModelSpec,
  start: { x: number; y: number },
  leverPath: string,
  range: readonly [number, number],
  options: PathThresholdOptions
): PathThreshold {
  requireRange(spec, leverPath, range);
  const { horizon, scan = 33, tolerance = 1e-9 } = options;
  if (!(horizon > 0) || !Number.isFinite(horizon)) throw new RangeError('The horizon must be a time above 0.');
  if (![start.x, start.y].every((n) => n >= 0 && Number.isFinite(n))) {
    throw new RangeError('The start must be two numbers that are not negative.');
  }
  if (!(Number.isInteger(scan) && scan >= 2)) throw new RangeError('The scan must be a whole number, 2 or more.');
  const levels = levelsOf(start, options);
  const at = (value: number): ScannedPath => ({
    value,
    ...followTo(withParameter(spec, leverPath, value), start, levels, options)
  });
  const [p0, p1] = range;
  const scanned = Array.from({ length: scan }, (_, i) => at(i === scan - 1 ? p1 : p0 + ((p1 - p0) * i) / (scan - 1)));
  const changes: SurvivalChange[] = [];
  for (let i = 1; i < scan; i++) {
    const [low, high] = [scanned[i - 1]!, scanned[i]!];
    if (low.survives === null || high.survives === null || low.survives === high.survives) continue;
    let [below, above] = [low.value, high.value];
    while (above - below > tolerance * (p1 - p0)) {
      const middle = (below + above) / 2;
      const { survives } = at(middle);
      if (survives === null || middle === below || middle === above) break;
      if (survives === low.survives) below = middle;
      else above = middle;
    }
    changes.push({ below, above, survivesAbove: high.survives });
  }
  const verdict = verdictOf(scanned, changes);
  const first = changes[0];
  let value: number | null = null;
  if (first && verdict === 'gained above') value = first.above;
  else if (first && !first.survivesAbove && (verdict === 'lost above' || verdict === 'mixed')) value = first.below;
  return {
    verdict,
    value,
    monotone: changes.length <= 1 && verdict !== 'undecided',
    changes,
    scanned,
    remark: remarkOn(verdict, horizon, scan)
  };
}
