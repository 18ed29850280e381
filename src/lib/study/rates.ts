import type { ModelStructure, RatePath } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';

/** Which numbers a model needs, and what each is called. One list for the Rates table, its form, the equations and the report. */

export type RateGroup = 'first' | 'second' | 'between' | 'management';
/** What the model lets a rate be, in study units. */
export type RateRange = 'any' | 'positive' | 'not negative';
export interface RateNeed {
  path: RatePath;
  /** `tex` for KaTeX, `plain` with subscripts as characters. */
  symbol: { tex: string; plain: string };
  /** In plain words, with the study's own species names. */
  name: string;
  group: RateGroup;
  /** One line: what the number says, or how it is measured. */
  help: string;
  range: RateRange;
  /** The crowding form `a·n·(K − n)` may be typed in place of r. */
  crowdingForm: boolean;
  /** A model may go without it; `defaultValue` is then taken. */
  optional: boolean;
  defaultValue: number | null;
}

type Names = { first: string; second: string };
interface Definition {
  tex: string;
  plain: string;
  group: RateGroup;
  range: RateRange;
  name: (names: Names) => string;
  help: (names: Names) => string;
}

const define = (
  symbol: readonly [tex: string, plain: string],
  group: RateGroup,
  range: RateRange,
  name: (names: Names) => string,
  help: (names: Names) => string
): Definition => ({ tex: symbol[0], plain: symbol[1], group, range, name, help });

const capacityHelp = 'The level at which growth stops when the other species is absent.';
const alleeHelp = 'Below this level the population shrinks even when alone.';
const effortHelp = 'Share of the animals present that is taken, as a rate: a yearly share is turned into one.';
const quotaHelp = 'A fixed amount taken per time, whatever is there, for as long as any are left.';
const stockingHelp = 'A fixed amount added per time.';

const definitions: Record<RatePath, Definition> = {
  'first.growth.r': define(
    ['r_1', 'r₁'],
    'first',
    'positive',
    () => 'Growth when rare',
    () => 'Growth per head when there are few of either species.'
  ),
  'first.growth.K': define(
    ['K_1', 'K₁'],
    'first',
    'positive',
    () => 'Capacity when alone',
    () => capacityHelp
  ),
  'first.growth.A': define(
    ['A_1', 'A₁'],
    'first',
    'positive',
    () => 'Level below which it dwindles',
    () => alleeHelp
  ),
  'second.growth.r': define(
    ['r_2', 'r₂'],
    'second',
    'positive',
    () => 'Growth when rare',
    () => 'Growth per head when there are few of either species.'
  ),
  'second.growth.K': define(
    ['K_2', 'K₂'],
    'second',
    'positive',
    () => 'Capacity when alone',
    () => capacityHelp
  ),
  'second.growth.A': define(
    ['A_2', 'A₂'],
    'second',
    'positive',
    () => 'Level below which it dwindles',
    () => alleeHelp
  ),
  'second.growth.g': define(
    ['g', 'g'],
    'second',
    'positive',
    ({ first, second }) => `${second} that each unit of ${first} can carry`,
    ({ first }) => `Its ceiling follows ${first}: ceiling = g × abundance of ${first}.`
  ),
  'second.mortality': define(
    ['m', 'm'],
    'second',
    'not negative',
    () => 'Loss without food',
    ({ first }) => `Deaths per head when there is no ${first} to eat.`
  ),
  'second.selfLimitation': define(
    ['d', 'd'],
    'second',
    'not negative',
    () => 'Crowding among themselves',
    () => 'Extra deaths per head for each unit of their own abundance.'
  ),
  'competition.alpha12': define(
    ['\\alpha_{12}', 'α₁₂'],
    'between',
    'not negative',
    ({ second }) => `Harm from one ${second}`,
    ({ first, second }) => `How many ${first} one ${second} weighs as, in using up the capacity of ${first}.`
  ),
  'competition.alpha21': define(
    ['\\alpha_{21}', 'α₂₁'],
    'between',
    'not negative',
    ({ first }) => `Harm from one ${first}`,
    ({ first, second }) => `How many ${second} one ${first} weighs as, in using up the capacity of ${second}.`
  ),
  'competition.b12': define(
    ['b_{12}', 'b₁₂'],
    'between',
    'not negative',
    ({ second }) => `Loss per ${second} met`,
    ({ first, second }) => `Growth per head that ${first} lose for each unit of ${second}.`
  ),
  'competition.b21': define(
    ['b_{21}', 'b₂₁'],
    'between',
    'not negative',
    ({ first }) => `Loss per ${first} met`,
    ({ first, second }) => `Growth per head that ${second} lose for each unit of ${first}.`
  ),
  'feeding.a': define(
    ['a', 'a'],
    'between',
    'positive',
    ({ first }) => `Attack rate on ${first}`,
    ({ first, second }) => `Area that one ${second} clears of ${first} per time, when ${first} are few.`
  ),
  'feeding.h': define(
    ['h', 'h'],
    'between',
    'not negative',
    ({ first }) => `Handling time of ${first}`,
    ({ first, second }) => `Time one ${second} needs for one unit of ${first}; 1/h is the most it can eat.`
  ),
  'feeding.e': define(
    ['e', 'e'],
    'between',
    'positive',
    ({ first, second }) => `New ${second} per ${first} eaten`,
    ({ first, second }) => `How much ${second} one unit of eaten ${first} becomes.`
  ),
  'feeding.interference': define(
    ['w', 'w'],
    'between',
    'not negative',
    ({ second }) => `Getting in each other's way among ${second}`,
    ({ second }) => `How far feeding slows for each unit of ${second} present.`
  ),
  'first.removal.effort': define(
    ['E_1', 'E₁'],
    'management',
    'not negative',
    ({ first }) => `Removal of ${first}, as a rate`,
    () => effortHelp
  ),
  'first.removal.quota': define(
    ['Q_1', 'Q₁'],
    'management',
    'not negative',
    ({ first }) => `Removal of ${first}, as a fixed take`,
    () => quotaHelp
  ),
  'first.stocking': define(
    ['S_1', 'S₁'],
    'management',
    'not negative',
    ({ first }) => `Stocking of ${first}`,
    () => stockingHelp
  ),
  'second.removal.effort': define(
    ['E_2', 'E₂'],
    'management',
    'not negative',
    ({ second }) => `Removal of ${second}, as a rate`,
    () => effortHelp
  ),
  'second.removal.quota': define(
    ['Q_2', 'Q₂'],
    'management',
    'not negative',
    ({ second }) => `Removal of ${second}, as a fixed take`,
    () => quotaHelp
  ),
  'second.stocking': define(
    ['S_2', 'S₂'],
    'management',
    'not negative',
    ({ second }) => `Stocking of ${second}`,
    () => stockingHelp
  )
};

