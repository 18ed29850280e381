import { fail, redirect } from '@sveltejs/kit';
import { setError } from 'sveltekit-superforms';
import { saveQuestion } from '$lib/server/commands/saveQuestion';
import { asFormAction, emptyForm } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import { studyOverview } from '$lib/server/queries/studyOverview';
import { QuestionForm, questionToForm, readQuestion } from '$lib/study';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = asLoad(async (event, context) => {
  const study = await studyOverview(context, event.params.studyId);
  return { form: await emptyForm(QuestionForm, questionToForm(study.question, study.revision)) };
});

export const actions: Actions = {
  default: asFormAction(QuestionForm, async (form, event, context) => {
    const read = readQuestion(form.data);
    if (!read.ok) {
      for (const { field, message } of read.errors) setError(form, field, message);
      return fail(422, { form });
    }
    const studyId = String(event.params.studyId);
    await saveQuestion(context, { studyId, revision: Number(form.data.revision), question: read.question });
    redirect(303, `/studies/${studyId}`);
  })
};
