import { StudyListQuery } from '$lib/contracts/study';
import { archiveStudy, restoreStudy } from '$lib/server/commands/archiveStudy';
import { deleteStudy, undeleteStudy } from '$lib/server/commands/deleteStudy';
import { duplicateStudy } from '$lib/server/commands/duplicateStudy';
import { asAction } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import { studyList } from '$lib/server/queries/studyList';
import { redirect, type RequestEvent } from '@sveltejs/kit';
import type { Context } from '$lib/server/context';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = asLoad(async (event, context) => ({
  list: await studyList(context, StudyListQuery.parse(Object.fromEntries(event.url.searchParams)))
}));

/** An action on one study of the list, named by the posted `studyId`; says what was done, so that it can be undone. */
function onStudy(done: string, command: (context: Context, input: { studyId: string }) => Promise<unknown>) {
  return asAction(async (event: RequestEvent, context) => {
    const studyId = String((await event.request.formData()).get('studyId') ?? '');
    await command(context, { studyId });
    return { done, studyId };
  });
}

export const actions: Actions = {
  archive: onStudy('archived', archiveStudy),
  restore: onStudy('restored', restoreStudy),
  delete: onStudy('deleted', deleteStudy),
  undelete: onStudy('brought back', undeleteStudy),
  duplicate: asAction(async (event: RequestEvent, context) => {
    const studyId = String((await event.request.formData()).get('studyId') ?? '');
    const copy = await duplicateStudy(context, { studyId });
    redirect(303, `/studies/${copy.studyId}`);
  })
};
