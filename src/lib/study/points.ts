import type { StudyQuestion } from '$lib/contracts/study';
import type {
  AbsorbingState,
  Continuum,
  EquilibriaReport,
  Equilibrium,
  LimitCycle,
  ModelSpec,
  SpeciesKey,
  Stability
} from '$lib/dynamics';
import { areaWords, countedNoun, growthWords } from './echo';
import { formatDuration, formatNumber, plusMinus, sentenceCase } from './format';
import { onTheArea } from './rateUnits';
import { displayUnit } from './units';

/** Resting points with their letters, and a paragraph of plain words for each. */

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

/** `longer than the 6-year horizon` where a time outlasts the question; null where it does not. */
export function beyondHorizon(time: number, question: StudyQuestion): string | null {
  if (!(time > question.horizon)) return null;
  return `longer than the horizon of ${formatDuration(question.horizon, question.timeUnit)}`;
}

const present = (who: Who): SpeciesKey[] =>
  (['first', 'second'] as const).filter((key) => who === key || who === 'both');
const levelOf = (point: { x: number; y: number }, key: SpeciesKey) => (key === 'first' ? point.x : point.y);

function opening(point: LetteredPoint, reading: Reading): string {
  const { question, errors } = reading;
  const se = errors?.[point.letter];
  const level = (key: SpeciesKey) => {
    const error = (key === 'first' ? se?.seX : se?.seY) ?? null;
    return `${question[key].common} at ${levelWords(levelOf(point, key), key, question, { se: error })}`;
  };
  if (point.who === 'neither') return 'Neither species is left.';
  if (point.who === 'both') return `Both present: ${level('first')} and ${level('second')}.`;
  const lost = point.who === 'first' ? question.second : question.first;
  return `${sentenceCase(level(point.who))}, and no ${lost.common}.`;
}

function stableSentences(point: LetteredPoint, reading: Reading): string[] {
  const { question } = reading;
  const found = point.equilibrium;
  const time = found?.returnTime ?? null;
  const sentences: string[] = [];
  if (time !== null) {
    const swings =
      found?.period && point.who === 'both'
        ? `, in swings of ${formatDuration(found.period, question.timeUnit)} that die away`
        : '';
    sentences.push(
      `It holds: a small knock shrinks to about a third in ${formatDuration(time, question.timeUnit)}${swings}.`
    );
    const beyond = beyondHorizon(time, question);
    if (beyond) sentences.push(`That is ${beyond}: look at the path, not at this resting point.`);
  } else {
    sentences.push('It holds: small knocks die away.');
  }
  sentences.push(fromWhere(point, reading));
  return sentences;
}

function fromWhere(point: LetteredPoint, { report, model, cycles }: Reading): string {
  const rivals = pointsOf(report).filter((other) => other.stability === 'stable').length;
  const others = rivals + (cycles ?? []).filter((cycle) => cycle.stability === 'stable').length;
  if (others > 1) return 'Only starts on its own side of the divide end here; the state plane shows which.';
  const isUnlimited = [model.first.growth.kind, model.second.growth?.kind].includes('exponential');
  // Two competitors cannot cycle, so that a lone stable point takes every start with both present; elsewhere paths decide.
  const isProven =
    report.complete &&
    report.continua.length === 0 &&
    report.equilibria.every((each) => each.stability !== 'undetermined');
  if (model.interaction === 'competition' && !isUnlimited && isProven) {
    return 'Every start with both species present ends here.';
  }
  return 'Starts nearby end here; how far that reaches, the paths on the state plane show.';
}

