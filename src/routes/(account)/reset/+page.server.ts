import { message } from 'sveltekit-superforms';
import { ResetRequest } from '$lib/contracts/people';
import { requestPasswordReset } from '$lib/server/commands/requestPasswordReset';
import { asFormAction, emptyForm } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = asLoad(async () => ({ form: await emptyForm(ResetRequest) }));

export const actions: Actions = {
  default: asFormAction(ResetRequest, async (form, _event, context) => {
    await requestPasswordReset(context, form.data.email);
    return message(form, {
      tone: 'done',
      text: `If there is an account with the address ${form.data.email}, a link to set a new password is on its way to it. It holds for one hour.`
    });
  })
};
