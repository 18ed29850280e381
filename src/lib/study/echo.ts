import type { RatePath, StudyContent } from '$lib/contracts/content';
import type { StudyQuestion, TimeUnit } from '$lib/contracts/study';
import { assemble, type Assembled } from './assemble';
import { daysIn, formatDuration, formatNumber, formatPercent, sentenceCase, timeNames } from './format';
import { areaInHectares, onTheArea, studyUnit, toStudyUnit, unitsFor } from './rateUnits';
import { contextOf } from './resolve';
import { displayUnit, parseUnit } from './units';

/** What a rate says in plain words, so that a wrong unit shows itself: doubling times, shares, numbers on the whole area. */

/** `1 485 individuals on 640 ha`, `90 t on 9 000 m²`; null for cover. */
export function wholeAreaWords(value: number, species: 'first' | 'second', question: StudyQuestion): string | null {
  const total = onTheArea(value, species, question);
  if (!total) return null;
  return `${amountWords(total.amount, total.thing, species, question)} on ${areaWords(question)}`;
}

/** The study's area as people write it: `640 ha`. */
export function areaWords(question: StudyQuestion): string {
  return `${formatNumber(question.area.value)} ${displayUnit(question.area.unit).text}`;
}

function amountWords(
  amount: number,
  thing: 'individuals' | 'pairs' | 'mass',
  species: 'first' | 'second',
  question: StudyQuestion
): string {
  if (thing === 'mass') {
    if (amount >= 1000) return `${formatNumber(amount / 1000)} t`;
    return amount >= 1 ? `${formatNumber(amount)} kg` : `${formatNumber(amount * 1000)} g`;
  }
  const shown = amount >= 10 ? formatNumber(Math.round(amount)) : formatNumber(amount);
  return `${shown} ${thing === 'pairs' ? 'pairs' : countedNoun(species, question)}`;
}

/** The study's word for what is counted where it is a short plural (`adults`, `animals`), otherwise `individuals`. */
export function countedNoun(species: 'first' | 'second', question: StudyQuestion): string {
  const { counted } = question[species];
  return /^[\p{L} -]{1,24}s$/u.test(counted) && !/mass$/.test(counted) ? counted : 'individuals';
}

/** One unit of abundance in a word: `individual`, `pair`, `kilogram`. */
function oneOf(species: 'first' | 'second', question: StudyQuestion): string {
  const amount = question[species].unit.split('/')[0] ?? '';
  const words: Record<string, string> = {
    '{ind}': 'individual',
    '{pair}': 'pair',
    kg: 'kilogram',
    g: 'gram',
    t: 'tonne',
    '%': 'per cent of cover'
  };
  return words[amount] ?? 'unit';
}

const amountCode = (species: 'first' | 'second', question: StudyQuestion) =>
  question[species].unit.split('/')[0] ?? question[species].unit;

/** `multiplies by 2.59 a year and doubles in 8.8 months`, or how it declines. */
export function growthWords(r: number, unit: TimeUnit): string {
  if (r === 0) return 'neither grows nor shrinks';
  const change =
    r > Math.log(1.2) ? `multiplies by ${formatNumber(Math.exp(r))}` : `grows by ${formatPercent(Math.expm1(r))}`;
  if (r > 0) return `${change} ${timeNames[unit].per} and doubles in ${formatDuration(Math.LN2 / r, unit)}`;
  return `shrinks by ${formatPercent(-Math.expm1(r))} ${timeNames[unit].per}; half are gone in ${formatDuration(Math.LN2 / -r, unit)}`;
}

/** `27.4 % a year; half are gone in 2.2 years`. */
export function lossWords(rate: number, unit: TimeUnit): string {
  return `${formatPercent(-Math.expm1(-rate))} ${timeNames[unit].per}; half are gone in ${formatDuration(Math.LN2 / rate, unit)}`;
}

type Get = (path: RatePath) => number | undefined;

