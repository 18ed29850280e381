import { fail, redirect, type RequestEvent } from '@sveltejs/kit';
import type { Context } from '$lib/server/context';
import { AppError } from '$lib/server/errors';
import { recordReading } from '$lib/server/commands/recordReading';
import { saveRunSettings } from '$lib/server/commands/saveRunSettings';
import { saveStarts } from '$lib/server/commands/saveStarts';
import { asAction } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import { studyTrajectories } from '$lib/server/queries/studyTrajectories';
import { readRun, readStarts, runField, typedRun, typedStarts, type TypedErrors } from '$lib/study';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = asLoad(async (event, context) => ({
  view: await studyTrajectories(context, event.params.studyId)
}));

/** What goes back beside the typed text: complaints by field, or a sentence where somebody else saved in between. */
function refused(thrown: unknown, fieldOf: (path: string) => string = (p) => p) {
  const errors: TypedErrors = {};
  if (!(thrown instanceof AppError)) throw thrown;
  const { code, message, issues } = thrown;
  if (code === 'study.stale') return { errors, problem: { code, message, issues } };
  if (issues.length === 0) throw thrown;
  for (const issue of issues) errors[fieldOf(issue.path)] = issue.message;
  return { errors };
}
const revisionOf = (data: FormData) => Number(data.get('revision'));

export const actions: Actions = {
  starts: asAction(async (event: RequestEvent, context: Context) => {
    const data = await event.request.formData();
    const rows = typedStarts(data);
    const { starts, errors } = readStarts(rows);
    if (Object.keys(errors).length > 0) return fail(422, { rows, errors });
    const studyId = String(event.params.studyId);
    try {
      await saveStarts(context, { studyId, revision: revisionOf(data), starts });
    } catch (thrown) {
      return fail(422, { rows, ...refused(thrown) });
    }
    redirect(303, `/studies/${studyId}/trajectories`);
  }),
  run: asAction(async (event: RequestEvent, context: Context) => {
    const data = await event.request.formData();
    const typed = typedRun(data);
    const { run, errors } = readRun(typed);
    if (Object.keys(errors).length > 0) return fail(422, { typed, errors });
    const studyId = String(event.params.studyId);
    try {
      await saveRunSettings(context, { studyId, revision: revisionOf(data), run });
    } catch (thrown) {
      return fail(422, { typed, ...refused(thrown, (path) => runField(path, run)) });
    }
    redirect(303, `/studies/${studyId}/trajectories`);
  }),
  keep: asAction(async (event: RequestEvent, context: Context) => {
    const data = await event.request.formData();
    await recordReading(context, {
      studyId: String(event.params.studyId),
      part: 'trajectories',
      sentence: String(data.get('sentence') ?? '')
    });
  })
};
