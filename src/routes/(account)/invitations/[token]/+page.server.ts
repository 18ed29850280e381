import { redirect } from '@sveltejs/kit';
import { AcceptInvitation } from '$lib/contracts/people';
import { startSession } from '$lib/server/auth/sessions';
import { acceptInvitation } from '$lib/server/commands/acceptInvitation';
import { asAction, asFormAction, emptyForm } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import { openInvitation } from '$lib/server/queries/openInvitation';
import type { Actions, PageServerLoad, RequestEvent } from './$types';

export const load: PageServerLoad = asLoad(async (event, context) => ({
  invitation: await openInvitation(context, event.params.token ?? ''),
  here: event.url.pathname,
  form: await emptyForm(AcceptInvitation)
}));

export const actions: Actions = {
  /** Somebody new: their account is made, and this browser is signed in with it. */
  join: asFormAction(
    AcceptInvitation,
    async (form, event: RequestEvent, context) => {
      const { userId, path } = await acceptInvitation(context, event.params.token, form.data);
      const userAgent = event.request.headers.get('user-agent') ?? '';
      const cookie = await startSession(userId, { ip: context.ip, userAgent });
      event.cookies.set(cookie.name, cookie.value, cookie.attributes);
      redirect(303, path);
    },
    { secrets: ['password'] }
  ),
  /** The signed-in person it was sent to. */
  agree: asAction(async (event: RequestEvent, context) => {
    const { path } = await acceptInvitation(context, event.params.token, null);
    redirect(303, path);
  })
};
