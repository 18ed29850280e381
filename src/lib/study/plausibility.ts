import type { RateEntry, RatePath, StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { assemble, type Assembled } from './assemble';
import { growthWords, wholeAreaWords } from './echo';
import { daysIn, formatDuration, formatNumber, formatPercent } from './format';
import { ratesNeeded } from './rates';
import { onTheArea } from './rateUnits';
import type { ResolvedRate } from './resolve';
import { displayUnit } from './units';

/**
 * Numbers that are possible but seldom right. A warning never blocks; one that needs a reason is settled by the reason the
 * author writes beside the rate. Keys are stable: they go into records and comments.
 */
export type WarningKey =
  | 'growth-fast'
  | 'doubling-under-a-week'
  | 'rate-or-multiplier'
  | 'share-or-rate'
  | 'loss-very-fast'
  | 'spread-over-100-per-cent'
  | 'measured-without-error'
  | 'capacity-below-counts'
  | 'capacity-below-one-animal'
  | 'harm-over-ten'
  | 'ration-very-large'
  | 'ration-above-own-mass'
  | 'consumer-cannot-persist'
  | 'consumer-starves-at-capacity'
  | 'removal-above-growth'
  | 'take-above-growth';

export interface Warning {
  key: WarningKey;
  path: RatePath;
  sentence: string;
  needsReason: boolean;
  /** The author's reason, empty while there is none. */
  reason: string;
}

interface Context {
  question: StudyQuestion;
  content: StudyContent;
  get: (path: RatePath) => number | undefined;
  /** Time units of the study in a year. */
  perYear: number;
}
type Found = Omit<Warning, 'reason' | 'path'>;

const warn = (key: WarningKey, sentence: string, needsReason = true): Found => ({ key, sentence, needsReason });

function growthWarnings(entry: RateEntry, value: number, { question, perYear }: Context): Found[] {
  const yearly = value * perYear;
  const words = growthWords(value, question.timeUnit);
  if (yearly > (Math.LN2 * daysIn.a) / 7) {
    return [
      warn(
        'doubling-under-a-week',
        `A population that ${words} is rare outside microbes and small plankton: check the value and its unit.`
      )
    ];
  }
  if (yearly > 5) {
    return [
      warn(
        'growth-fast',
        `r is ${formatNumber(yearly)} per year: it ${words}. That is too fast for almost any vertebrate, though small plants and insects reach it. Say why it is right here.`
      )
    ];
  }
  if (entry.unit === '/a' && entry.form === 'plain' && entry.value >= 1) {
    return [
      warn(
        'rate-or-multiplier',
        `As a rate this ${words}. If ${formatNumber(entry.value)} is how many times larger the population is a year later, choose “times a year”: then r is ${formatNumber(Math.log(entry.value))}.`,
        false
      )
    ];
  }
  return [];
}

function lossWarnings(entry: RateEntry, value: number, { perYear }: Context): Found[] {
  const found: Found[] = [];
  const yearly = value * perYear;
  if (yearly > 5) {
    found.push(
      warn(
        'loss-very-fast',
        `This takes ${formatPercent(-Math.expm1(-yearly), 4)} in a year: check the value and its unit.`
      )
    );
  }
  const isRound = Math.abs(entry.value * 20 - Math.round(entry.value * 20)) < 1e-9;
  if (entry.unit === '/a' && isRound && entry.value >= 0.2 && entry.value < 1) {
    const meant = formatPercent(entry.value);
    found.push(
      warn(
        'share-or-rate',
        `A rate of ${formatNumber(entry.value)} takes ${formatPercent(-Math.expm1(-entry.value))} a year. If ${meant} of those present was meant, choose “% lost a year”: the rate is then ${formatNumber(-Math.log1p(-entry.value))}.`
      )
    );
  }
  return found;
}

function spreadWarnings(entry: RateEntry, rate: ResolvedRate): Found[] {
  const isDecision = /removal|stocking/.test(entry.path);
  if (rate.cv !== null && rate.cv > 1) {
    return [
      warn(
        'spread-over-100-per-cent',
        'The error is larger than the value itself: this rate is hardly known, and the results lean on it as if it were.'
      )
    ];
  }
  if (rate.se === null && !isDecision) {
    return [
      warn(
        'measured-without-error',
        'A measured rate without an error makes every result look firmer than it is. Give a standard error, a CV or a range.',
        false
      )
    ];
  }
  return [];
}

function capacityWarnings(path: RatePath, value: number, { question, content }: Context): Found[] {
  const key = path.startsWith('first') ? 'first' : 'second';
  const unit = displayUnit(question[key].unit).text;
  const found: Found[] = [];
  const today = content.starts[0];
  const count = key === 'first' ? today?.x : today?.y;
  if (today && count !== undefined && count > value) {
    found.push(
      warn(
        'capacity-below-counts',
        `“${today.label}” has ${formatNumber(count)} ${unit}, more than this capacity of ${formatNumber(value)} ${unit}.`
      )
    );
  }
  const total = onTheArea(value, key, question);
  if (total && total.thing !== 'mass' && total.amount < 1) {
    found.push(
      warn(
        'capacity-below-one-animal',
        `This is ${wholeAreaWords(value, key, question)}: fewer than one. Check the area and the unit.`
      )
    );
  }
  return found;
}

function feedingWarnings(path: RatePath, { question, content, get, perYear }: Context): Found[] {
  const [a, h, e, m] = [get('feeding.a'), get('feeding.h'), get('feeding.e'), get('second.mortality')];
  const { response } = content.structure.feeding;
  const found: Found[] = [];
  const names = { resource: question.first.common, consumer: question.second.common };
  const [eaten, eater] = [question.first.unit, question.second.unit].map((unit) => unit.split('/')[0] ?? '');
  if (path === 'feeding.h' && h) {
    const daily = (1 / h) * (perYear / daysIn.a);
    const kilograms: Record<string, number> = { kg: 1, g: 1e-3, t: 1e3 };
    const inKilograms = daily * (kilograms[eaten ?? ''] ?? Number.NaN);
    const ownMass = kilograms[eater ?? ''];
    if (ownMass !== undefined && inKilograms / ownMass > 1) {
      found.push(
        warn(
          'ration-above-own-mass',
          `At most, ${names.consumer} would eat ${formatNumber(inKilograms / ownMass)} times its own mass a day.`
        )
      );
    } else if (eater === '{ind}' && inKilograms > 100) {
      found.push(
        warn(
          'ration-very-large',
          `At most, one of ${names.consumer} would eat ${formatNumber(inKilograms)} kg a day, more than the largest land animals: check h and its unit.`
        )
      );
    }
  }
  if (path === 'feeding.e' && e !== undefined && m !== undefined) {
    const loss = m + (get('second.removal.effort') ?? 0);
    const unit = displayUnit(`/${question.timeUnit}`).text;
    if (h && response !== 'holling-1' && e / h <= m) {
      found.push(
        warn(
          'consumer-cannot-persist',
          `With all the food there could be, the gain of ${names.consumer}, e/h = ${formatNumber(e / h)} ${unit}, is no more than the loss of ${formatNumber(m)} ${unit}: it can never persist on ${names.resource} alone.`
        )
      );
    } else {
      const K = get('first.growth.K');
      const power = response === 'holling-3' ? 2 : 1;
      const intake =
        a && K ? (a * K ** power) / (1 + (response === 'holling-1' ? 0 : a * (h ?? 0) * K ** power)) : null;
      if (intake !== null && e * intake <= loss) {
        found.push(
          warn(
            'consumer-starves-at-capacity',
            `Even with ${names.resource} at its capacity, the gain of ${names.consumer}, ${formatNumber(e * intake)} ${unit}, is no more than the loss of ${formatNumber(loss)} ${unit}: it will not persist.`
          )
        );
      }
    }
  }
  return found;
}

function managementWarnings(path: RatePath, value: number, { question, get }: Context): Found[] {
  const key = path.startsWith('first') ? 'first' : 'second';
  const name = question[key].common;
  const r = get(`${key}.growth.r`);
  const K = get(`${key}.growth.K`);
  const unit = displayUnit(`/${question.timeUnit}`).text;
  if (path.endsWith('.effort') && r !== undefined && r > 0 && value >= r) {
    return [
      warn(
        'removal-above-growth',
        `Removal of ${formatNumber(value)} ${unit} is at or above the growth of ${name} when rare, ${formatNumber(r)} ${unit}: nothing else need happen for it to be lost.`
      )
    ];
  }
  if (path.endsWith('.quota') && r !== undefined && K !== undefined) {
    const most = (r * K) / 4;
    const words = wholeAreaWords(most, key, question);
    if (value > most) {
      return [
        warn(
          'take-above-growth',
          `This fixed take is above the most that ${name} can replace, r·K/4 = ${words ?? formatNumber(most)} in a ${durationUnit(question)}: from any start there will be none left unless stocked.`
        )
      ];
    }
  }
  return [];
}

const durationUnit = (question: StudyQuestion) => formatDuration(1, question.timeUnit).replace(/^1 /, '');

function warningsFor(entry: RateEntry, rate: ResolvedRate, context: Context): Found[] {
  const { path } = entry;
  const { value } = rate;
  const found = spreadWarnings(entry, rate);
  if (path.endsWith('.growth.r')) found.push(...growthWarnings(entry, value, context));
  if (path.endsWith('.growth.K')) found.push(...capacityWarnings(path, value, context));
  if (path === 'second.mortality' || path.endsWith('.effort')) found.push(...lossWarnings(entry, value, context));
  if (path.startsWith('competition.alpha') && value > 10) {
    found.push(
      warn(
        'harm-over-ten',
        `One weighs as ${formatNumber(value)} of the other. Above 10 this is usually a unit slip or two values that were never measured apart.`
      )
    );
  }
  if (path.startsWith('feeding')) found.push(...feedingWarnings(path, context));
  if (path.endsWith('.effort') || path.endsWith('.quota')) found.push(...managementWarnings(path, value, context));
  return found;
}

/** Every warning of a study, in the order of the Rates table. Rates that cannot be read have issues instead. */
export function warningsOf(
  question: StudyQuestion,
  content: StudyContent,
  assembled: Assembled = assemble(question, content)
): Warning[] {
  const context: Context = {
    question,
    content,
    get: (path) => assembled.resolved[path]?.value,
    perYear: daysIn.a / daysIn[question.timeUnit]
  };
  return ratesNeeded(content.structure, question).flatMap(({ path }) => {
    const entry = content.rates.find((candidate) => candidate.path === path);
    const rate = assembled.resolved[path];
    if (!entry || !rate) return [];
    return warningsFor(entry, rate, context).map((found) => ({ ...found, path, reason: entry.overrideReason }));
  });
}
