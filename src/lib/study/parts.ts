import type { RateEntry, RatePath, StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { assemble, type Assembled } from './assemble';
import { countWord, formatDuration, formatPercent, sentenceCase } from './format';
import { ratesNeeded } from './rates';
import type { VerdictKind } from './verdict';

/** The nine parts of a study: their states, what each rests on, and what has changed since it was last read. */

export const partKeys = [
  'surveys',
  'rates',
  'model',
  'equilibria',
  'trajectories',
  'levers',
  'risk',
  'review',
  'report'
] as const;
export type PartKey = (typeof partKeys)[number];
export type PartState = 'empty' | 'ready' | 'stale' | 'signed';

export const partNames: Record<PartKey, string> = {
  surveys: 'Surveys',
  rates: 'Rates',
  model: 'Model',
  equilibria: 'Equilibria',
  trajectories: 'Trajectories',
  levers: 'Levers',
  risk: 'Risk',
  review: 'Review',
  report: 'Report'
};

/** State in words, for sub-lines and hidden text. */
export const stateWords: Record<PartState, string> = {
  empty: 'empty',
  ready: 'ready',
  stale: 'stale',
  signed: 'signed off'
};

/** What parts that are not filled yet will hold, and what they wait for. */
export const laterTexts: Partial<Record<PartKey, { holds: string; waits: string }>> = {
  surveys: {
    holds:
      'Counts by date and place, with effort, detection and zeros kept; rates fitted to them. Rates typed by hand need no survey here.',
    waits: 'This version of Sedgeline cannot read survey tables yet. Type rates with their sources under Rates.'
  },
  levers: {
    holds:
      'Removal by rate, share, fixed take or date, stocking and season limits, set side by side with doing nothing, and the value at which the outcome changes.',
    waits: 'This version of Sedgeline has no scenarios yet. Removal and stocking can be set under Model.'
  },
  risk: {
    holds:
      'How often the objective is met when the rates vary within their errors, and which rate the answer leans on.',
    waits: 'This version of Sedgeline draws no futures yet. Errors of resting levels are under Equilibria.'
  },
  review: {
    holds: 'A frozen version, a checklist, a declaration of interests and a signature.',
    waits: 'This version of Sedgeline cannot freeze and sign yet. A reviewer can read every part and comment.'
  },
  report: {
    holds: 'One page of summary with the verdict, the figure and the rates, and an annex that others can run again.',
    waits: 'This version of Sedgeline draws up no report yet. Tables can be downloaded as CSV, and every page prints.'
  }
};

/** What a part showed when it was last read: the inputs it rested on. */
export interface PartReading {
  inputs: unknown;
}
export interface PartsInput {
  question: StudyQuestion;
  content: StudyContent;
  assembled?: Assembled;
  /** Kind of the verdict on the present model, where it has been worked out. */
  verdict?: VerdictKind | null;
  /** Leave out where readings are not kept; then a part is ready as soon as its inputs are whole. */
  readings?: Partial<Record<PartKey, PartReading>>;
  signed?: readonly PartKey[];
  comments?: { open: number; total: number };
  /** People who were asked to review. */
  reviewers?: number;
}
export interface PartStatus {
  key: PartKey;
  name: string;
  state: PartState;
  /** A few words under the name. */
  summary: string;
  /** Paths of what has changed since the part was read; empty unless stale. */
  changed: string[];
}

type Numbers = Pick<RateEntry, 'value' | 'unit' | 'form' | 'uncertainty'>;

function numbersOf(content: StudyContent, paths: readonly RatePath[]): Partial<Record<RatePath, Numbers>> {
  const entries = content.rates
    .filter((entry) => paths.includes(entry.path))
    .map(({ path, value, unit, form, uncertainty }) => [path, { value, unit, form, uncertainty }]);
  return Object.fromEntries(entries) as Partial<Record<RatePath, Numbers>>;
}

/**
 * What the results of a part rest on: a plain JSON value. Sources, notes and names are left out, because no number hangs on
 * them. Hash `canonicalJson` of it for a fingerprint.
 */
export function partInputs(part: PartKey, question: StudyQuestion, content: StudyContent): unknown {
  const units = {
    first: question.first.unit,
    second: question.second.unit,
    time: question.timeUnit,
    area: question.area
  };
  const paths = ratesNeeded(content.structure, question).map((need) => need.path);
  const model = { structure: content.structure, rates: numbersOf(content, paths), units };
  switch (part) {
    case 'surveys':
      return { units };
    case 'rates':
      return { rates: model.rates, units };
    case 'model':
      return { structure: content.structure };
    case 'equilibria':
      return model;
    default:
      return { ...model, starts: content.starts.map(({ x, y }) => ({ x, y })), run: content.run };
  }
}

/** JSON with the keys of every object in order, so that equal values give equal text. */
export function canonicalJson(value: unknown): string {
  return JSON.stringify(value, (_, inner: unknown) =>
    isRecord(inner) ? Object.fromEntries(Object.entries(inner).sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0))) : inner
  );
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** Paths at which two plain values differ, in order; a list of another length is one difference. */
export function changesBetween(before: unknown, after: unknown, at = ''): string[] {
  if (isRecord(before) && isRecord(after)) {
    const keys = [...new Set([...Object.keys(before), ...Object.keys(after)])].sort();
    return keys.flatMap((key) => changesBetween(before[key], after[key], at === '' ? key : `${at}.${key}`));
  }
  if (Array.isArray(before) && Array.isArray(after) && before.length === after.length) {
    return before.flatMap((item, i) => changesBetween(item, after[i], `${at}.${i}`));
  }
  return canonicalJson(before ?? null) === canonicalJson(after ?? null) ? [] : [at];
}

