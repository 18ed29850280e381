import { config } from '$lib/server/config';
import { requireUser } from '$lib/server/kit/requireUser';
import { can, type WorkspaceAct } from '$lib/server/policies/ability';
import type { LayoutServerLoad } from './$types';

/** Which settings the person has: their own always, a workspace's where some workspace lets them. */
export const load: LayoutServerLoad = (event) => {
  const actor = requireUser(event);
  const may = (act: WorkspaceAct) =>
    actor.memberships.some(({ workspaceId }) => can(actor, act, { kind: 'workspace', workspaceId }));
  return {
    sections: {
      members: may('workspace.manageMembers'),
      mail: may('workspace.readMail') && config().smtpUrl === null,
      audit: may('workspace.readAudit')
    }
  };
};
