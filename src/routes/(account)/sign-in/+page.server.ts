import { redirect } from '@sveltejs/kit';
import { SignIn } from '$lib/contracts/people';
import { signIn } from '$lib/server/commands/signIn';
import { asFormAction, emptyForm } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import { safeNext } from '$lib/server/kit/requireUser';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = asLoad(async ({ locals, url }) => {
  const next = url.searchParams.get('next');
  if (locals.actor) redirect(303, safeNext(next));
  const from = url.searchParams.get('from');
  return { form: await emptyForm(SignIn), wasSentHere: next !== null, hasNewPassword: from === 'reset' };
});

export const actions: Actions = {
  default: asFormAction(
    SignIn,
    async (form, event, context) => {
      const userAgent = event.request.headers.get('user-agent') ?? '';
      const cookie = await signIn(context, { ...form.data, userAgent, replaces: event.locals.session?.id ?? null });
      event.cookies.set(cookie.name, cookie.value, cookie.attributes);
      redirect(303, safeNext(event.url.searchParams.get('next')));
    },
    { secrets: ['password'] }
  )
};
