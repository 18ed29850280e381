import type { ModelStructure, RateEntry, RatePath } from '$lib/contracts/content';
import { abundanceUnits, timeUnits, type StudyQuestion, type TimeUnit } from '$lib/contracts/study';
import { daysIn, listWords, timeNames } from './format';
import { transformFor, transformOf, type UnitKind } from './transforms';
import { combine, composeCode, displayUnit, measuredThing, parseUnit, sameDimensions, type Unit } from './units';

/**
 * Which units each rate may be typed in, and the way from there to the study's own units and back.
 * Continuous rates are what the equations use; a yearly share, a multiplier or a doubling time is turned into one here.
 */

export type { UnitKind };
export interface UnitOption {
  code: string;
  /** As people write it, e.g. `ind/ha`, `% lost a year`. */
  label: string;
  kind: UnitKind;
}
export type Converted = { ok: true; value: number; derivative: number } | { ok: false; message: string };
/** What changes the unit of a rate beside its path: the crowding form of r, and sigmoid feeding for the attack rate. */
export interface UnitContext {
  form?: RateEntry['form'];
  response?: ModelStructure['feeding']['response'];
}

type Role = 'time' | 'first' | 'second';
type Factor = readonly [Role, 1 | -1];

const perTime: Factor[] = [['time', -1]];
const ratioSecondPerFirst: Factor[] = [
  ['second', 1],
  ['first', -1]
];

/** The study unit of each path as a product; order is the order of reading. */
const products: Record<RatePath, Factor[]> = {
  'first.growth.r': perTime,
  'first.growth.K': [['first', 1]],
  'first.growth.A': [['first', 1]],
  'first.removal.effort': perTime,
  'first.removal.quota': [
    ['first', 1],
    ['time', -1]
  ],
  'first.stocking': [
    ['first', 1],
    ['time', -1]
  ],
  'second.growth.r': perTime,
  'second.growth.K': [['second', 1]],
  'second.growth.A': [['second', 1]],
  'second.growth.g': ratioSecondPerFirst,
  'second.mortality': perTime,
  'second.selfLimitation': [
    ['second', -1],
    ['time', -1]
  ],
  'second.removal.effort': perTime,
  'second.removal.quota': [
    ['second', 1],
    ['time', -1]
  ],
  'second.stocking': [
    ['second', 1],
    ['time', -1]
  ],
  'competition.alpha12': [
    ['first', 1],
    ['second', -1]
  ],
  'competition.alpha21': ratioSecondPerFirst,
  'competition.b12': [
    ['second', -1],
    ['time', -1]
  ],
  'competition.b21': [
    ['first', -1],
    ['time', -1]
  ],
  'feeding.a': [
    ['second', -1],
    ['time', -1]
  ],
  'feeding.h': [['time', 1], ...ratioSecondPerFirst],
  'feeding.e': ratioSecondPerFirst,
  'feeding.interference': [['second', -1]]
};

function productOf(path: RatePath, context: UnitContext): Factor[] {
  if (context.form === 'crowding' && path.endsWith('.growth.r')) {
    return [[path.startsWith('first') ? 'first' : 'second', -1], ...perTime];
  }
  if (path === 'feeding.a' && context.response === 'holling-3') {
    return [['first', -1], ['second', -1], ...perTime];
  }
  return products[path];
}

function ownCode(role: Role, question: StudyQuestion): string {
  return role === 'time' ? question.timeUnit : question[role].unit;
}

function codeOf(product: readonly Factor[], choose: (role: Role) => string): string {
  return composeCode(product.map(([role, power]) => [choose(role), power] as const));
}

/** Code of the unit in which the model takes this rate. */
export function studyUnit(path: RatePath, question: StudyQuestion, context: UnitContext = {}): string {
  return codeOf(productOf(path, context), (role) => ownCode(role, question));
}

const fallback: Unit = { dimensions: { time: 0, area: 0, mass: 0, individuals: 0, pairs: 0, cover: 0 }, factor: 1 };
const unitOf = (code: string): Unit => parseUnit(code) ?? fallback;

/** The study's area in hectares. */
export function areaInHectares(question: StudyQuestion): number {
  return question.area.value * unitOf(question.area.unit).factor;
}

/** Abundance units that count the same thing, the study's own first. */
function kin(role: 'first' | 'second', question: StudyQuestion): string[] {
  const own = question[role].unit;
  const others = abundanceUnits.filter(
    (code) => code !== own && sameDimensions(unitOf(code).dimensions, unitOf(own).dimensions, 'area')
  );
  return [own, ...others];
}

