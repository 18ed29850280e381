import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { Invitation } from '../db/models/Invitation';
import { withTransaction } from '../db/transaction';
import { refusal } from '../errors';
import { isUuid } from '../isUuid';
import { authorize } from '../policies/ability';

/** An administrator takes an open invitation of the workspace back: its link no longer works. Throws 404 otherwise. */
export async function withdrawInvitation(context: Context, workspaceId: string, invitationId: string): Promise<void> {
  authorize(context.actor, 'workspace.manageMembers', { kind: 'workspace', workspaceId });
  if (!isUuid(invitationId)) throw refusal('invitation.notFound');
  await withTransaction(async (transaction) => {
    const invitation = await Invitation.findOne({
      where: { id: invitationId, workspaceId, acceptedAt: null, withdrawnAt: null },
      lock: transaction.LOCK.UPDATE,
      transaction
    });
    if (!invitation) throw refusal('invitation.notFound');
    await invitation.update({ withdrawnAt: context.now() }, { transaction });
    await recordAudit(context, transaction, {
      act: 'invitation.withdraw',
      subjectType: 'invitation',
      subjectId: invitation.id,
      studyId: invitation.studyId,
      workspaceId,
      details: { email: invitation.email }
    });
  });
}
