import { Op, type Transaction } from 'sequelize';
import type { StudyRole, WorkspaceRole } from '$lib/contracts/people';
import { recordAudit } from '../audit/record';
import { hashSecret, newSecret } from '../auth/secrets';
import type { Context } from '../context';
import { Invitation } from '../db/models/Invitation';
import { Study } from '../db/models/Study';
import { Workspace } from '../db/models/Workspace';
import { refusal } from '../errors';
import { sendMail } from '../mail/send';
import { invitationMail } from '../mail/templates/invitation';
import { requireActor } from '../policies/ability';

const HOLDS_MS = 14 * 86_400_000;

/** Into a workspace (with its role), to a study (with its role), or both. */
export interface InvitationTo {
  email: string;
  workspaceId?: string;
  workspaceRole?: WorkspaceRole;
  studyId?: string;
  studyRole?: StudyRole;
}

/**
 * Invites an address by e-mail inside the transaction of the act that decided it; decides no permission itself. An open
 * invitation of the same address to the same thing is replaced. The mail goes out before the commit: a mail that is not
 * taken (503) undoes the invitation, while a link whose commit failed merely leads nowhere. Its callers count the tries
 * before they open the transaction, since counting needs a connection of its own.
 */
export async function inviteByEmail(context: Context, transaction: Transaction, to: InvitationTo): Promise<Invitation> {
  const actor = requireActor(context.actor);
  const email = to.email.trim().toLowerCase();
  const study = to.studyId ? await Study.findByPk(to.studyId, { transaction }) : null;
  if (to.studyId && !study) throw refusal('study.notFound');
  const workspaceId = to.workspaceId ?? study?.workspaceId ?? null;
  const workspace = workspaceId ? await Workspace.findByPk(workspaceId, { transaction }) : null;
  if (to.workspaceRole && !workspace) throw refusal('workspace.notFound');

  const workspaceRole = to.workspaceRole ?? null;
  const studyRole = to.studyRole ?? null;
  const studyId = to.studyId ?? null;
  await Invitation.update(
    { withdrawnAt: context.now() },
    {
      where: {
        email,
        studyId,
        workspaceId,
        workspaceRole: workspaceRole === null ? null : { [Op.not]: null },
        acceptedAt: null,
        withdrawnAt: null
      },
      transaction
    }
  );
  const token = newSecret();
  const expiresAt = new Date(context.now().getTime() + HOLDS_MS);
  const tokenHash = hashSecret(token);
  const invitation = await Invitation.create(
    { email, workspaceId, workspaceRole, studyId, studyRole, invitedById: actor.userId, tokenHash, expiresAt },
    { transaction }
  );
  await recordAudit(context, transaction, {
    act: studyRole ? 'study.invite' : 'member.invite',
    subjectType: 'invitation',
    subjectId: invitation.id,
    studyId,
    workspaceId,
    details: { email, workspaceRole, studyRole }
  });
  const names = { workspaceName: workspace?.name ?? null, studyTitle: study?.title ?? null };
  await sendMail(
    invitationMail({ to: email, invitedBy: actor.name, ...names, workspaceRole, studyRole, token, expiresAt })
  );
  return invitation;
}