function unstableSentences(point: LetteredPoint, reading: Reading): string[] {
  const { question, report } = reading;
  const found = point.equilibrium;
  if (point.who === 'both') {
    if (found?.class === 'saddle') {
      const stable = pointsOf(report).filter((other) => other.stability === 'stable').length;
      return [
        stable > 1
          ? 'It does not hold, and lies on the divide: paths come near it and then part to one side or the other.'
          : 'It does not hold: paths come near it and then turn away.'
      ];
    }
    if (found?.class === 'unstable spiral') {
      const swing = found.period ? ` of ${formatDuration(found.period, question.timeUnit)}` : '';
      return [`It does not hold: swings${swing} around it grow.`];
    }
    return ['It does not hold: any knock, however small, leads away from it.'];
  }
  const invaders = invasionsOf(question, report, reading.model).filter(
    (invasion) => invasion.letter === point.letter && invasion.rate > 0
  );
  if (invaders.length > 0) {
    return invaders.map(
      ({ invader, rate }) =>
        `It does not hold against ${question[invader].common}: from a few, the population ${growthWords(rate, question.timeUnit)}.`
    );
  }
  if (point.who === 'neither') {
    const growing = (['first', 'second'] as const).filter((_, i) => (found?.jacobian[i]?.[i] ?? 0) > 0);
    if (growing.length > 0) {
      return [`It does not hold: ${growing.map((key) => question[key].common).join(' and ')} would grow from a few.`];
    }
  }
  return ['It does not hold: small knocks lead away from it.'];
}

function undecidedSentences(point: LetteredPoint): string[] {
  const found = point.equilibrium;
  if (found?.class === 'centre') {
    return [
      'Undecided, fragile: swings around it neither grow nor die away, and their size is only the memory of the start.',
      'The smallest self-limitation would turn them into damping.'
    ];
  }
  const reason = found && found.decidedBy !== 'undecided' ? ` It was judged by its ${found.decidedBy}.` : '';
  return [`Undecided: an eigenvalue is zero, so that the straightened equations alone cannot tell.${reason}`];
}

/** Warnings that belong to a point: extrapolation, fewer than one animal, a cycle's mean, a kind that could flip. */
function pointWarnings(point: LetteredPoint, { question, surveyed, cycles }: Reading): string[] {
  const warnings: string[] = [];
  for (const key of present(point.who)) {
    const level = levelOf(point, key);
    const range = surveyed?.[key];
    if (range && (level < range.low || level > range.high)) {
      const side = level < range.low ? 'below anything' : 'above anything';
      warnings.push(`The level of ${question[key].common} is ${side} ever surveyed: it is extrapolated.`);
    }
    if (isBelowOne(level, key, question)) {
      warnings.push(
        `${sentenceCase(question[key].common)} at this level is fewer than one on ${areaWords(question)}: do not read it as survival.`
      );
    }
  }
  const found = point.equilibrium;
  // A star or a degenerate node always borders on its neighbours, and a proven centre has been decided otherwise.
  if (found?.borderline && /^(un)?stable (node|spiral)$|^saddle$/.test(found.class)) {
    warnings.push('It lies close to another kind of point: the last digits of a rate could change it.');
  }
  if (found?.multiplicity === 2)
    warnings.push('Two resting points have just merged here: a slightly different rate parts them or removes both.');
  const cycle = cycles?.find((candidate) => candidate.stability === 'stable');
  if (cycle && point.who === 'both' && point.stability === 'unstable') {
    const mean = `${levelWords(cycle.xMean, 'first', question, { onArea: false })} and ${levelWords(cycle.yMean, 'second', question, { onArea: false })}`;
    warnings.push(`This is not the mean of the cycle, which is ${mean}: report the cycle, not this point.`);
  }
  return warnings;
}

export interface PointParagraph {
  letter: string;
  title: string;
  sentences: string[];
  warnings: string[];
}

