import type { StudySketch } from '$lib/contracts/views';
import { simulate, type TrajectoryResult } from '$lib/dynamics';
import { assemble } from '$lib/study';
import type { Context } from '../context';
import { deadline } from '../numerics/deadline';
import { openStudy, readRevision } from '../studies/access';
import { ResultCache } from '../studies/cache';

/** The stamps beside the lines of the overview; null where there is nothing to draw yet. */
export interface StudyPictures {
  sketch: StudySketch | null;
  /** The path from today's counts, and what happens on it. */
  series:
    | ({ t: number[]; first: number[]; second: number[] } & Pick<TrajectoryResult, 'events' | 'outcome' | 'remark'>)
    | null;
  /** How wide each rate is, as a share of its value. */
  spreads: { path: string; cv: number | null }[];
}

/** Points that a picture of 112 pixels can show. */
const POINTS = 81;
const cache = new ResultCache<StudyPictures['series']>(64);

/** Pictures of a study for its overview. */
export async function studyPictures(context: Context, studyId: string): Promise<StudyPictures> {
  const { study } = await openStudy(context, studyId, 'study.read');
  const { question, content, fingerprint } = await readRevision(study);
  const { model, resolved } = assemble(question, content);
  const [today] = content.starts;
  return {
    sketch: study.sketch,
    series:
      model && today
        ? cache.get(fingerprint, () => {
            const path = simulate(model, {
              start: { x: today.x, y: today.y },
              span: [0, content.run.span],
              samples: POINTS,
              // As fine as the run itself, so that the overview and Trajectories name the same day.
              rtol: content.run.rtol,
              thresholds: content.run.thresholds,
              shouldStop: deadline(200)
            });
            const { t, x, y, events, outcome, remark } = path;
            return { t, first: x, second: y, events, outcome, remark };
          })
        : null,
    spreads: Object.values(resolved).map(({ path, cv }) => ({ path, cv }))
  };
}
