/** Both species over time, before any drawing: which panels, which extents, values between samples, rows of the table. */
import { formatValue, groupDigits, niceCeiling, niceStep } from './scales';
import type {
  Point,
  ScaleKind,
  SeriesCount,
  SeriesEvent,
  SeriesPeriod,
  SeriesRun,
  SeriesSpecies,
  SeriesThreshold,
  SeriesTime,
  SpeciesKey
} from './types';

export interface SeriesData {
  time: SeriesTime;
  first: SeriesSpecies;
  second: SeriesSpecies;
  runs: SeriesRun[];
  thresholds?: SeriesThreshold[];
  events?: SeriesEvent[];
  periods?: SeriesPeriod[];
  counts?: SeriesCount[];
}
export interface SeriesLine {
  species: SpeciesKey;
  run: SeriesRun;
  points: Point[];
}
export interface SeriesPanel {
  species: SpeciesKey[];
  title: string;
  lines: SeriesLine[];
  tMin: number;
  tMax: number;
  yMin: number;
  yMax: number;
  scale: ScaleKind;
}

/** Scales further apart than this flatten one of two species sharing an axis. */
const SHARED_AXIS_RATIO = 20;
/** More runs than this, and the lines of two species on one axis can no longer be followed. */
const SHARED_AXIS_RUNS = 4;
/** A log axis shows at most this many decades below its top: below them a value is nought for every purpose. */
const LOG_DECADES = 6;

export const SPECIES: readonly SpeciesKey[] = ['first', 'second'];

function largest(data: SeriesData, species: SpeciesKey): number {
  let top = 0;
  for (const run of data.runs)
    for (let i = 0; i < run[species].length; i += 1) top = Math.max(top, finite(run[species][i]));
  for (const c of data.counts ?? []) if (c.species === species) top = Math.max(top, c.value + (c.se ?? 0));
  return top;
}
const finite = (value: number | undefined) => (value !== undefined && Number.isFinite(value) ? value : 0);

/**
 * Whether the species need a panel each: their units differ, the runs are many, or on a linear axis one species would lie
 * flat under the other.
 */
export function needsPanels(data: SeriesData, scale: ScaleKind): boolean {
  if (data.first.unit !== data.second.unit || data.runs.length > SHARED_AXIS_RUNS) return true;
  const [a, b] = [largest(data, 'first'), largest(data, 'second')];
  return scale === 'linear' && a > 0 && b > 0 && Math.max(a / b, b / a) > SHARED_AXIS_RATIO;
}

function logFloor(data: SeriesData, species: SpeciesKey[], top: number): number {
  let low = Infinity;
  const take = (value: number) => {
    if (value > 0) low = Math.min(low, value);
  };
  for (const run of data.runs)
    for (const s of species) for (let i = 0; i < run[s].length; i += 1) take(finite(run[s][i]));
  for (const t of data.thresholds ?? []) if (t.species === 'both' || species.includes(t.species)) take(t.value);
  const floor = Math.max(Number.isFinite(low) ? low : top / 10, top / 10 ** LOG_DECADES);
  return 10 ** Math.floor(Math.log10(floor) + 1e-9);
}

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1);

/** @param apart one panel a species; both in one otherwise. */
export function seriesPanels(data: SeriesData, scale: ScaleKind, apart: boolean): SeriesPanel[] {
  let tMin = Infinity;
  let tMax = -Infinity;
  for (const run of data.runs) {
    tMin = Math.min(tMin, run.t[0] ?? Infinity);
    tMax = Math.max(tMax, run.t[run.t.length - 1] ?? -Infinity);
  }
  for (const c of data.counts ?? []) {
    tMin = Math.min(tMin, c.t);
    tMax = Math.max(tMax, c.t);
  }
  if (!(tMax > tMin)) [tMin, tMax] = [Number.isFinite(tMin) ? tMin : 0, (Number.isFinite(tMin) ? tMin : 0) + 1];
  const groups: SpeciesKey[][] = apart ? [['first'], ['second']] : [['first', 'second']];
  return groups.map((species) => {
    const limits = (data.thresholds ?? []).filter((t) => t.species === 'both' || species.includes(t.species));
    const top = Math.max(...species.map((s) => largest(data, s)), 0);
    // A limit far above everything drawn would flatten the curves: it is then left to the table.
    const shown = Math.max(top, ...limits.map((t) => t.value).filter((value) => value <= top * 3 || top === 0));
    const [only] = species;
    const { unit } = data[only ?? 'first'];
    const title =
      species.length === 1 && only
        ? `${data[only].name}${unit ? (/^(per|in|of)\b/.test(unit) ? ` ${unit}` : `, ${unit}`) : ''}`
        : capital(unit);
    return {
      species,
      title,
      lines: species.flatMap((s) => data.runs.map((run) => ({ species: s, run, points: linePoints(run, s, scale) }))),
      tMin,
      tMax,
      yMin: scale === 'log' ? logFloor(data, species, shown || 1) : 0,
      yMax: scale === 'log' ? logCeiling(shown || 1) : niceCeiling(shown),
      scale
    };
  });
}

