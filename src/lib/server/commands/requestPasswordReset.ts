import { recordAudit } from '../audit/record';
import { hashSecret, newSecret } from '../auth/secrets';
import { countTry } from '../api/rateLimit';
import type { Context } from '../context';
import { PasswordReset } from '../db/models/PasswordReset';
import { User } from '../db/models/User';
import { withTransaction } from '../db/transaction';
import { log } from '../log';
import { sendMail } from '../mail/send';
import { passwordResetMail } from '../mail/templates/passwordReset';

const HOLDS_MS = 60 * 60_000;

/**
 * Sends the link to set a new password, if there is an account. Whoever asks is told the same in the same time either
 * way: hence the mail is not waited for, and `delivery` is for tests alone. Throws 429 after too many tries.
 */
export async function requestPasswordReset(context: Context, email: string): Promise<{ delivery: Promise<void> }> {
  // Many addresses from one machine, and one address from many machines: neither may fill a mailbox or try out who exists.
  await countTry('signInAddress', `reset ${context.ip}`);
  await countTry('reset', email);
  const user = await User.findOne({ where: { email } });
  return { delivery: user ? deliver(context, user) : Promise.resolve() };
}

async function deliver(context: Context, user: User): Promise<void> {
  const token = newSecret();
  try {
    await withTransaction(async (transaction) => {
      await PasswordReset.create(
        { userId: user.id, tokenHash: hashSecret(token), expiresAt: new Date(context.now().getTime() + HOLDS_MS) },
        { transaction }
      );
      await recordAudit(context, transaction, { act: 'password.askReset', subjectType: 'user', subjectId: user.id });
      await sendMail(passwordResetMail({ to: user.email, name: user.name, token }));
    });
  } catch (error) {
    log().error({ err: error, requestId: context.requestId }, 'password reset not sent');
  }
}