function abundanceEcho(value: number, species: 'first' | 'second', question: StudyQuestion): string[] {
  const words = wholeAreaWords(value, species, question);
  if (!words) return [];
  const own = parseUnit(question[species].unit);
  const unit = displayUnit(question[species].unit).text;
  if (own && own.dimensions.area === 0) {
    const perHectare = value / areaInHectares(question);
    return [`${words} is ${formatNumber(perHectare)} ${unit}/ha.`];
  }
  const isPerHectare = question[species].unit.endsWith('/har') && own?.dimensions.mass === 0;
  const perSquareKm = isPerHectare ? ` (${formatNumber(value * 100)} per km²)` : '';
  return [`${formatNumber(value)} ${unit} is ${words}${perSquareKm}.`];
}

function flowEcho(value: number, species: 'first' | 'second', verb: string, question: StudyQuestion): string[] {
  const total = onTheArea(value, species, question);
  if (!total) return [];
  const amount = amountWords(total.amount, total.thing, species, question);
  return [`${verb} ${amount} ${timeNames[question.timeUnit].per} on ${areaWords(question)}.`];
}

function feedingEcho(
  path: RatePath,
  value: number,
  question: StudyQuestion,
  get: Get,
  content: StudyContent
): string[] {
  const { timeUnit } = question;
  const { response } = content.structure.feeding;
  const resource = question.first.common;
  const each = `Each ${oneOf('second', question)}${amountCode('second', question) === '{ind}' ? '' : ` of ${question.second.common}`}`;
  const resourceUnit = displayUnit(question.first.unit).text;
  const a = get('feeding.a');
  const h = get('feeding.h');
  const e = get('feeding.e');
  const lines: string[] = [];
  const halfAt =
    a && h && response !== 'holling-1'
      ? `Feeding is at half its most at ${formatNumber(response === 'holling-2' ? 1 / (a * h) : 1 / Math.sqrt(a * h))} ${resourceUnit}.`
      : null;
  if (path === 'feeding.a') {
    const area = question.second.unit.split('/')[1];
    if (response !== 'holling-3' && area) {
      const cleared = `${formatNumber(value)} ${displayUnit(area).text} ${timeNames[timeUnit].per}`;
      lines.push(`${each} clears ${cleared} of ${resource} while it is scarce.`);
    }
    if (halfAt) lines.push(halfAt);
  }
  if (path === 'feeding.h' && value > 0) {
    const most = 1 / value;
    const unit = displayUnit(amountCode('first', question)).text;
    const daily = timeUnit === 'd' ? '' : ` (${formatNumber(most / daysIn[timeUnit])} ${unit} a day)`;
    lines.push(`${each} eats at most ${formatNumber(most)} ${unit} ${timeNames[timeUnit].per}${daily}.`);
    if (halfAt) lines.push(halfAt);
  }
  if (path === 'feeding.e' && value > 0) {
    const unit = displayUnit(amountCode('first', question)).text;
    lines.push(`${formatNumber(1 / value)} ${unit} of ${resource} make one new ${oneOf('second', question)}.`);
  }
  const m = get('second.mortality');
  if (['feeding.e', 'feeding.h'].includes(path) && e && h && m !== undefined && response !== 'holling-1') {
    const top = e / h - m;
    const sum = `With all it can eat, e/h − m = ${formatNumber(top)} ${displayUnit(`/${timeUnit}`).text}`;
    lines.push(top > 0 ? `${sum}: it ${growthWords(top, timeUnit)}.` : `${sum}: it dwindles even then.`);
  }
  return lines;
}

