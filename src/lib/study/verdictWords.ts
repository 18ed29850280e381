import type { StudyQuestion } from '$lib/contracts/study';
import type { EquilibriaReport, ModelSpec, SpeciesKey } from '$lib/dynamics';
import { areaWords } from './echo';
import { countWord, formatDuration, sentenceCase } from './format';
import {
  beyondHorizon,
  isBelowOne,
  levelOf,
  levelWords,
  type CycleFacts,
  type LetteredPoint,
  type Who
} from './points';
import type { Outcome, VerdictKind, VerdictPart } from './verdict';

/**
 * The words of a verdict, one function a kind. Names of species may be singular or plural, so that every verb that follows
 * one is a modal or has both species for its subject.
 */

export type Piece = string | VerdictPart;
export interface Situation {
  question: StudyQuestion;
  model: ModelSpec;
  report: EquilibriaReport;
  points: LetteredPoint[];
  stable: LetteredPoint[];
  stableCycle: CycleFacts | null;
  outcome: Outcome | null;
  /** Species that, alone, grow without a ceiling. */
  unlimited: SpeciesKey[];
}

const strong = (text: string): VerdictPart => ({ strong: text });
const species = (key: SpeciesKey, question: StudyQuestion): VerdictPart => ({
  species: key,
  text: question[key].common
});
const both = (question: StudyQuestion): Piece[] => [species('first', question), ' and ', species('second', question)];
const otherOf = (key: SpeciesKey): SpeciesKey => (key === 'first' ? 'second' : 'first');
const isPresent = (who: Who, key: SpeciesKey) => who === 'both' || who === key;

/** What the verdict is conditional on: `at these rates`, `at this removal`. */
function condition({ model }: Situation): string {
  const managed = (['first', 'second'] as const).map((key) => model[key]);
  const hasEffort = managed.some((each) => (each.removal?.effort ?? 0) > 0);
  const hasTake = managed.some((each) => (each.removal?.quota ?? 0) > 0);
  const hasStocking = managed.some((each) => (each.stocking ?? 0) > 0);
  if (Number(hasEffort) + Number(hasTake) + Number(hasStocking) > 1) return 'under this management';
  if (hasEffort) return 'at this removal';
  if (hasTake) return 'with this take';
  return hasStocking ? 'with this stocking' : 'at these rates';
}
const opening = (now: Situation) => `${sentenceCase(condition(now))} `;

const short = (point: { x: number; y: number }, key: SpeciesKey, question: StudyQuestion) =>
  levelWords(levelOf(point, key), key, question, { onArea: false });

/** A warning where the return outlasts the horizon. */
function slowly(point: LetteredPoint, question: StudyQuestion): Piece[] {
  const time = point.equilibrium?.returnTime ?? null;
  const beyond = time === null ? null : beyondHorizon(time, question);
  if (time === null || !beyond) return [];
  return [
    ` The return takes about ${formatDuration(time, question.timeUnit)}, ${beyond}: look at the path, not the resting point.`
  ];
}

function tooFew(point: LetteredPoint, question: StudyQuestion): Piece[] {
  return (['first', 'second'] as const).flatMap((key): Piece[] =>
    isBelowOne(levelOf(point, key), key, question)
      ? [' That is fewer than one of ', species(key, question), ` on ${areaWords(question)}.`]
      : []
  );
}

function coexistence(now: Situation): Piece[] {
  const { question, stable, stableCycle } = now;
  const [point] = stable;
  const lead = [opening(now), ...both(question), ' '];
  if (!point) return [...lead, strong('persist together'), '.'];
  if (stable.length > 1) {
    const levels = stable.map((each) => `${short(each, 'first', question)} with ${short(each, 'second', question)}`);
    return [
      ...lead,
      strong('persist together'),
      `, at one of ${countWord(stable.length)} pairs of levels, and the start decides which: ${levels.join(', or ')}.`
    ];
  }
  const at = `${short(point, 'first', question)} and ${levelWords(point.y, 'second', question)}`;
  const words: Piece[] = stableCycle
    ? [strong('persist together'), `, at rest at ${at}, or in a cycle: the start decides.`]
    : [strong('settle together'), `, at ${at}.`];
  return [...lead, ...words, ...tooFew(point, question), ...slowly(point, question)];
}

function exclusion(now: Situation, who: SpeciesKey): Piece[] {
  const { question, model, stable, unlimited } = now;
  const lost = otherOf(who);
  const point = stable.find((each) => each.who === who);
  const rests: Piece[] = point
    ? [' The resting level of ', species(who, question), ` is then ${levelWords(levelOf(point, who), who, question)}.`]
    : [];
  const after = [...rests, ...(point ? slowly(point, question) : [])];
  const lead = opening(now);
  if (point?.absorbing) {
    return [lead, species(lost, question), ' will ', strong('run out'), ', and the fixed take keeps it so.', ...after];
  }
  if (model.interaction === 'competition') {
    if (unlimited.includes(who)) return unbounded(now);
    return [lead, species(who, question), ' will ', strong('exclude'), ' ', species(lost, question), '.', ...after];
  }
  return lost === 'second'
    ? [
        lead,
        species('second', question),
        ' ',
        strong('cannot persist'),
        ' on ',
        species('first', question),
        '.',
        ...after
      ]
    : [
        lead,
        species('first', question),
        ' will be ',
        strong('eaten out'),
        ' by ',
        species('second', question),
        '.',
        ...after
      ];
}

function crash(now: Situation): Piece[] {
  const isHeld = now.stable.some((point) => point.absorbing);
  return [
    opening(now),
    ...both(now.question),
    ' are ',
    strong('both lost'),
    isHeld ? ': the fixed take outlasts what it is taken from.' : '.'
  ];
}