/** Amounts without their area, `kg` of `kg/har`, with the usual multiples. */
function amounts(role: 'first' | 'second', question: StudyQuestion): string[] {
  const own = question[role].unit.split('/')[0] ?? question[role].unit;
  return unitOf(own).dimensions.mass === 1 ? [own, ...['kg', 'g', 't'].filter((code) => code !== own)] : [own];
}

function times(question: StudyQuestion, wanted: readonly TimeUnit[] = timeUnits): TimeUnit[] {
  return [question.timeUnit, ...wanted.filter((unit) => unit !== question.timeUnit)];
}

const isAbundance = (path: RatePath) => path.endsWith('.K') || path.endsWith('.A');
const isFlow = (path: RatePath) => path.endsWith('.quota') || path.endsWith('.stocking');

function plainCodes(path: RatePath, question: StudyQuestion, context: UnitContext): string[] {
  const product = productOf(path, context);
  const roles = product.map(([role]) => role);
  const hasRatio = roles.includes('first') && roles.includes('second') && !path.startsWith('feeding.a');
  const timeChoices = roles.includes('time')
    ? times(question, isFlow(path) ? ['a'] : roles.length === 1 ? timeUnits : ['a', 'd'])
    : [question.timeUnit];
  const choices = (role: 'first' | 'second') => {
    if (!roles.includes(role)) return [question[role].unit as string];
    if (hasRatio) return amounts(role, question);
    if (isAbundance(path) || isFlow(path)) return kin(role, question);
    const isDensity = unitOf(question[role].unit).dimensions.area !== 0;
    return kin(role, question).filter((code) => !isDensity || unitOf(code).dimensions.area !== 0);
  };
  const codes = [studyUnit(path, question, context)];
  for (const first of choices('first')) {
    for (const second of choices('second')) {
      for (const time of timeChoices) {
        codes.push(codeOf(product, (role) => (role === 'time' ? time : role === 'first' ? first : second)));
      }
    }
  }
  return [...new Set(codes)];
}

function leadsFor(path: RatePath, context: UnitContext): string[] {
  if (path.endsWith('.growth.r')) return context.form === 'crowding' ? [] : ['{lambda}/', '%+/', '{doubling}.'];
  if (path === 'second.mortality') return ['%/', '%{kept}/', '{halving}.'];
  if (path.endsWith('.effort')) return ['%/'];
  return [];
}

/** Units this rate may be typed in, the study's own first, then its kin, then shares, multipliers and times. */
export function unitsFor(path: RatePath, question: StudyQuestion, context: UnitContext = {}): UnitOption[] {
  const options: UnitOption[] = plainCodes(path, question, context).map((code) => ({
    code,
    label: unitLabel(code, path, question),
    kind: 'plain'
  }));
  for (const lead of leadsFor(path, context)) {
    const kind = transformFor(lead)?.kind ?? 'plain';
    for (const unit of times(question)) {
      options.push({ code: lead + unit, label: displayUnit(lead + unit).text, kind });
    }
  }
  if (path === 'feeding.h') {
    for (const code of plainCodes(path, question, context)) {
      const inverse = composeCode([[code, -1]]);
      options.push({ code: inverse, label: `${displayUnit(inverse).text} at most`, kind: 'most eaten' });
    }
  }
  return options;
}

function unitLabel(code: string, path: RatePath, question: StudyQuestion): string {
  if (code === '1') return path.startsWith('competition.alpha') ? 'one for one' : 'no unit';
  const label = displayUnit(code).text;
  const isOnWholeArea = unitOf(code).dimensions.area === 0 && unitOf(studyUnit(path, question)).dimensions.area !== 0;
  return isOnWholeArea && (isAbundance(path) || isFlow(path)) ? `${label} on the whole area` : label;
}

/** Factor from a plain unit to the study's unit, counting whole-area numbers by the study's area; null if it does not fit. */
function plainFactor(typed: Unit, own: Unit, question: StudyQuestion): number | null {
  if (!sameDimensions(typed.dimensions, own.dimensions, 'area')) return null;
  const missingArea = own.dimensions.area - typed.dimensions.area;
  return (typed.factor / own.factor) * areaInHectares(question) ** missingArea;
}

/** A short list of units that would do, for a refusal. */
function suggestions(path: RatePath, question: StudyQuestion, context: UnitContext): string {
  const labels = unitsFor(path, question, context).map((option) => (option.code === '1' ? 'no unit' : option.label));
  return listWords([...new Set(labels)].slice(0, 3), 'or');
}

