import { z } from 'zod';
import { studyRoles } from '$lib/contracts/study';
import { changeShare } from '$lib/server/commands/changeShare';
import { revokeShare } from '$lib/server/commands/revokeShare';
import { shareStudy } from '$lib/server/commands/shareStudy';
import { asAction, asFormAction, emptyForm } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import { withdrawStudyInvitation } from '$lib/server/commands/withdrawStudyInvitation';
import { studySharing } from '$lib/server/queries/studySharing';
import type { RequestEvent } from '@sveltejs/kit';
import type { Actions, PageServerLoad } from './$types';

const ShareForm = z.object({
  email: z
    .string()
    .trim()
    .max(254)
    .pipe(z.email({ error: 'Give a whole e-mail address, such as name@agency.example.' }))
    .default(''),
  role: z.enum(studyRoles, { error: 'Choose what this person may do.' }).default('reviewer')
});

export const load: PageServerLoad = asLoad(async (event, context) => ({
  sharing: await studySharing(context, event.params.studyId),
  form: await emptyForm(ShareForm)
}));

export const actions: Actions = {
  share: asFormAction(ShareForm, async (form, event, context) => {
    const { outcome, email } = await shareStudy(context, { studyId: String(event.params.studyId), ...form.data });
    form.data.email = '';
    form.message = {
      tone: 'done',
      text:
        outcome === 'shared'
          ? `Shared with ${email}; a message is on its way.`
          : `An invitation is on its way to ${email}.`
    };
    return { form };
  }),
  change: asAction(async (event: RequestEvent<{ studyId: string }>, context) => {
    const data = await event.request.formData();
    await changeShare(context, {
      studyId: event.params.studyId,
      userId: String(data.get('userId') ?? ''),
      role: String(data.get('role') ?? '')
    });
  }),
  revoke: asAction(async (event: RequestEvent<{ studyId: string }>, context) => {
    const data = await event.request.formData();
    await revokeShare(context, { studyId: event.params.studyId, userId: String(data.get('userId') ?? '') });
  }),
  withdraw: asAction(async (event: RequestEvent<{ studyId: string }>, context) => {
    const invitationId = String((await event.request.formData()).get('invitationId') ?? '');
    await withdrawStudyInvitation(context, { studyId: event.params.studyId, invitationId });
  })
};