/** Common names as typed. */
export function speciesNames(question: StudyQuestion): Names {
  return { first: question.first.common, second: question.second.common };
}

/** Paths that a structure asks for, in the order of the Rates table. */
export function pathsOf(structure: ModelStructure): RatePath[] {
  const { first, second } = structure;
  const isCompetition = structure.interaction === 'competition';
  const paths: RatePath[] = ['first.growth.r'];
  if (first.growth !== 'exponential') paths.push('first.growth.K');
  if (first.growth === 'allee') paths.push('first.growth.A');

  if (second.growth === 'mortality') paths.push('second.mortality');
  else paths.push('second.growth.r');
  if (second.growth === 'logistic' || second.growth === 'allee') paths.push('second.growth.K');
  if (second.growth === 'allee') paths.push('second.growth.A');
  if (second.growth === 'leslie') paths.push('second.growth.g');
  if (!isCompetition && second.selfLimitation) paths.push('second.selfLimitation');

  if (isCompetition) {
    if (structure.competition === 'coefficients') paths.push('competition.alpha12', 'competition.alpha21');
    else paths.push('competition.b12', 'competition.b21');
  } else {
    const { response, interference } = structure.feeding;
    paths.push('feeding.a');
    if (response !== 'holling-1') paths.push('feeding.h');
    paths.push('feeding.e');
    if (response !== 'holling-1' && interference) paths.push('feeding.interference');
  }

  for (const key of ['first', 'second'] as const) {
    if (structure[key].effort) paths.push(`${key}.removal.effort`);
    if (structure[key].quota) paths.push(`${key}.removal.quota`);
    if (structure[key].stocking) paths.push(`${key}.stocking`);
  }
  return paths;
}

function rangeOf(path: RatePath, structure: ModelStructure): RateRange {
  if (path === 'first.growth.r' && structure.first.growth === 'exponential') return 'any';
  if (path === 'second.growth.r' && structure.second.growth === 'exponential') return 'any';
  // A consumer that grows by itself need not gain anything from what it eats.
  if (path === 'feeding.e' && structure.second.growth !== 'mortality') return 'not negative';
  return definitions[path].range;
}

/** What one path is called in this study. */
export function rateNeed(path: RatePath, structure: ModelStructure, question: StudyQuestion): RateNeed {
  const definition = definitions[path];
  const names = speciesNames(question);
  const growth = path.startsWith('first') ? structure.first.growth : structure.second.growth;
  const isOptional = path === 'feeding.e' && structure.second.growth === 'leslie';
  return {
    path,
    symbol: { tex: definition.tex, plain: definition.plain },
    name: definition.name(names),
    group: definition.group,
    help: definition.help(names),
    range: rangeOf(path, structure),
    crowdingForm: path.endsWith('.growth.r') && growth === 'logistic',
    optional: isOptional,
    defaultValue: isOptional ? 0 : null
  };
}

/** Every rate that this structure needs, in the order of the Rates table. */
export function ratesNeeded(structure: ModelStructure, question: StudyQuestion): RateNeed[] {
  return pathsOf(structure).map((path) => rateNeed(path, structure, question));
}
