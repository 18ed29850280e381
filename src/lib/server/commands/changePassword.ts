import { recordAudit } from '../audit/record';
import { hashPassword, verifyPassword, weaknessOf } from '../auth/passwords';
import { endSessionsOf } from '../auth/sessions';
import { countTry } from '../api/rateLimit';
import type { Context } from '../context';
import { PasswordReset } from '../db/models/PasswordReset';
import { User } from '../db/models/User';
import { withTransaction } from '../db/transaction';
import { invalid, refusal } from '../errors';
import { authorize, requireActor } from '../policies/ability';
import { announceChange } from './resetPassword';

/**
 * Changes one's own password and signs every other browser out.
 * @param sessionId the secret of this browser's cookie, which stays signed in. Throws 422 on the field at fault, or 429.
 */
export async function changePassword(
  context: Context,
  input: { currentPassword: string; password: string; sessionId: string | null }
): Promise<void> {
  const { userId } = requireActor(context.actor);
  authorize(context.actor, 'token.manage', { kind: 'token', userId });
  // Somebody at an unlocked desk must not be able to guess on and on.
  await countTry('signIn', `change ${userId}`);
  const user = await User.findByPk(userId);
  if (!user) throw refusal('auth.required');
  if (!(await verifyPassword(user.passwordHash, input.currentPassword))) {
    throw invalid('currentPassword', 'This is not your present password.');
  }
  const weakness = weaknessOf(input.password, user);
  if (weakness) throw invalid('password', weakness);
  const passwordHash = await hashPassword(input.password);
  await withTransaction(async (transaction) => {
    await user.update({ passwordHash }, { transaction });
    // A link asked for before, perhaps by somebody else, must not undo this.
    await PasswordReset.update({ usedAt: context.now() }, { where: { userId, usedAt: null }, transaction });
    await endSessionsOf(userId, { except: input.sessionId, transaction });
    await recordAudit(context, transaction, { act: 'password.change', subjectType: 'user', subjectId: userId });
  });
  await announceChange(user);
}