function endWords(point: LetteredPoint, question: StudyQuestion): Piece[] {
  if (point.who === 'neither') return ['neither species'];
  if (point.who === 'both')
    return [`both, at ${short(point, 'first', question)} and ${short(point, 'second', question)}`];
  return [species(point.who, question), ` alone at ${short(point, point.who, question)}`];
}

function todayWords(outcome: Outcome | null, question: StudyQuestion): Piece[] {
  if (!outcome) return [];
  const lead = ', and today’s counts lead to ';
  if (outcome.ends === 'cycle') return [lead, 'a cycle'];
  if (outcome.ends === 'unbounded') return [lead, species(outcome.species, question), ' growing without limit'];
  if (outcome.ends === 'both') return [lead, 'both'];
  if (outcome.ends === 'neither') return [lead, 'neither'];
  const { protects } = question;
  if (protects !== outcome.ends && (protects === 'first' || protects === 'second')) {
    return [', and today’s counts start on the losing side: they lead to ', species(outcome.ends, question), ' alone'];
  }
  return [lead, species(outcome.ends, question), ' alone'];
}

function depends(now: Situation, ends: readonly Who[]): Piece[] {
  const { question, stable, outcome, unlimited, stableCycle } = now;
  const inDoubt = (['first', 'second'] as const).filter((key) => {
    const kept = ends.map((who) => isPresent(who, key));
    return kept.some(Boolean) && !kept.every(Boolean);
  });
  const [only] = inDoubt;
  const isEitherOr = ends.length === 2 && ends.includes('first') && ends.includes('second');
  const subject: Piece[] =
    inDoubt.length === 1 && only
      ? ['Whether ', species(only, question), ' will persist']
      : isEitherOr
        ? ['Which of ', ...both(question), ' persists']
        : ['What becomes of ', ...both(question)];
  const endings: Piece[][] = [
    ...stable.map((point) => endWords(point, question)),
    ...(stableCycle ? [['both in a cycle']] : []),
    ...(now.model.interaction === 'competition' ? unlimited : []).map((key): Piece[] => [
      species(key, question),
      ' growing without limit'
    ])
  ];
  return [
    ...subject,
    ` ${condition(now)} `,
    strong('depends on where you start'),
    ...todayWords(outcome, question),
    '. It ends with ',
    ...endings.flatMap((ending, i): Piece[] => [i === 0 ? '' : ', or with ', ...ending]),
    '.'
  ];
}

function cycles(now: Situation): Piece[] {
  const { question, stableCycle } = now;
  const lead: Piece[] = [opening(now), ...both(question), ' ', strong('cycle'), '.'];
  if (!stableCycle)
    return [...lead, ' The point where both could rest does not hold, and paths keep swinging around it.'];
  const watched: SpeciesKey = question.protects === 'second' ? 'second' : 'first';
  const low = watched === 'first' ? stableCycle.xMin : stableCycle.yMin;
  return [
    ...lead,
    ` They swing every ${formatDuration(stableCycle.period, question.timeUnit)}, and the low point leaves ${levelWords(low, watched, question)} of `,
    species(watched, question),
    '.',
    isBelowOne(low, watched, question) ? ' That is fewer than one: chance can finish what the cycle starts.' : ''
  ];
}

function unbounded(now: Situation): Piece[] {
  const { question, model, points, unlimited } = now;
  const lead = opening(now);
  const tail = ' Nothing in this model holds it, so that no level or date can be read from it: give it a ceiling.';
  const [key = 'first'] = unlimited;
  if (model.interaction === 'competition') {
    if (unlimited.length === 2) {
      return [
        lead,
        'one of ',
        ...both(question),
        ' ',
        strong('grows without limit'),
        ' and the other is lost; the start decides which. Two competitors that both grow exponentially have no stable mixture at all.'
      ];
    }
    return [
      lead,
      species(key, question),
      ' will ',
      strong('grow without limit'),
      ' and exclude ',
      species(otherOf(key), question),
      '.',
      tail
    ];
  }
  return points.some((point) => point.who === 'both')
    ? [lead, 'the swings of ', ...both(question), ' ', strong('grow without limit'), '.', tail]
    : [
        lead,
        species('first', question),
        ' will ',
        strong('grow without limit'),
        ': ',
        species('second', question),
        ' cannot hold it.',
        tail
      ];
}

function undecided(now: Situation): Piece[] {
  const { question, points, report } = now;
  const subject: Piece[] = ['What becomes of ', ...both(question), ` ${condition(now)} is `];
  const fragile = strong('undecided, fragile');
  if (points.some((point) => point.equilibrium?.class === 'centre')) {
    return [
      ...subject,
      fragile,
      ': their swings keep the size that the start gave them, and the smallest self-limitation would damp them.'
    ];
  }
  if (report.continua.length > 0) {
    return [
      ...subject,
      fragile,
      ': a whole line of states would do, only the start decides among them, and the smallest change of a rate removes the line.'
    ];
  }
  const reason = report.complete ? '' : ` ${sentenceCase(report.completeness)}`;
  return [...subject, strong('undecided'), `: no resting point of this model is shown to hold.${reason}`];
}

/** The pieces of the verdict's sentences. @param ends every way in which a path can end for good. */
export function sentencesFor(kind: VerdictKind, now: Situation, ends: readonly Who[]): Piece[] {
  const [end] = ends;
  switch (kind) {
    case 'coexistence':
      return coexistence(now);
    case 'exclusion':
      return exclusion(now, end === 'second' ? 'second' : 'first');
    case 'depends':
      return depends(now, ends);
    case 'cycles':
      return cycles(now);
    case 'crash':
      return crash(now);
    case 'unbounded':
      return unbounded(now);
    case 'undecided':
      return undecided(now);
  }
}
