import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { Invitation } from '../db/models/Invitation';
import { withTransaction } from '../db/transaction';
import { refusal } from '../errors';
import { isUuid } from '../isUuid';
import { openStudy } from '../studies/access';

/** Takes an open invitation to a study back: its link no longer works. By those who may share the study. */
export async function withdrawStudyInvitation(
  context: Context,
  input: { studyId: string; invitationId: string }
): Promise<void> {
  const { study } = await openStudy(context, input.studyId, 'study.share');
  if (!isUuid(input.invitationId)) throw refusal('invitation.notFound');
  await withTransaction(async (transaction) => {
    const invitation = await Invitation.findOne({
      where: { id: input.invitationId, studyId: study.id, acceptedAt: null, withdrawnAt: null },
      lock: transaction.LOCK.UPDATE,
      transaction
    });
    if (!invitation) throw refusal('invitation.notFound');
    await invitation.update({ withdrawnAt: context.now() }, { transaction });
    await recordAudit(context, transaction, {
      act: 'invitation.withdraw',
      subjectType: 'invitation',
      subjectId: invitation.id,
      studyId: study.id,
      workspaceId: study.workspaceId,
      details: { email: invitation.email }
    });
  });
}
