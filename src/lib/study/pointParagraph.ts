import type { StudyQuestion } from '$lib/contracts/study';
import type { Continuum, SpeciesKey } from '$lib/dynamics';
import { areaWords, growthWords } from './echo';
import { formatDuration, sentenceCase } from './format';
import { invasionsOf } from './invasions';
import {
  beyondHorizon,
  isBelowOne,
  levelOf,
  levelWords,
  pointsOf,
  pointTitle,
  presentAt,
  type LetteredPoint,
  type Reading
} from './points';

/** A paragraph of plain words for each resting point: who persists, at what level, how fast and from where. */

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
  for (const key of presentAt(point.who)) {
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

/** A line of resting points in words: its ends, and that the start chooses along it. */
export function continuumWords(line: Continuum, question: StudyQuestion): string {
  const end = (point: { x: number; y: number }) =>
    `${levelWords(point.x, 'first', question, { onArea: false })} with ${levelWords(point.y, 'second', question, { onArea: false })}`;
  const to = line.to ? `to ${end(line.to)}` : 'without an end';
  return `A whole line of states, from ${end(line.from)} ${to}: the start decides where along it the path ends. ${line.remark}`;
}
