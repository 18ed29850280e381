import { asLoad } from '$lib/server/kit/asLoad';
import { auditTrail } from '$lib/server/queries/auditTrail';
import { chosenWorkspace } from '$lib/server/queries/chosenWorkspace';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = asLoad(async ({ url }, context) => {
  const workspace = chosenWorkspace(context, 'workspace.readAudit', url.searchParams.get('workspace'));
  const before = url.searchParams.get('before');
  return { workspace, isNewest: before === null, ...(await auditTrail(context, workspace.id, before)) };
});