/** A changed path in words: `K₁ of stream crayfish`, `today’s counts`, `the model`. */
export function changeWords(path: string, question: StudyQuestion, content: StudyContent): string {
  if (path.startsWith('structure')) return 'the form of the model';
  if (path.startsWith('units')) return 'units of the question';
  if (path.startsWith('starts')) return 'starting states';
  if (path.startsWith('run')) return 'run settings';
  const need = ratesNeeded(content.structure, question).find((candidate) => path.startsWith(`rates.${candidate.path}`));
  return need ? `${need.name} (${need.symbol.plain})` : 'a rate the model no longer needs';
}

const verdictWords: Record<VerdictKind, string> = {
  coexistence: 'Both persist',
  exclusion: 'One persists, one is lost',
  depends: 'Depends on the start',
  cycles: 'A cycle',
  crash: 'Both are lost',
  unbounded: 'Grows without limit',
  undecided: 'Undecided'
};

function ratesSummary(content: StudyContent, question: StudyQuestion, assembled: Assembled): string {
  const needed = ratesNeeded(content.structure, question).length;
  const entered = needed - assembled.missing.length;
  if (content.rates.length === 0) return 'None entered yet';
  if (assembled.missing.length > 0) return `${sentenceCase(countWord(entered))} of ${countWord(needed)} entered`;
  const wrong = assembled.issues.length;
  if (wrong > 0) return wrong === 1 ? 'One thing to correct' : `${sentenceCase(countWord(wrong))} things to correct`;
  const spreads = Object.values(assembled.resolved).flatMap((rate) => (rate.cv === null ? [] : [rate.cv]));
  const weakest = spreads.length > 0 ? `, weakest ± ${formatPercent(Math.max(...spreads), 2)}` : '';
  return `${sentenceCase(countWord(entered))} entered${weakest}`;
}

/** `Competition with removal`, `Consumer and resource`. */
export function modelSummary({ structure }: Pick<StudyContent, 'structure'>): string {
  const base = structure.interaction === 'competition' ? 'Competition' : 'Consumer and resource';
  const both = [structure.first, structure.second];
  const acts = [
    ...(both.some((each) => each.effort || each.quota) ? ['removal'] : []),
    ...(both.some((each) => each.stocking) ? ['stocking'] : [])
  ];
  return acts.length > 0 ? `${base} with ${acts.join(' and ')}` : base;
}

function trajectoriesSummary({ starts, run }: StudyContent, question: StudyQuestion): string {
  if (starts.length === 0) return 'No starting state yet';
  const span = formatDuration(run.span, question.timeUnit);
  return `${sentenceCase(countWord(starts.length))} ${starts.length === 1 ? 'start' : 'starts'}, ${span}`;
}

function reviewSummary({ comments, reviewers = 0 }: PartsInput): string {
  const { open = 0, total = 0 } = comments ?? {};
  if (open > 0) return `${sentenceCase(countWord(open))} ${open === 1 ? 'comment' : 'comments'} open`;
  if (total > 0) return 'Every comment closed';
  return reviewers > 0 ? 'Asked, no comments yet' : 'Not asked yet';
}

/** The rail of nine parts, in order. */
export function partStates(input: PartsInput): PartStatus[] {
  const { question, content, readings, signed = [] } = input;
  const assembled = input.assembled ?? assemble(question, content);
  const isWhole = assembled.model !== null;
  const hasStructureIssue = assembled.issues.some((issue) => issue.path.startsWith('structure'));

  const summaries: Record<PartKey, string> = {
    surveys: content.starts.length > 0 ? 'Today’s counts only' : 'None entered',
    rates: ratesSummary(content, question, assembled),
    model: hasStructureIssue ? 'Two terms do not fit together' : modelSummary(content),
    equilibria: isWhole ? (input.verdict ? verdictWords[input.verdict] : 'Not opened yet') : 'After Rates',
    trajectories: isWhole ? trajectoriesSummary(content, question) : 'After Rates',
    levers: 'After Trajectories',
    risk: 'After Levers',
    review: reviewSummary(input),
    report: 'After Review'
  };
  const holds: Record<PartKey, boolean> = {
    surveys: false,
    rates: content.rates.length > 0 && assembled.missing.length === 0 && assembled.issues.length === 0,
    model: isWhole,
    equilibria: isWhole,
    trajectories: isWhole && content.starts.length > 0,
    levers: false,
    risk: false,
    review: (input.comments?.total ?? 0) > 0 || (input.reviewers ?? 0) > 0,
    report: false
  };
  const isRead = (key: PartKey) => readings === undefined || !isResult(key) || readings[key] !== undefined;

  return partKeys.map((key) => {
    const reading = readings?.[key];
    const changed = reading ? changesBetween(reading.inputs, partInputs(key, question, content)) : [];
    const state: PartState =
      changed.length > 0 ? 'stale' : !holds[key] || !isRead(key) ? 'empty' : signed.includes(key) ? 'signed' : 'ready';
    return { key, name: partNames[key], state, summary: summaries[key], changed };
  });
}

const isResult = (key: PartKey) => key === 'equilibria' || key === 'trajectories';
