import { requireUser } from '$lib/server/kit/requireUser';
import type { LayoutServerLoad } from './$types';

/** Everything below is for people who have signed in. */
export const load: LayoutServerLoad = (event) => {
  const actor = requireUser(event);
  return {
    me: {
      id: actor.userId,
      name: actor.name,
      email: actor.email,
      workspaces: actor.memberships.map(({ workspaceId, workspaceName, role }) => ({
        id: workspaceId,
        name: workspaceName,
        role
      }))
    }
  };
};
