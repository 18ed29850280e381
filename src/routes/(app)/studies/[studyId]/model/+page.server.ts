import { fail, redirect, type RequestEvent } from '@sveltejs/kit';
import { saveAssumptions } from '$lib/server/commands/saveAssumptions';
import { saveStructure } from '$lib/server/commands/saveStructure';
import { asAction, asFormAction, emptyForm } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import { studyModel } from '$lib/server/queries/studyModel';
import { StructureForm, readStructure, structureToForm } from '$lib/study';
import { ModelStructure } from '$lib/contracts/content';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = asLoad(async (event, context) => {
  const model = await studyModel(context, event.params.studyId);
  return { model, form: await emptyForm(StructureForm, structureToForm(model.structure, model.revision)) };
});

export const actions: Actions = {
  structure: asFormAction(StructureForm, async (form, event, context) => {
    const structure = ModelStructure.safeParse(readStructure(form.data));
    if (!structure.success) {
      form.message = { tone: 'error', text: structure.error.issues[0]?.message ?? 'This combination cannot stand.' };
      return fail(422, { form });
    }
    const studyId = String(event.params.studyId);
    await saveStructure(context, { studyId, revision: Number(form.data.revision), structure: structure.data });
    redirect(303, `/studies/${studyId}/model`);
  }),
  assumptions: asAction(async (event: RequestEvent, context) => {
    const data = await event.request.formData();
    const studyId = String(event.params.studyId);
    const assumptions = data
      .getAll('key')
      .map(String)
      .map((key) => ({
        key,
        accepted: data.get(`accepted:${key}`) === 'on',
        comment: String(data.get(`comment:${key}`) ?? '')
      }));
    await saveAssumptions(context, { studyId, revision: Number(data.get('revision')), assumptions });
    redirect(303, `/studies/${studyId}/model#assumptions`);
  })
};
