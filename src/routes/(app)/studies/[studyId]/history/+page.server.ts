import { redirect, type RequestEvent } from '@sveltejs/kit';
import { restoreRevision } from '$lib/server/commands/restoreRevision';
import { asAction } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import { studyHistory, studyRevision } from '$lib/server/queries/studyHistory';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = asLoad(async (event, context) => {
  const asked = Number(event.url.searchParams.get('version'));
  const history = await studyHistory(context, event.params.studyId);
  const chosen =
    Number.isInteger(asked) && asked > 0 ? await studyRevision(context, event.params.studyId, asked) : null;
  return { history, chosen };
});

export const actions: Actions = {
  restore: asAction(async (event: RequestEvent<{ studyId: string }>, context) => {
    const data = await event.request.formData();
    await restoreRevision(context, {
      studyId: event.params.studyId,
      revision: Number(data.get('revision')),
      number: Number(data.get('number'))
    });
    redirect(303, `/studies/${event.params.studyId}/history`);
  })
};
