import type { RunSettings, Start } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import type { TrajectoryResult } from '$lib/dynamics';
import { formatDuration, formatNumber, displayUnit, sentenceCase } from '$lib/study';

/** What a sentence about a run is made from. */
export interface RunReading {
  start: Pick<Start, 'label'>;
  result: Pick<TrajectoryResult, 'x' | 'y' | 'events' | 'outcome' | 'remark'>;
}

/** Piece of a sentence: plain words, words that carry it, or a species. */
export type Piece = { text: string } | { strong: string } | { species: 'first' | 'second' };

const last = (values: readonly number[]) => values.at(-1) ?? 0;

/**
 * What the first run says, in one sentence: who falls below a limit and when, who runs out, or where both stand at the end.
 * Only what was computed is said; a run that stopped early says so.
 */
export function readRuns(runs: readonly RunReading[], question: StudyQuestion, run: RunSettings): Piece[] {
  const first = runs[0];
  if (!first) return [{ text: 'No start is given yet, so there is no path to follow.' }];
  const from = first.start.label.toLowerCase().startsWith('from') ? first.start.label : `From ${first.start.label}`;
  const { result } = first;
  if (result.outcome.status === 'failed') {
    return [
      { text: `${sentenceCase(from)} the run ` },
      { strong: `stops at ${formatDuration(result.outcome.t, question.timeUnit)}` },
      { text: `: ${result.remark ?? 'the numbers could not be followed further.'}` }
    ];
  }
  const event = result.events.find((e) => e.kind === 'ran out') ?? result.events.find((e) => e.kind === 'fell below');
  const within = formatDuration(run.span, question.timeUnit);
  if (event) {
    const limit = `${formatNumber(event.value)} ${displayUnit(question[event.species].unit).text}`;
    return [
      { text: `${sentenceCase(from)}, the ` },
      { species: event.species },
      { text: ' ' },
      { strong: event.kind === 'ran out' ? 'runs out' : `falls below ${limit}` },
      { text: ` after ${formatDuration(event.t, question.timeUnit)}.` }
    ];
  }
  const level = (species: 'first' | 'second', value: number) =>
    `${formatNumber(value, 3)} ${displayUnit(question[species].unit).text}`;
  return [
    { text: `${sentenceCase(from)}, after ${within} there are ` },
    { strong: level('first', last(result.x)) },
    { text: ' of ' },
    { species: 'first' },
    { text: ' and ' },
    { strong: level('second', last(result.y)) },
    { text: ' of ' },
    { species: 'second' },
    { text: '.' }
  ];
}

/** The same sentence as plain text, for readers and for the record. */
export function plainWords(pieces: readonly Piece[], question: StudyQuestion): string {
  return pieces.map((p) => ('species' in p ? question[p.species].common : 'strong' in p ? p.strong : p.text)).join('');
}
