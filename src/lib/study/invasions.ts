import type { StudyQuestion } from '$lib/contracts/study';
import type { EquilibriaReport, ModelSpec, SpeciesKey } from '$lib/dynamics';
import { growthWords } from './echo';
import { formatNumber, plusMinus } from './format';
import { levelOf, levelWords, pointsOf } from './points';
import { displayUnit } from './units';

/** Who invades whom when rare. */

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