function refuse(code: string, path: RatePath, question: StudyQuestion, context: UnitContext): string {
  const typed = parseUnit(code);
  const own = unitOf(studyUnit(path, question, context));
  const fix = `Give it in ${suggestions(path, question, context)}.`;
  const shown = displayUnit(code).text;
  if (!typed && !transformOf(code)) return `“${code}” is not a unit Sedgeline knows. ${fix}`;
  if (typed) {
    const isMass = (unit: Unit) => unit.dimensions.mass !== 0;
    const isCounted = (unit: Unit) => unit.dimensions.individuals !== 0 || unit.dimensions.pairs !== 0;
    if (isMass(typed) !== isMass(own) && isCounted(typed) !== isCounted(own)) {
      return `${shown} measures ${measuredThing(typed.dimensions)}, and this rate needs ${measuredThing(own.dimensions)}: kilograms and individuals cannot be mixed. ${fix}`;
    }
    if (
      typed.dimensions.pairs !== own.dimensions.pairs &&
      typed.dimensions.individuals !== own.dimensions.individuals
    ) {
      return `${shown} counts ${measuredThing(typed.dimensions)}, and this rate needs ${measuredThing(own.dimensions)}: a pair is not an individual. ${fix}`;
    }
    if (typed.dimensions.time !== own.dimensions.time) {
      return typed.dimensions.time === 0
        ? `${shown} has no time in it, and this rate is per time. ${fix}`
        : `${shown} does not count time the way this rate does. ${fix}`;
    }
  }
  return `${shown} does not fit this rate. ${fix}`;
}

/**
 * From what was typed to the study's unit.
 * @returns the value and the slope d(study value)/d(typed value), which carries a standard error across; or a sentence that
 *   says why not and what would do.
 */
export function toStudyUnit(
  value: number,
  code: string,
  path: RatePath,
  question: StudyQuestion,
  context: UnitContext = {}
): Converted {
  if (!Number.isFinite(value)) return { ok: false, message: 'Give a finite number.' };
  const special = transformOf(code);
  if (special && leadsFor(path, context).includes(special.lead)) {
    const years = daysIn[special.unit] / daysIn.a;
    const perYear = special.transform.to(value, years);
    if (perYear === null) {
      return { ok: false, message: special.transform.refusal(value, timeNames[special.unit].per) };
    }
    const scale = daysIn[question.timeUnit] / daysIn.a;
    return finite(perYear * scale, special.transform.slope(value, years) * scale);
  }
  const typed = parseUnit(code);
  const own = unitOf(studyUnit(path, question, context));
  const factor = typed && plainFactor(typed, own, question);
  if (typeof factor === 'number') return finite(value * factor, factor);
  const inverse = typed && path === 'feeding.h' ? plainFactor(combine([typed, -1]), own, question) : null;
  if (typeof inverse === 'number') {
    if (!(value > 0)) return { ok: false, message: 'The most one consumer eats must be above 0.' };
    return finite(inverse / value, -inverse / (value * value));
  }
  return { ok: false, message: refuse(code, path, question, context) };
}

function finite(value: number, derivative: number): Converted {
  const size = Math.abs(value);
  // The engine's own limits; a model of such numbers could be typed but not computed.
  const isUsable = size === 0 || (size >= 1e-50 && size <= 1e50);
  return isUsable && Number.isFinite(derivative)
    ? { ok: true, value, derivative }
    : { ok: false, message: 'This number is too large or too small to work with: check it and its unit.' };
}

/**
 * From the study's unit to any unit of the rate; the inverse of `toStudyUnit`.
 * @returns null when the unit does not fit or cannot express the value (a doubling time of a decline).
 */
export function fromStudyUnit(
  value: number,
  code: string,
  path: RatePath,
  question: StudyQuestion,
  context: UnitContext = {}
): number | null {
  const special = transformOf(code);
  if (special && leadsFor(path, context).includes(special.lead)) {
    const perYear = (value * daysIn.a) / daysIn[question.timeUnit];
    return special.transform.from(perYear, daysIn[special.unit] / daysIn.a);
  }
  const typed = parseUnit(code);
  const own = unitOf(studyUnit(path, question, context));
  const factor = typed && plainFactor(typed, own, question);
  if (typeof factor === 'number') return value / factor;
  const inverse = typed && path === 'feeding.h' ? plainFactor(combine([typed, -1]), own, question) : null;
  return typeof inverse === 'number' && value > 0 ? inverse / value : null;
}

/**
 * An abundance in the study's unit as a number on the whole area and per square kilometre.
 * @returns amount in individuals, pairs or kilograms on the area; null for cover, which has no total.
 */
export function onTheArea(
  value: number,
  species: 'first' | 'second',
  question: StudyQuestion
): { amount: number; thing: 'individuals' | 'pairs' | 'mass' } | null {
  const unit = unitOf(question[species].unit);
  if (unit.dimensions.cover !== 0) return null;
  const amount = value * unit.factor * areaInHectares(question) ** -unit.dimensions.area;
  const thing = unit.dimensions.mass ? 'mass' : unit.dimensions.pairs ? 'pairs' : 'individuals';
  return { amount, thing };
}
