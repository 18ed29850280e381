import { asLoad } from '$lib/server/kit/asLoad';
import { chosenWorkspace } from '$lib/server/queries/chosenWorkspace';
import { keptMail } from '$lib/server/queries/keptMail';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = asLoad(async (event, context) => {
  const workspace = chosenWorkspace(context, 'workspace.readMail', event.url.searchParams.get('workspace'));
  return { workspace, messages: await keptMail(context, workspace.id) };
});
