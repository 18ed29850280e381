import { z } from 'zod';
import { Email } from '$lib/contracts/people';
import { studyRoles } from '$lib/contracts/study';
import { countTry } from '../api/rateLimit';
import type { Context } from '../context';
import { StudyShare } from '../db/models/StudyShare';
import { User } from '../db/models/User';
import { withTransaction } from '../db/transaction';
import { invalid, refusal } from '../errors';
import { sendMail } from '../mail/send';
import { studySharedMail } from '../mail/templates/studyShared';
import { openStudy } from '../studies/access';
import { parseInput } from '../studies/parseInput';
import { grantShare } from './grantShare';
import { inviteByEmail } from './inviteByEmail';

const Input = z.strictObject({
  email: Email,
  role: z.enum(studyRoles, { error: 'Choose contributor, reviewer or observer.' })
});

/**
 * Shares a study with whoever has that e-mail address: at once where there is an account, by invitation where there is
 * none. Either way a mail is sent before the commit, so that nobody is named without being told.
 */
export async function shareStudy(
  context: Context,
  input: { studyId: string; email: unknown; role: unknown }
): Promise<{ outcome: 'shared' | 'invited'; email: string }> {
  const { study, actor } = await openStudy(context, input.studyId, 'study.share');
  const { email, role } = parseInput(Input, { email: input.email, role: input.role });
  const user = await User.findOne({ where: { email } });
  if (user?.id === study.ownerId)
    throw refusal('share.owner', { issues: [{ path: 'email', message: 'The owner already has the study.' }] });
  // A share sends a mail as an invitation does: neither may be used to fill somebody's mailbox.
  await countTry('invitation', actor.userId);
  return withTransaction(async (transaction) => {
    if (!user) {
      await inviteByEmail(context, transaction, { email, studyId: study.id, studyRole: role });
      return { outcome: 'invited' as const, email };
    }
    if (await StudyShare.findOne({ where: { studyId: study.id, userId: user.id }, transaction })) {
      throw invalid('email', 'This person has the study already; change the role in the list below.');
    }
    await grantShare(context, transaction, { studyId: study.id, userId: user.id, role });
    await sendMail(
      studySharedMail({ to: email, sharedBy: actor.name, studyId: study.id, studyTitle: study.title, role })
    );
    return { outcome: 'shared' as const, email };
  });
}
