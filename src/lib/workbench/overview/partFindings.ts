import type { RatePath, StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import type { StudySketch } from '$lib/contracts/views';
import {
  countWord,
  formatDuration,
  formatPercent,
  listWords,
  ratesNeeded,
  sentenceCase,
  type PartKey,
  type PartStatus
} from '$lib/study';
import { describeModel } from '../model/describeModel';
import { plainWords, readRuns, type RunReading } from '../trajectories/readRuns';

/** What a line of the overview says of a part, and, more quietly, what that rests on. */
export interface PartFinding {
  says: string;
  basis: string;
}

export interface FindingsInput {
  question: StudyQuestion;
  content: StudyContent;
  parts: readonly PartStatus[];
  /** Kind of the verdict; `none` before there is a model. */
  verdict: string;
  sketch: StudySketch | null;
  /** The run from today's counts, with what happens on it. */
  run: RunReading | null;
  spreads: readonly { path: string; cv: number | null }[];
  threads: readonly { state: 'open' | 'resolved' }[];
}

const count = (n: number, one: string, many: string) => `${countWord(n)} ${n === 1 ? one : many}`;

function ratesFinding({ question, content, spreads }: FindingsInput): PartFinding | null {
  const needs = ratesNeeded(content.structure, question);
  const entered = needs.filter((need) => content.rates.some((rate) => rate.path === need.path));
  if (entered.length < needs.length) {
    const missing = needs.filter((need) => !entered.includes(need)).map((need) => need.symbol.plain);
    const says =
      entered.length === 0
        ? `None of ${countWord(needs.length)} rates is entered yet.`
        : `${sentenceCase(countWord(entered.length))} of ${countWord(needs.length)} rates entered.`;
    return { says, basis: `Still needed: ${listWords(missing)}` };
  }
  const weakest = [...spreads].sort((a, b) => (b.cv ?? 0) - (a.cv ?? 0))[0];
  const need = needs.find(({ path }) => path === (weakest?.path as RatePath | undefined));
  const kinds = [...new Set(content.rates.map((rate) => rate.source.kind))];
  return {
    says: weakest?.cv
      ? `All ${countWord(needs.length)} rates entered; the weakest is ±\u00a0${formatPercent(weakest.cv, 2).replace(/\s*%$/, '\u00a0per cent')}.`
      : `All ${countWord(needs.length)} rates entered, as exact.`,
    basis: [sentenceCase(listWords(kinds)), need && weakest?.cv ? `weakest: ${need.symbol.plain}` : '']
      .filter(Boolean)
      .join('; ')
  };
}

function equilibriaFinding({ verdict, sketch }: FindingsInput): PartFinding | null {
  if (!sketch) return null;
  const holding = sketch.points.filter((point) => point.holds).length;
  const states = `${sentenceCase(count(holding, 'state holds', 'states hold'))}`;
  const said: Record<string, string> = {
    coexistence: `${states}, and both species are in ${holding === 1 ? 'it' : 'each'}.`,
    exclusion: `${states}, with one species alone.`,
    depends: `${states}; which one depends on the start.`,
    cycles: 'No state holds; the two species go round in a cycle.',
    crash: 'Only the empty state holds.',
    unbounded: 'Nothing holds; numbers grow without limit.'
  };
  return {
    says: said[verdict] ?? 'These rates do not decide which state holds.',
    basis: `${sentenceCase(count(sketch.points.length, 'point', 'points'))} of rest, told apart by eigenvalues`
  };
}

function trajectoriesFinding({ question, content, run }: FindingsInput): PartFinding | null {
  if (!run) return null;
  const others = content.starts.length - 1;
  return {
    says: plainWords(readRuns([run], question, content.run), question),
    basis: `Over ${formatDuration(content.run.span, question.timeUnit)}${
      others > 0 ? `, with ${count(others, 'other start', 'other starts')}` : ''
    }`
  };
}

function reviewFinding({ threads }: FindingsInput): PartFinding | null {
  if (threads.length === 0) return null;
  const open = threads.filter((thread) => thread.state === 'open').length;
  const closed = threads.length - open;
  return {
    says:
      open > 0
        ? `${sentenceCase(count(open, 'question', 'questions'))} open${closed ? `, ${countWord(closed)} resolved` : ''}.`
        : `${threads.length === 1 ? 'The one question is' : `All ${countWord(threads.length)} questions are`} resolved.`,
    basis: 'Not signed'
  };
}

/** Each part in one line: its finding where it has one, otherwise what it waits for. */
export function partFindings(input: FindingsInput): Record<PartKey, PartFinding> {
  const { question, content, parts } = input;
  const names = { first: question.first.common, second: question.second.common };
  const summary = (key: PartKey) => parts.find((part) => part.key === key)?.summary ?? '';
  const accepted = content.assumptions.filter((assumption) => assumption.accepted).length;
  return {
    surveys: {
      says: content.starts.length ? 'Today’s counts, and no series of surveys.' : 'No counts yet.',
      basis: content.starts.length ? 'Counts are kept under Trajectories' : ''
    },
    rates: ratesFinding(input) ?? { says: summary('rates'), basis: '' },
    model: {
      says: sentenceCase(
        describeModel(content.structure)
          .map((piece) => ('species' in piece ? names[piece.species] : 'strong' in piece ? piece.strong : piece.text))
          .join('')
      ),
      basis: accepted
        ? `${sentenceCase(count(accepted, 'assumption', 'assumptions'))} accepted`
        : 'No assumption accepted yet'
    },
    equilibria: equilibriaFinding(input) ?? { says: summary('equilibria'), basis: '' },
    trajectories: trajectoriesFinding(input) ?? { says: summary('trajectories'), basis: '' },
    levers: { says: 'No actions compared yet.', basis: 'Removal and stocking are set under Model' },
    risk: { says: 'No futures drawn yet.', basis: 'Errors of levels are under Equilibria' },
    review: reviewFinding(input) ?? { says: 'Nobody has asked anything yet.', basis: '' },
    report: { says: 'No report yet.', basis: 'Every page prints' }
  };
}