/** Who persists, at what level, how fast and from where, in plain words; warnings apart. */
export function pointParagraph(point: LetteredPoint, reading: Reading): PointParagraph {
  const sentences = [opening(point, reading)];
  if (point.absorbing) {
    const names = point.absorbing.held.map((key) => reading.question[key].common).join(' and ');
    sentences.push(
      `Nothing is left of ${names}, and the fixed take keeps it so: it stops for want of animals, not because anyone stopped it.`
    );
    if (point.stability === 'stable') sentences.push('It holds: nothing brings back what has run out.');
    else if (point.stability === 'unstable') {
      const free = reading.question[point.absorbing.held.includes('first') ? 'second' : 'first'].common;
      sentences.push(`It does not hold: ${free} would leave this level at the smallest knock.`);
    }
  } else if (point.stability === 'stable') sentences.push(...stableSentences(point, reading));
  else if (point.stability === 'unstable') sentences.push(...unstableSentences(point, reading));
  else sentences.push(...undecidedSentences(point));
  const remark = point.equilibrium?.remark ?? null;
  if (remark && point.stability !== 'stable')
    sentences.push(sentenceCase(remark.endsWith('.') ? remark : `${remark}.`));
  return {
    letter: point.letter,
    title: pointTitle(point.who, reading.question),
    sentences,
    warnings: pointWarnings(point, reading)
  };
}

export interface RareGrowth {
  resident: SpeciesKey;
  invader: SpeciesKey;
  /** Letter of the point where the resident rests alone. */
  letter: string;
  /** Growth per head of the invader when rare, 1/time; 0 within rounding is given as 0. */
  rate: number;
  sentence: string;
}

/** A species that is fixed-taken or stocked does not start from a few: no growth when rare is defined for it. */
function canBeRare(model: ModelSpec, key: SpeciesKey): boolean {
  return (model[key].removal?.quota ?? 0) === 0 && (model[key].stocking ?? 0) === 0;
}

/** Who invades whom: growth when rare of each species at every point where the other rests alone and returns to it. */
export function invasionsOf(question: StudyQuestion, report: EquilibriaReport, model: ModelSpec): RareGrowth[] {
  return pointsOf(report).flatMap((point) => {
    if (!point.equilibrium || (point.who !== 'first' && point.who !== 'second')) return [];
    const resident = point.who;
    const invader: SpeciesKey = resident === 'first' ? 'second' : 'first';
    if (!canBeRare(model, invader)) return [];
    const [[j11], [, j22]] = point.equilibrium.jacobian;
    const [own, exact] = resident === 'first' ? [j11, j22] : [j22, j11];
    if (!Number.isFinite(exact) || own >= 0) return [];
    const rate = Math.abs(exact) <= 1e-12 * Math.abs(own) ? 0 : exact;
    const sentence = invasionSentence(invader, levelOf(point, resident), rate, question);
    return [{ resident, invader, letter: point.letter, rate, sentence }];
  });
}

/** `With stream crayfish at rest at 900 ind/ha, a rare population of saddleback crayfish multiplies by …: it can invade.` */
export function invasionSentence(
  invader: SpeciesKey,
  residentLevel: number,
  rate: number,
  question: StudyQuestion,
  se: number | null = null
): string {
  const resident: SpeciesKey = invader === 'first' ? 'second' : 'first';
  const level = levelWords(residentLevel, resident, question, { onArea: false });
  const lead = `With ${question[resident].common} at rest at ${level}, a rare population of ${question[invader].common}`;
  if (rate === 0) return `${lead} neither grows nor shrinks: undecided.`;
  const number = `${se === null ? formatNumber(rate) : plusMinus(rate, se)} ${displayUnit(`/${question.timeUnit}`).text}`;
  const isClear = se === null || Math.abs(rate) > 1.96 * se;
  const can = rate > 0 ? 'it can invade' : 'it cannot invade';
  const doubt = isClear ? '' : ', but the error reaches past zero';
  return `${lead} ${growthWords(rate, question.timeUnit)} (${number}): ${can}${doubt}.`;
}

/** A line of resting points in words: its ends, and that the start chooses along it. */
export function continuumWords(line: Continuum, question: StudyQuestion): string {
  const end = (point: { x: number; y: number }) =>
    `${levelWords(point.x, 'first', question, { onArea: false })} with ${levelWords(point.y, 'second', question, { onArea: false })}`;
  const to = line.to ? `to ${end(line.to)}` : 'without an end';
  return `A whole line of states, from ${end(line.from)} ${to}: the start decides where along it the path ends. ${line.remark}`;
}
