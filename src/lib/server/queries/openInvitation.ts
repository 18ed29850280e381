import type { StudyRole, WorkspaceRole } from '$lib/contracts/people';
import { findInvitation } from '../commands/acceptInvitation';
import type { Context } from '../context';
import { Study } from '../db/models/Study';
import { User } from '../db/models/User';
import { Workspace } from '../db/models/Workspace';

export interface OpenInvitation {
  email: string;
  invitedBy: string;
  workspaceName: string | null;
  workspaceRole: WorkspaceRole | null;
  studyTitle: string | null;
  studyRole: StudyRole | null;
  /** What the person has to do: type a name and a password, sign in, sign in as somebody else, or only agree. */
  step: 'join' | 'signIn' | 'otherPerson' | 'agree';
}

/** An invitation as its link shows it. Throws 404 when the link no longer holds. */
export async function openInvitation(context: Context, token: string): Promise<OpenInvitation> {
  const invitation = await findInvitation(context, token);
  const { email, workspaceRole, studyRole } = invitation;
  const [inviter, workspace, study, account] = await Promise.all([
    User.findByPk(invitation.invitedById, { attributes: ['name'] }),
    invitation.workspaceId ? Workspace.findByPk(invitation.workspaceId, { attributes: ['name'] }) : null,
    invitation.studyId ? Study.findByPk(invitation.studyId, { attributes: ['id', 'title'] }) : null,
    User.findOne({ where: { email }, attributes: ['id'] })
  ]);
  const { actor } = context;
  const step = actor ? (actor.email === email ? 'agree' : 'otherPerson') : account ? 'signIn' : 'join';
  return {
    email,
    workspaceRole,
    studyRole,
    step,
    invitedBy: inviter?.name ?? '',
    workspaceName: workspace?.name ?? null,
    studyTitle: study?.title ?? null
  };
}
