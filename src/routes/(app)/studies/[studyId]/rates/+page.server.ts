import { fail, redirect, type RequestEvent } from '@sveltejs/kit';
import { setError } from 'sveltekit-superforms';
import { ratePaths, type RatePath } from '$lib/contracts/content';
import { removeRate } from '$lib/server/commands/removeRate';
import { saveRate } from '$lib/server/commands/saveRate';
import { AppError } from '$lib/server/errors';
import { asAction, asFormAction, emptyForm } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import { studyRates } from '$lib/server/queries/studyRates';
import { RateForm, rateField, rateToForm, readRate } from '$lib/study';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = asLoad(async (event, context) => {
  const rates = await studyRates(context, event.params.studyId);
  const asked = event.url.searchParams.get('edit');
  const row = rates.rows.find((r) => r.need.path === asked) ?? null;
  const path: RatePath = row?.need.path ?? ratePaths[0];
  const unit = row?.units[0]?.code ?? '';
  return {
    rates,
    editing: row?.need.path ?? null,
    form: await emptyForm(RateForm, rateToForm(row?.entry ?? undefined, path, unit, rates.revision))
  };
});

export const actions: Actions = {
  save: asFormAction(RateForm, async (form, event, context) => {
    const read = readRate(form.data);
    if (!read.ok) {
      for (const { field, message } of read.errors) setError(form, field, message);
      return fail(422, { form });
    }
    const studyId = String(event.params.studyId);
    try {
      await saveRate(context, { studyId, revision: Number(form.data.revision), rate: read.entry });
    } catch (thrown) {
      // The command names `rate.uncertainty.low`; the form has a field of its own for it.
      if (!(thrown instanceof AppError) || thrown.status !== 422) throw thrown;
      let placed = 0;
      for (const issue of thrown.issues) {
        const field = rateField(issue.path, form.data.path);
        if (field) {
          setError(form, field, issue.message);
          placed += 1;
        }
      }
      if (placed < thrown.issues.length || placed === 0) form.message = { tone: 'error', text: thrown.message };
      return fail(422, { form });
    }
    // A table is filled from top to bottom: the next rate that is missing opens by itself.
    const { rows } = await studyRates(context, studyId);
    const next = rows.find((r) => r.entry === null && !r.need.optional)?.need.path;
    redirect(303, next ? `/studies/${studyId}/rates?edit=${next}#rate-${next}` : `/studies/${studyId}/rates`);
  }),
  remove: asAction(async (event: RequestEvent, context) => {
    const data = await event.request.formData();
    const studyId = String(event.params.studyId);
    await removeRate(context, {
      studyId,
      revision: Number(data.get('revision')),
      path: String(data.get('path') ?? '')
    });
    redirect(303, `/studies/${studyId}/rates`);
  })
};
