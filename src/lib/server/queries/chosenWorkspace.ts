import type { Context } from '../context';
import { refusal } from '../errors';
import { authorize, can, requireActor, type WorkspaceAct } from '../policies/ability';

/**
 * The workspace a settings page is about: the one asked for, else the first in which the act is allowed. Throws 401 for
 * nobody, 404 for somebody without a workspace or asking for another's, 403 where the act is not allowed.
 */
export function chosenWorkspace(
  context: Context,
  act: WorkspaceAct,
  wanted: string | null
): { id: string; name: string } {
  const { memberships } = requireActor(context.actor);
  const allowed = memberships.find(({ workspaceId }) => can(context.actor, act, { kind: 'workspace', workspaceId }));
  const found = wanted ? memberships.find(({ workspaceId }) => workspaceId === wanted) : (allowed ?? memberships[0]);
  if (!found) throw refusal('workspace.notFound');
  authorize(context.actor, act, { kind: 'workspace', workspaceId: found.workspaceId });
  return { id: found.workspaceId, name: found.workspaceName };
}
