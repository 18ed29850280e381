import type { RateEntry, RatePath, StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { formatNumber, sentenceCase } from './format';
import { rateNeed } from './rates';
import { toStudyUnit, type UnitContext } from './rateUnits';

/** From what was typed to what the model takes: value, standard error and 5–95 % range in the study's own units. */

/** A complaint about one field, by its path in the form, with the fix in the sentence. */
export interface Issue {
  path: string;
  message: string;
}
export interface ResolvedRate {
  path: RatePath;
  /** In the study's unit. */
  value: number;
  /** Standard error in the study's unit; null where the number was entered as exact. */
  se: number | null;
  /** 5 and 95 % limits in the study's unit; the value itself where it is exact. */
  low: number;
  high: number;
  /** Standard error as a share of the value; null where exact or where the value is 0. */
  cv: number | null;
  /** Present for r typed in the crowding form: a with its error, so that r = a K leans on the K of the same species. */
  crowding: { value: number; se: number | null } | null;
}

/** Standard normal quantile of 95 %. */
const Z95 = 1.6448536269514722;

type Spread = Pick<ResolvedRate, 'se' | 'low' | 'high' | 'cv'>;
export type Resolution = { ok: true; rate: ResolvedRate } | { ok: false; issues: Issue[] };

/** 5–95 % limits of a log-normal with this mean and CV: s² = ln(1 + CV²), median = mean/√(1 + CV²). */
function logNormalLimits(mean: number, cv: number): { low: number; high: number } {
  const s = Math.sqrt(Math.log1p(cv * cv));
  const median = mean / Math.sqrt(1 + cv * cv);
  return { low: median * Math.exp(-Z95 * s), high: median * Math.exp(Z95 * s) };
}

/** @param signed true for a rate that may be negative: its spread is normal rather than log-normal. */
function spreadFrom(value: number, se: number, signed: boolean): Spread {
  const cv = value === 0 ? null : se / Math.abs(value);
  if (value > 0 && !signed && cv !== null) return { se, cv, ...logNormalLimits(value, cv) };
  return { se, cv, low: value - Z95 * se, high: value + Z95 * se };
}

const exactly = (value: number): Spread => ({ se: null, cv: null, low: value, high: value });

/**
 * Standard error that a 5–95 % range stands for. Both ends above 0: log-normal, s = ln(high/low)/(2·1.6449) and
 * CV = √(exp(s²) − 1); otherwise normal, (high − low)/(2·1.6449).
 */
export function spreadOfRange(value: number, low: number, high: number): Spread {
  if (low > 0 && value > 0) {
    const s = Math.log(high / low) / (2 * Z95);
    const cv = Math.sqrt(Math.expm1(s * s));
    return { se: cv * value, cv, low, high };
  }
  const se = (high - low) / (2 * Z95);
  return { se, cv: value === 0 ? null : se / Math.abs(value), low, high };
}

/** What decides the unit of this entry, beside its path. */
export function contextOf(entry: Pick<RateEntry, 'form'>, content: Pick<StudyContent, 'structure'>): UnitContext {
  return { form: entry.form, response: content.structure.feeding.response };
}

/** Value and spread of the entry as typed, in the unit of its own form (r, or a of the crowding form). */
function convert(entry: RateEntry, question: StudyQuestion, content: StudyContent): Resolution {
  const at = `rates.${entry.path}`;
  const context = contextOf(entry, content);
  const need = rateNeed(entry.path, content.structure, question);
  const main = toStudyUnit(entry.value, entry.unit, entry.path, question, context);
  if (!main.ok) {
    const isUnit = toStudyUnit(50, entry.unit, entry.path, question, context).ok === false;
    return { ok: false, issues: [{ path: `${at}.${isUnit ? 'unit' : 'value'}`, message: main.message }] };
  }
  const name = sentenceCase(need.name);
  if (need.range === 'positive' && !(main.value > 0)) {
    const fix = main.value === 0 ? 'it cannot be 0' : 'it cannot be negative';
    return { ok: false, issues: [{ path: `${at}.value`, message: `${name} must be above 0: ${fix} here.` }] };
  }
  if (need.range === 'not negative' && main.value < 0) {
    return { ok: false, issues: [{ path: `${at}.value`, message: `${name} must be 0 or more.` }] };
  }

  const done = (spread: Spread): Resolution => ({
    ok: true,
    rate: { path: entry.path, value: main.value, ...spread, crowding: null }
  });
  const isSigned = need.range === 'any';
  const { uncertainty } = entry;
  if (uncertainty.kind === 'exact') return done(exactly(main.value));
  if (uncertainty.kind === 'se') {
    if (!(uncertainty.se >= 0)) {
      return { ok: false, issues: [{ path: `${at}.uncertainty.se`, message: 'A standard error is 0 or more.' }] };
    }
    return done(spreadFrom(main.value, uncertainty.se * Math.abs(main.derivative), isSigned));
  }
  if (uncertainty.kind === 'cv') {
    if (!(uncertainty.percent >= 0)) {
      return { ok: false, issues: [{ path: `${at}.uncertainty.percent`, message: 'A CV is 0 % or more.' }] };
    }
    const typedSE = (Math.abs(entry.value) * uncertainty.percent) / 100;
    return done(spreadFrom(main.value, typedSE * Math.abs(main.derivative), isSigned));
  }
  return rangeOf(entry, main.value, uncertainty, question, content, done);
}

function rangeOf(
  entry: RateEntry,
  value: number,
  range: { low: number; high: number },
  question: StudyQuestion,
  content: StudyContent,
  done: (spread: Spread) => Resolution
): Resolution {
  const at = `rates.${entry.path}.uncertainty`;
  const refuse = (field: 'low' | 'high', message: string): Resolution => ({
    ok: false,
    issues: [{ path: `${at}.${field}`, message }]
  });
  const { low, high } = range;
  if (!(low < high)) {
    return refuse('high', 'The upper end of the range must be above the lower end.');
  }
  if (entry.value < low || entry.value > high) {
    return refuse(
      entry.value < low ? 'low' : 'high',
      `The value ${formatNumber(entry.value)} lies outside its own range, ${formatNumber(low)} to ${formatNumber(high)}: correct the value or the range.`
    );
  }
  const context = contextOf(entry, content);
  const ends = (['low', 'high'] as const).map((field) => ({
    field,
    converted: toStudyUnit(range[field], entry.unit, entry.path, question, context)
  }));
  const values: number[] = [];
  for (const { field, converted } of ends) {
    if (!converted.ok) return refuse(field, converted.message);
    values.push(converted.value);
  }
  // A survival share, a doubling time and a ration turn the order round.
  const bottom = Math.min(...values);
  const top = Math.max(...values);
  const need = rateNeed(entry.path, content.structure, question);
  if (need.range !== 'any' && bottom < 0) return refuse('low', 'This rate cannot be negative: raise the lower end.');
  if (need.range === 'positive' && bottom === 0) {
    return refuse(values[0] === 0 ? 'low' : 'high', 'This rate must be above 0: move this end of the range off 0.');
  }
  return done(spreadOfRange(value, bottom, top));
}

/**
 * One entry in the study's units.
 * For the crowding form, r = a·K with var(r) = K² var(a) + a² var(K), a and K being separate estimates.
 */
export function resolveRate(entry: RateEntry, question: StudyQuestion, content: StudyContent): Resolution {
  const own = convert(entry, question, content);
  if (!own.ok || entry.form !== 'crowding') return own;
  const at = `rates.${entry.path}`;
  if (!rateNeed(entry.path, content.structure, question).crowdingForm) {
    return {
      ok: false,
      issues: [
        {
          path: `${at}.form`,
          message: 'The crowding form a·n·(K − n) belongs to logistic growth: type r itself, or choose logistic growth.'
        }
      ]
    };
  }
  const capacityPath = entry.path === 'first.growth.r' ? 'first.growth.K' : 'second.growth.K';
  const capacityEntry = content.rates.find((other) => other.path === capacityPath);
  const capacity = capacityEntry ? convert(capacityEntry, question, content) : null;
  if (!capacity?.ok) {
    return {
      ok: false,
      issues: [{ path: `${at}.form`, message: 'The crowding form needs the capacity K of this species: r = a·K.' }]
    };
  }
  const a = own.rate;
  const K = capacity.rate;
  const value = a.value * K.value;
  const crowding = { value: a.value, se: a.se };
  if (a.se === null && K.se === null) return { ok: true, rate: { path: a.path, value, ...exactly(value), crowding } };
  const se = Math.hypot(K.value * (a.se ?? 0), a.value * (K.se ?? 0));
  return { ok: true, rate: { path: a.path, value, ...spreadFrom(value, se, false), crowding } };
}

/** What is wrong with one entry, empty when nothing is. Paths are `rates.<rate path>.<field>`. */
export function checkRate(entry: RateEntry, question: StudyQuestion, content: StudyContent): Issue[] {
  const resolution = resolveRate(entry, question, content);
  return resolution.ok ? [] : resolution.issues;
}
