import type { Transaction } from 'sequelize';
import { recordAudit } from '../audit/record';
import { hashPassword, weaknessOf } from '../auth/passwords';
import { hashSecret } from '../auth/secrets';
import { endSessionsOf } from '../auth/sessions';
import type { Context } from '../context';
import { PasswordReset } from '../db/models/PasswordReset';
import { User } from '../db/models/User';
import { withTransaction } from '../db/transaction';
import { invalid, refusal } from '../errors';
import { log } from '../log';
import { sendMail } from '../mail/send';
import { passwordChangedMail } from '../mail/templates/passwordReset';

interface OpenReset {
  reset: PasswordReset;
  user: User;
}

async function find(context: Context, token: string, transaction?: Transaction): Promise<OpenReset> {
  const reset = await PasswordReset.findOne({
    where: { tokenHash: hashSecret(token), usedAt: null },
    transaction,
    // Two posts of one link must not both find it unused.
    ...(transaction ? { lock: transaction.LOCK.UPDATE } : {})
  });
  const user = reset && reset.expiresAt > context.now() ? await User.findByPk(reset.userId, { transaction }) : null;
  if (!reset || !user) throw refusal('reset.notFound');
  return { reset, user };
}

/** Whose password the link sets. Throws 404 when it is unknown, used or past its hour. */
export async function openReset(context: Context, token: string): Promise<{ email: string }> {
  const { user } = await find(context, token);
  return { email: user.email };
}

/** Sets the new password, uses the link up, and signs every browser of the person out. Throws 404, or 422 on `password`. */
export async function resetPassword(context: Context, token: string, password: string): Promise<void> {
  const user = await withTransaction(async (transaction) => {
    const { user } = await find(context, token, transaction);
    const weakness = weaknessOf(password, user);
    if (weakness) throw invalid('password', weakness);
    await user.update({ passwordHash: await hashPassword(password) }, { transaction });
    // Other links that were asked for end as well.
    await PasswordReset.update({ usedAt: context.now() }, { where: { userId: user.id, usedAt: null }, transaction });
    await endSessionsOf(user.id, { transaction });
    await recordAudit(context, transaction, {
      act: 'password.reset',
      subjectType: 'user',
      subjectId: user.id,
      by: { userId: user.id, name: user.name }
    });
    return user;
  });
  await announceChange(user);
}

/** Tells the person by mail; the change stands even if that mail is not taken. */
export async function announceChange(user: { email: string; name: string }): Promise<void> {
  await sendMail(passwordChangedMail({ to: user.email, name: user.name })).catch((error: unknown) =>
    log().warn({ err: error }, 'password change not announced')
  );
}
