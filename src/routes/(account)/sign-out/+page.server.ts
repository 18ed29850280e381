import { redirect } from '@sveltejs/kit';
import { blankSessionCookie } from '$lib/server/auth/sessions';
import { signOut } from '$lib/server/commands/signOut';
import { asAction } from '$lib/server/kit/asAction';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = ({ locals }) => {
  if (!locals.actor) redirect(303, '/sign-in');
};

export const actions: Actions = {
  default: asAction(async ({ cookies, locals }, context) => {
    await signOut(context, locals.session?.id ?? null);
    const cookie = blankSessionCookie();
    cookies.set(cookie.name, cookie.value, cookie.attributes);
    redirect(303, '/sign-in');
  })
};
