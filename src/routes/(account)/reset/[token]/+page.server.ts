import { redirect } from '@sveltejs/kit';
import { ResetPassword } from '$lib/contracts/people';
import { blankSessionCookie } from '$lib/server/auth/sessions';
import { openReset, resetPassword } from '$lib/server/commands/resetPassword';
import { asFormAction, emptyForm } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import { contextOf } from '$lib/server/kit/contextOf';
import type { Actions, PageServerLoad, RequestEvent } from './$types';

export const load: PageServerLoad = asLoad(async (event) => {
  const { email } = await openReset(contextOf(event), event.params.token ?? '');
  return { email, form: await emptyForm(ResetPassword) };
});

export const actions: Actions = {
  default: asFormAction(
    ResetPassword,
    async (form, event: RequestEvent, context) => {
      await resetPassword(context, event.params.token, form.data.password);
      const cookie = blankSessionCookie();
      event.cookies.set(cookie.name, cookie.value, cookie.attributes);
      redirect(303, '/sign-in?from=reset');
    },
    { secrets: ['password'] }
  )
};
