import { redirect, type RequestEvent } from '@sveltejs/kit';
import { recordReading } from '$lib/server/commands/recordReading';
import { saveRate } from '$lib/server/commands/saveRate';
import { asAction } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import { studyEquilibria } from '$lib/server/queries/studyEquilibria';
import { invalid } from '$lib/server/errors';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = asLoad(async (event, context) => ({
  view: await studyEquilibria(context, event.params.studyId)
}));

export const actions: Actions = {
  keep: asAction(async (event: RequestEvent, context) => {
    const data = await event.request.formData();
    await recordReading(context, {
      studyId: String(event.params.studyId),
      part: 'equilibria',
      sentence: String(data.get('sentence') ?? '')
    });
  }),
  /** The value a slider was left at becomes the rate's own, with its source and error as they were. */
  saveRate: asAction(async (event: RequestEvent, context) => {
    const data = await event.request.formData();
    const studyId = String(event.params.studyId);
    let rate: unknown;
    try {
      rate = JSON.parse(String(data.get('rate') ?? ''));
    } catch {
      throw invalid('rate', 'The previewed rate could not be read. Move the slider and save again.');
    }
    await saveRate(context, { studyId, revision: Number(data.get('revision')), rate });
    redirect(303, `/studies/${studyId}/equilibria`);
  })
};
