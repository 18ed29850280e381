import { recordAudit } from '../audit/record';
import { endSession, startSession, type SessionCookie } from '../auth/sessions';
import { verifyPassword } from '../auth/passwords';
import { countTry, forgetTries } from '../api/rateLimit';
import type { Context } from '../context';
import { User } from '../db/models/User';
import { withTransaction } from '../db/transaction';
import { refusal } from '../errors';

export interface Credentials {
  email: string;
  password: string;
  userAgent: string;
  /** The secret of the session this browser held until now, which the new one takes the place of. */
  replaces?: string | null;
}

/**
 * Signs a person in and returns the cookie to set. Throws 429 after too many tries, counted by address and e-mail and,
 * more loosely, by address alone; and one and the same 422 whether the e-mail or the password is wrong.
 */
export async function signIn(context: Context, credentials: Credentials): Promise<SessionCookie> {
  const { email, password, userAgent, replaces } = credentials;
  const person = `${context.ip} ${email}`;
  await countTry('signInAddress', context.ip);
  await countTry('signIn', person);
  const user = await User.findOne({ where: { email } });
  const known = await verifyPassword(user?.passwordHash ?? null, password);
  if (!user || !known) throw refusal('auth.wrongCredentials');
  await forgetTries('signIn', person);
  return withTransaction(async (transaction) => {
    await recordAudit(context, transaction, {
      act: 'session.start',
      subjectType: 'user',
      subjectId: user.id,
      by: { userId: user.id, name: user.name }
    });
    if (replaces) await endSession(replaces, transaction);
    return startSession(user.id, { ip: context.ip, userAgent, transaction });
  });
}
