import { fail, redirect } from '@sveltejs/kit';
import { setError } from 'sveltekit-superforms';
import { createStudy } from '$lib/server/commands/createStudy';
import { asFormAction, emptyForm } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import { QuestionForm, readQuestion } from '$lib/study';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = asLoad(async () => ({ form: await emptyForm(QuestionForm) }));

export const actions: Actions = {
  default: asFormAction(QuestionForm, async (form, _event, context) => {
    const read = readQuestion(form.data);
    if (!read.ok) {
      for (const { field, message } of read.errors) setError(form, field, message);
      return fail(422, { form });
    }
    const { studyId } = await createStudy(context, { question: read.question });
    redirect(303, `/studies/${studyId}/rates`);
  })
};
