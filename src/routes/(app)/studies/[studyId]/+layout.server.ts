import { asLoad } from '$lib/server/kit/asLoad';
import { studyOverview } from '$lib/server/queries/studyOverview';
import { studyThreads } from '$lib/server/queries/studyThreads';
import type { LayoutServerLoad } from './$types';

/** The study and what the reader may do with it, once for all its pages; every save makes it be read again. */
export const load: LayoutServerLoad = asLoad(async (event, context) => {
  event.depends('app:study');
  const [study, threads] = await Promise.all([
    studyOverview(context, event.params.studyId),
    studyThreads(context, event.params.studyId)
  ]);
  return { study, threads };
});