/** The next of 1, 2 or 5 times a power of ten. */
function logCeiling(top: number): number {
  const power = 10 ** Math.floor(Math.log10(top) + 1e-9);
  const lead = [1, 2, 5, 10].find((l) => l * power >= top * (1 - 1e-9)) ?? 10;
  return lead * power;
}

function linePoints(run: SeriesRun, species: SpeciesKey, scale: ScaleKind): Point[] {
  return Array.from({ length: run.t.length }, (_, i) => {
    const y = run[species][i] ?? NaN;
    return { x: run.t[i] ?? NaN, y: scale === 'log' && y <= 0 ? NaN : y };
  });
}

/** The value of a run between its samples, by straight lines; null before its first and after its last. */
export function valueAt(run: SeriesRun, species: SpeciesKey, t: number): number | null {
  const n = run.t.length;
  const first = run.t[0];
  const last = run.t[n - 1];
  if (first === undefined || last === undefined || t < first || t > last) return null;
  let low = 0;
  let high = n - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if ((run.t[middle] ?? 0) <= t) low = middle;
    else high = middle;
  }
  const [t0, t1] = [run.t[low] ?? t, run.t[high] ?? t];
  const [v0, v1] = [run[species][low] ?? NaN, run[species][high] ?? NaN];
  return t1 === t0 ? v0 : v0 + ((v1 - v0) * (t - t0)) / (t1 - t0);
}

/** "2031" with an origin, otherwise "6 years"; as many decimals as `step` needs. */
export function formatTime(t: number, time: SeriesTime, step: number, bare = false): string {
  const whole = time.origin !== undefined && Number.isInteger(time.origin + t);
  const decimals = whole ? 0 : Math.max(0, -Math.floor(Math.log10(step) + 1e-9));
  const text = groupDigits(((time.origin ?? 0) + t).toFixed(decimals));
  return time.origin !== undefined || bare ? text : `${text} ${time.unit}`;
}

/** Times of the table's rows: about 24, at round values, with both ends. */
export function tableTimes(tMin: number, tMax: number): { times: number[]; step: number } {
  const step = niceStep(tMax - tMin, 24);
  const from = Math.ceil(tMin / step - 1e-9);
  const to = Math.floor(tMax / step + 1e-9);
  const times = Array.from({ length: to - from + 1 }, (_, i) => Number(((from + i) * step).toPrecision(12)));
  if (times[0] !== undefined && times[0] - tMin > step * 1e-6) times.unshift(tMin);
  const last = times[times.length - 1];
  if (last !== undefined && tMax - last > step * 1e-6) times.push(tMax);
  return { times, step };
}

/** "2031, run 2: noble 86, signal 101 per 100 m". */
export function readSeries(data: SeriesData, run: SeriesRun, t: number, step: number): string {
  const part = (s: SpeciesKey) => {
    const value = valueAt(run, s, t);
    return `${data[s].name} ${value === null ? 'not run' : formatValue(value)}`;
  };
  const who = data.runs.length > 1 ? `, run ${run.label}` : '';
  const same = data.first.unit === data.second.unit;
  const values = same
    ? `${part('first')}, ${part('second')} ${data.first.unit}`
    : `${part('first')} ${data.first.unit}, ${part('second')} ${data.second.unit}`;
  return `${formatTime(t, data.time, step)}${who}: ${values}`;
}
