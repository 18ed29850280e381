import type { StudyQuestion } from '$lib/contracts/study';
import type {
  AbsorbingState,
  EquilibriaReport,
  Equilibrium,
  LimitCycle,
  ModelSpec,
  SpeciesKey,
  Stability
} from '$lib/dynamics';
import { areaWords, countedNoun } from './echo';
import { formatDuration, formatNumber, plusMinus, sentenceCase } from './format';
import { onTheArea } from './rateUnits';
import { displayUnit } from './units';

/** Resting points with their letters, and how a level is written. */

export type Who = 'neither' | 'first' | 'second' | 'both';
export interface LetteredPoint {
  letter: string;
  /** Place in the report's own list, of equilibria or of absorbing states. */
  index: number;
  who: Who;
  x: number;
  y: number;
  stability: Stability;
  /** One of the two is null: a point of the smooth equations, or a state held by a quota. */
  equilibrium: Equilibrium | null;
  absorbing: AbsorbingState | null;
}
/** What is said about a closed path that the two populations settle on or leave, in study units. */
export type CycleFacts = Pick<
  LimitCycle,
  'stability' | 'period' | 'xMin' | 'xMax' | 'yMin' | 'yMax' | 'xMean' | 'yMean'
>;
/** Standard errors of a point; null where they are not known. */
export interface PointErrors {
  seX: number | null;
  seY: number | null;
}
/** What the words lean on beside the point itself. */
export interface Reading {
  question: StudyQuestion;
  model: ModelSpec;
  report: EquilibriaReport;
  cycles?: readonly CycleFacts[];
  /** Lowest and highest level ever surveyed of each species. */
  surveyed?: Partial<Record<SpeciesKey, { low: number; high: number }>>;
  /** Standard errors by letter. */
  errors?: Partial<Record<string, PointErrors>>;
}

/** Below this share of the largest level of its kind, an abundance is a rounded 0. */
const PRESENT = 1e-9;
const order: readonly Who[] = ['neither', 'first', 'second', 'both'];

/** Who is there, with levels measured against the largest of the report. */
export function whoIsAt(point: { x: number; y: number }, scale: { x: number; y: number }): Who {
  const first = point.x > PRESENT * scale.x;
  const second = point.y > PRESENT * scale.y;
  return first ? (second ? 'both' : 'first') : second ? 'second' : 'neither';
}

/** Largest level of each species among the feasible points of a report; 1 where there is none. */
export function scaleOf(report: EquilibriaReport): { x: number; y: number } {
  const feasible = report.equilibria.filter((point) => point.feasible);
  const most = (key: 'x' | 'y') => Math.max(0, ...[...feasible, ...report.absorbing].map((point) => point[key])) || 1;
  return { x: most('x'), y: most('y') };
}

/** Feasible points in the order of the table: neither, first only, second only, both; then by level. Letters A, B, C … */
export function pointsOf(report: EquilibriaReport): LetteredPoint[] {
  const scale = scaleOf(report);
  const entries = [
    ...report.equilibria
      .map((point, index) => ({ point, index, equilibrium: point, absorbing: null }))
      .filter(({ point }) => point.feasible),
    ...report.absorbing.map((point, index) => ({ point, index, equilibrium: null, absorbing: point }))
  ];
  return entries
    .map(({ point, index, equilibrium, absorbing }) => ({
      letter: '',
      index,
      who: whoIsAt(point, scale),
      x: point.x,
      y: point.y,
      stability: point.stability,
      equilibrium,
      absorbing
    }))
    .sort(
      (a, b) =>
        Number(a.absorbing !== null) - Number(b.absorbing !== null) ||
        order.indexOf(a.who) - order.indexOf(b.who) ||
        a.x - b.x ||
        a.y - b.y
    )
    .map((point, index) => ({ ...point, letter: letterAt(index) }));
}

function letterAt(index: number): string {
  return index < 26
    ? String.fromCharCode(65 + index)
    : `${letterAt(Math.floor(index / 26) - 1)}${letterAt(index % 26)}`;
}

/** `Both together`, `Ridge broom only`, `Neither species`. */
export function pointTitle(who: Who, question: StudyQuestion): string {
  if (who === 'neither') return 'Neither species';
  if (who === 'both') return 'Both together';
  return `${sentenceCase(question[who].common)} only`;
}

/** An abundance with its unit and, for counted things, the number on the area: `1.48 ind/ha (949 animals on 640 ha)`. */
export function levelWords(
  value: number,
  species: SpeciesKey,
  question: StudyQuestion,
  { se = null, onArea = true }: { se?: number | null; onArea?: boolean } = {}
): string {
  const unit = displayUnit(question[species].unit).text;
  const level = `${se === null ? formatNumber(value) : plusMinus(value, se)} ${unit}`;
  const total = onTheArea(value, species, question);
  if (!onArea || !total || total.thing === 'mass' || question[species].unit === '{ind}') return level;
  const amount = total.amount >= 10 ? Math.round(total.amount) : total.amount;
  const thing = total.thing === 'pairs' ? 'pairs' : countedNoun(species, question);
  return `${level} (${formatNumber(amount)} ${thing} on ${areaWords(question)})`;
}

/** Whether a level means fewer than one counted thing on the whole area. */
export function isBelowOne(value: number, species: SpeciesKey, question: StudyQuestion): boolean {
  const total = onTheArea(value, species, question);
  return value > 0 && total !== null && total.thing !== 'mass' && total.amount < 1;
}

/** `longer than the horizon of 6 years` where a time outlasts the question; null where it does not. */
export function beyondHorizon(time: number, question: StudyQuestion): string | null {
  if (!(time > question.horizon)) return null;
  return `longer than the horizon of ${formatDuration(question.horizon, question.timeUnit)}`;
}

/** Which species are there. */
export function presentAt(who: Who): SpeciesKey[] {
  return (['first', 'second'] as const).filter((key) => who === key || who === 'both');
}

/** Abundance of one species in a state. */
export function levelOf(point: { x: number; y: number }, key: SpeciesKey): number {
  return key === 'first' ? point.x : point.y;
}
