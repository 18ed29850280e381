import type { StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { findEquilibria, limitCycles, simulate, type LimitCycle, type ModelSpec } from '$lib/dynamics';
import { assemble, pointsOf, verdict, type LetteredPoint, type Verdict, planeFor, type PlaneResults } from '$lib/study';

/** What a slider asks: the study with one rate moved, in study units. */
export interface PreviewQuestion {
  question: StudyQuestion;
  content: StudyContent;
  /** Kept while the slider moves, so that the axes stand still. */
  window?: { xMax: number; yMax: number };
}
/** What is drawn for it; null where the moved model cannot stand, with the reason. */
export type Preview =
  | { ok: false; reason: string }
  | {
      ok: true;
      model: ModelSpec;
      verdict: Verdict;
      points: LetteredPoint[];
      cycles: LimitCycle[];
      plane: PlaneResults;
      paths: { label: string; points: { x: number; y: number }[] }[];
      complete: boolean;
    };

/** Points along a path that a plane of some 500 pixels can show. */
const PATH_POINTS = 241;

/**
 * Computes the state plane of a study that is not saved. The same engine as the server's, less what a moving slider does
 * not need: errors, facts and the check of where today's counts end. Never throws for a model that can be assembled.
 */
export function preview({ question, content, window }: PreviewQuestion): Preview {
  const { model, missing, issues } = assemble(question, content);
  if (!model) {
    return { ok: false, reason: issues[0]?.message ?? `${missing[0]?.name ?? 'A rate'} is not entered yet.` };
  }
  const report = findEquilibria(model);
  const cycles = limitCycles(model, report, { accuracy: 'drawing' });
  const paths = content.starts.map(({ label, x, y }) => {
    const path = simulate(model, {
      start: { x, y },
      span: [0, content.run.span],
      samples: PATH_POINTS,
      rtol: 1e-5,
      maxSteps: 20_000
    });
    return { label, points: path.x.map((value, i) => ({ x: value, y: path.y[i] ?? 0 })) };
  });
  return {
    ok: true,
    model,
    verdict: verdict(question, report, { model, cycles }),
    points: pointsOf(report),
    cycles,
    plane: planeFor(model, report, cycles, content.starts, window ? { window } : {}),
    paths,
    complete: report.complete
  };
}
