import { message } from 'sveltekit-superforms';
import { ChangePassword, NamedRow, Profile } from '$lib/contracts/people';
import { changePassword } from '$lib/server/commands/changePassword';
import { endOwnSession } from '$lib/server/commands/endOwnSession';
import { updateProfile } from '$lib/server/commands/updateProfile';
import { asAction, asFormAction, emptyForm } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import { readFields } from '$lib/server/kit/readFields';
import { requireUser } from '$lib/server/kit/requireUser';
import { ownSessions } from '$lib/server/queries/ownSessions';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = asLoad(async (event, context) => {
  const { name } = requireUser(event);
  return {
    profile: await emptyForm(Profile, { name }, 'profile'),
    password: await emptyForm(ChangePassword, null, 'password'),
    sessions: await ownSessions(context, event.locals.session?.id ?? null)
  };
});

export const actions: Actions = {
  profile: asFormAction(
    Profile,
    async (form, _event, context) => {
      await updateProfile(context, form.data);
      return message(form, { tone: 'done', text: 'The name is saved.' });
    },
    { id: 'profile' }
  ),
  password: asFormAction(
    ChangePassword,
    async (form, { locals }, context) => {
      await changePassword(context, { ...form.data, sessionId: locals.session?.id ?? null });
      return message(form, { tone: 'done', text: 'The password is changed; your other browsers are signed out.' });
    },
    { id: 'password', secrets: ['currentPassword', 'password'] }
  ),
  endSession: asAction(async ({ request }, context) => {
    const { id } = await readFields(request, NamedRow);
    await endOwnSession(context, id);
  })
};
