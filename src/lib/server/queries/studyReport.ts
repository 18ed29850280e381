import type { EquilibriaReport } from '$lib/dynamics';
import type { Context } from '../context';
import { computeEquilibria } from '../numerics/equilibria';
import { openStudy, readRevision } from '../studies/access';
import { requireResult } from '../studies/requireResult';

/** The equilibria of the study's own model, as the API gives them. Throws 422 naming every rate that is missing. */
export async function studyReport(context: Context, studyId: string): Promise<EquilibriaReport> {
  const { study } = await openStudy(context, studyId, 'study.export');
  const { question, content } = await readRevision(study);
  return computeEquilibria({ model: requireResult(question, content, 'equilibria') });
}
