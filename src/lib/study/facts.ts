import type { StudyQuestion } from '$lib/contracts/study';
import type { EquilibriaReport, SpeciesKey } from '$lib/dynamics';
import { areaWords, countedNoun } from './echo';
import { formatDuration, formatNumber, formatPercent, formatWithSE, sentenceCase, timeNames } from './format';
import { invasionsOf } from './invasions';
import { levelOf, pointsOf, type LetteredPoint, type PointErrors } from './points';
import { onTheArea } from './rateUnits';
import { displayUnit, type UnitPart } from './units';
import type { Verdict, VerdictExtras } from './verdict';

/** Up to four numbers that stand under the verdict, each saying what it is for. */
export interface Fact {
  label: string;
  value: string;
  /** To be set after ±; null where there is none. */
  se: string | null;
  unit: UnitPart[];
  /** A short line below, or null. */
  note: string | null;
}

interface FactExtras extends VerdictExtras {
  /** Standard errors by letter of the point. */
  errors?: Partial<Record<string, PointErrors>>;
}

const MOST = 4;

function level(label: string, value: number, se: number | null, key: SpeciesKey, question: StudyQuestion): Fact {
  const shown = formatWithSE(value, se);
  const total = onTheArea(value, key, question);
  const isCounted = total !== null && total.thing !== 'mass' && question[key].unit !== '{ind}';
  const noun = total?.thing === 'pairs' ? 'pairs' : countedNoun(key, question);
  return {
    label,
    value: shown.se === null ? formatNumber(value) : shown.value,
    se: shown.se,
    unit: displayUnit(question[key].unit).parts,
    note: isCounted ? `${formatNumber(total.amount)} ${noun} on ${areaWords(question)}` : null
  };
}

const text = (label: string, value: string, note: string | null = null): Fact => ({
  label,
  value,
  se: null,
  unit: [],
  note
});

function levelAt(point: LetteredPoint, key: SpeciesKey, question: StudyQuestion, errors: FactExtras['errors']): Fact {
  const se = errors?.[point.letter];
  const value = levelOf(point, key);
  return level(
    `${question[key].common} at rest (${point.letter})`,
    value,
    (key === 'first' ? se?.seX : se?.seY) ?? null,
    key,
    question
  );
}

function returnFact(point: LetteredPoint, question: StudyQuestion): Fact[] {
  const time = point.equilibrium?.returnTime ?? null;
  if (time === null) return [];
  const horizon = formatDuration(question.horizon, question.timeUnit);
  const note = time > question.horizon ? `longer than the horizon of ${horizon}` : `within the horizon of ${horizon}`;
  return [text('Time for a knock to shrink to a third', formatDuration(time, question.timeUnit), note)];
}

function invasionFacts(question: StudyQuestion, report: EquilibriaReport, extras: FactExtras): Fact[] {
  return invasionsOf(question, report, extras.model).flatMap(({ invader, rate }): Fact[] => {
    const name = question[invader].common;
    const unit = displayUnit(`/${question.timeUnit}`).parts;
    const growth: Fact = {
      label: `Growth of ${name} when rare`,
      value: formatNumber(rate),
      se: null,
      unit,
      note: null
    };
    if (!(rate > 0) || (extras.model[invader].stocking ?? 0) > 0) return [growth];
    // Removal subtracts from growth per head one for one, so that this much more of it keeps a rare newcomer from growing.
    const share = `${formatPercent(-Math.expm1(-rate))} ${timeNames[question.timeUnit].per}`;
    return [{ ...growth, note: `further removal above this, ${share}, keeps it from arriving` }];
  });
}

/** Facts for the page of equilibria, at most four, most useful first. */
export function factsFor(
  question: StudyQuestion,
  report: EquilibriaReport,
  found: Pick<Verdict, 'kind'>,
  extras: FactExtras
): Fact[] {
  const points = pointsOf(report);
  const stable = points.filter((point) => point.stability === 'stable');
  const watched: SpeciesKey = question.protects === 'second' ? 'second' : 'first';
  const [point] = stable;
  const cycle = extras.cycles?.find((each) => each.stability === 'stable');
  const facts: Fact[] = [];
  if (found.kind === 'cycles' && cycle) {
    const [low, high, mean] =
      watched === 'first' ? [cycle.xMin, cycle.xMax, cycle.xMean] : [cycle.yMin, cycle.yMax, cycle.yMean];
    const name = sentenceCase(question[watched].common);
    facts.push(
      text('Length of a cycle', formatDuration(cycle.period, question.timeUnit)),
      level(`${name} at the low point`, low, null, watched, question),
      level(`${name} at the high point`, high, null, watched, question),
      level(`${name}, mean of the cycle`, mean, null, watched, question)
    );
  } else if (found.kind === 'coexistence' && point) {
    for (const key of ['first', 'second'] as const) facts.push(levelAt(point, key, question, extras.errors));
    facts.push(...returnFact(point, question));
    const period = point.equilibrium?.period;
    if (period) facts.push(text('Length of a dying swing', formatDuration(period, question.timeUnit)));
  } else if (found.kind === 'exclusion' && point) {
    const winner: SpeciesKey = point.who === 'second' ? 'second' : 'first';
    facts.push(levelAt(point, winner, question, extras.errors), ...returnFact(point, question));
    facts.push(...invasionFacts(question, report, extras));
  } else if (found.kind === 'depends') {
    for (const each of stable) {
      if (each.who === 'neither') continue;
      facts.push(levelAt(each, each.who === 'both' ? watched : each.who, question, extras.errors));
    }
    facts.push(text('Ways it can end', formatNumber(Math.max(2, stable.length + (cycle ? 1 : 0)))));
  } else {
    facts.push(...invasionFacts(question, report, extras));
  }
  return facts.slice(0, MOST);
}