function betweenEcho(path: RatePath, value: number, question: StudyQuestion, get: Get): string[] {
  const isHarmToFirst = path === 'competition.alpha12' || path === 'competition.b12';
  const harmed = isHarmToFirst ? question.first : question.second;
  const other = isHarmToFirst ? question.second : question.first;
  const room = get(isHarmToFirst ? 'first.growth.K' : 'second.growth.K');
  const level = get(isHarmToFirst ? 'second.growth.K' : 'first.growth.K');
  if (level === undefined) return [];
  if (path.startsWith('competition.alpha')) {
    if (!room) return [];
    const share = (value * level) / room;
    const judged = share > 1 ? 'more than there is' : share === 1 ? 'all there is' : 'the rest is left';
    return [
      `At its own capacity, ${other.common} would take up ${formatPercent(share)} of the room of ${harmed.common}: ${judged}.`
    ];
  }
  const loss = `${formatNumber(value * level)} ${displayUnit(`/${question.timeUnit}`).text}`;
  return [
    `At ${formatNumber(level)} ${displayUnit(other.unit).text} of ${other.common}, ${harmed.common} would lose ${loss} of its growth.`
  ];
}

/** `31.2 % lost a year is a rate of 0.374 yr⁻¹.` where the typed unit is not the study's. */
function conversionEcho(path: RatePath, question: StudyQuestion, content: StudyContent): string[] {
  const entry = content.rates.find((candidate) => candidate.path === path);
  if (!entry) return [];
  const context = contextOf(entry, content);
  const own = studyUnit(path, question, context);
  if (entry.unit === own) return [];
  const converted = toStudyUnit(entry.value, entry.unit, path, question, context);
  if (!converted.ok) return [];
  const option = unitsFor(path, question, context).find((candidate) => candidate.code === entry.unit);
  const shown = `${formatNumber(converted.value)} ${displayUnit(own).text}`.trim();
  const label = option?.label ?? displayUnit(entry.unit).text;
  const typed = `${formatNumber(entry.value, 6)} ${label}`.trim();
  const isShare = option !== undefined && option.kind !== 'plain' && option.kind !== 'most eaten';
  return [`${typed} is ${isShare ? 'a rate of ' : ''}${shown}.`];
}

/**
 * Sentences to show under one rate; empty while it cannot be read.
 * @param assembled pass what is already at hand; otherwise it is assembled here.
 */
export function echoOf(
  path: RatePath,
  question: StudyQuestion,
  content: StudyContent,
  assembled: Assembled = assemble(question, content)
): string[] {
  const rate = assembled.resolved[path];
  if (!rate) return [];
  const get: Get = (other) => assembled.resolved[other]?.value;
  const { value } = rate;
  const { timeUnit } = question;
  const species = path.startsWith('first') ? 'first' : 'second';
  const lines = conversionEcho(path, question, content);
  if (rate.crowding) {
    lines.push(`r = a·K = ${formatNumber(value)} ${displayUnit(`/${timeUnit}`).text}.`);
  }
  if (path.endsWith('.growth.r')) lines.push(`${sentenceCase(growthWords(value, timeUnit))}.`);
  else if (path.endsWith('.K') || path.endsWith('.A')) lines.push(...abundanceEcho(value, species, question));
  else if (path === 'second.mortality' && value > 0) {
    lines.push(
      `Without food ${lossWords(value, timeUnit)}. A life lasts ${formatDuration(1 / value, timeUnit)} on average.`
    );
  } else if (path.endsWith('.effort') && value > 0) {
    lines.push(`Takes ${lossWords(value, timeUnit)}, if nothing replaces them.`);
  } else if (path.endsWith('.quota')) lines.push(...flowEcho(value, species, 'Takes', question));
  else if (path.endsWith('.stocking')) lines.push(...flowEcho(value, species, 'Adds', question));
  else if (path.startsWith('competition')) lines.push(...betweenEcho(path, value, question, get));
  else if (path.startsWith('feeding')) lines.push(...feedingEcho(path, value, question, get, content));
  else if (path === 'second.growth.g') {
    const carried = `${formatNumber(value)} ${displayUnit(studyUnit(path, question)).text}`.trim();
    lines.push(
      `The ceiling of ${question.second.common} is ${carried} times what there is of ${question.first.common}.`
    );
  }
  return lines;
}
