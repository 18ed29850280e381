import type { RequestEvent } from '@sveltejs/kit';
import { message } from 'sveltekit-superforms';
import { ChangeMemberRole, InviteMember, NamedRow, RemoveMember } from '$lib/contracts/people';
import { changeMemberRole } from '$lib/server/commands/changeMemberRole';
import { inviteMember } from '$lib/server/commands/inviteMember';
import { removeMember } from '$lib/server/commands/removeMember';
import { withdrawInvitation } from '$lib/server/commands/withdrawInvitation';
import type { Context } from '$lib/server/context';
import { asAction, asFormAction, emptyForm } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import { readFields } from '$lib/server/kit/readFields';
import { chosenWorkspace } from '$lib/server/queries/chosenWorkspace';
import { workspaceMembers } from '$lib/server/queries/workspaceMembers';
import type { Actions, PageServerLoad } from './$types';

const workspaceOf = (event: RequestEvent, context: Context) =>
  chosenWorkspace(context, 'workspace.manageMembers', event.url.searchParams.get('workspace'));

export const load: PageServerLoad = asLoad(async (event, context) => {
  const workspace = workspaceOf(event, context);
  return { workspace, ...(await workspaceMembers(context, workspace.id)), form: await emptyForm(InviteMember) };
});

export const actions: Actions = {
  invite: asFormAction(InviteMember, async (form, event, context) => {
    const { email, role } = form.data;
    await inviteMember(context, { workspaceId: workspaceOf(event, context).id, email, role });
    form.data.email = '';
    return message(form, { tone: 'done', text: `An invitation is on its way to ${email}. It holds for 14 days.` });
  }),
  changeRole: asAction(async (event, context) => {
    const fields = await readFields(event.request, ChangeMemberRole);
    await changeMemberRole(context, { workspaceId: workspaceOf(event, context).id, ...fields });
  }),
  remove: asAction(async (event, context) => {
    const fields = await readFields(event.request, RemoveMember);
    await removeMember(context, { workspaceId: workspaceOf(event, context).id, ...fields });
  }),
  withdraw: asAction(async (event, context) => {
    const { id } = await readFields(event.request, NamedRow);
    await withdrawInvitation(context, workspaceOf(event, context).id, id);
  })
};
