import type { StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { partKeys } from '$lib/contracts/comment';
import type { PartView } from '$lib/contracts/views';
import { formatDuration, pathsOf, sentenceCase, type Assembled } from '$lib/study';
import type { Reading } from '../db/models/Reading';
import type { StudyVerdict } from './assess';
import { inputsFingerprint } from './fingerprint';

interface Input {
  question: StudyQuestion;
  content: StudyContent;
  assembled: Assembled;
  verdict: StudyVerdict;
  readings: readonly Pick<Reading, 'part' | 'fingerprint' | 'sentence' | 'revision'>[];
  openThreads: number;
}

/** How far each part has come. A result is stale once its inputs are no longer those its reading was written from. */
export function partsOf({ question, content, assembled, verdict, readings, openThreads }: Input): PartView[] {
  const isComplete = assembled.model !== null;
  const needed = pathsOf(content.structure).length;
  const entered = needed - assembled.missing.length;
  const result = (part: 'equilibria' | 'trajectories', isReady: boolean, summary: string) => {
    const reading = readings.find((found) => found.part === part);
    const isStale = reading !== undefined && reading.fingerprint !== inputsFingerprint(part, question, content);
    if (!isReady) return { state: 'empty' as const, summary: 'After the rates' };
    return isStale
      ? { state: 'stale' as const, summary: `Inputs changed since version ${reading.revision}` }
      : { state: 'ready' as const, summary };
  };
  const told: Record<PartView['key'], Pick<PartView, 'state' | 'summary'>> = {
    surveys: { state: 'empty', summary: 'No survey table yet' },
    rates: {
      state: entered > 0 ? 'ready' : 'empty',
      summary: assembled.missing.length ? `${entered} of ${needed} entered` : `All ${needed} entered`
    },
    model: {
      state: 'ready',
      summary: sentenceCase(content.structure.interaction === 'competition' ? 'competition' : 'consumer and resource')
    },
    equilibria: result('equilibria', isComplete, KINDS[verdict.kind]),
    trajectories: result(
      'trajectories',
      isComplete && content.starts.length > 0,
      `${formatDuration(content.run.span, question.timeUnit)} from ${content.starts.length} ${content.starts.length === 1 ? 'start' : 'starts'}`
    ),
    levers: { state: 'empty', summary: 'Not yet' },
    risk: { state: 'empty', summary: 'Not yet' },
    review: {
      state: openThreads > 0 ? 'ready' : 'empty',
      summary: openThreads ? `${openThreads} open` : 'No question open'
    },
    report: { state: 'empty', summary: 'After review' }
  };
  return partKeys.map((key) => ({ key, name: sentenceCase(key), ...told[key] }));
}

const KINDS: Record<StudyVerdict['kind'], string> = {
  coexistence: 'Both persist',
  exclusion: 'One excludes the other',
  depends: 'Depends on the start',
  cycles: 'Cycles',
  crash: 'Neither persists',
  unbounded: 'Grows without limit',
  undecided: 'Undecided',
  none: 'No verdict yet'
};
