import { recordAudit } from '../audit/record';
import { endSession } from '../auth/sessions';
import type { Context } from '../context';
import { withTransaction } from '../db/transaction';

/** Ends the session of this browser. Without one it does nothing. */
export async function signOut(context: Context, sessionId: string | null): Promise<void> {
  const { actor } = context;
  if (!sessionId || !actor) return;
  await withTransaction(async (transaction) => {
    await recordAudit(context, transaction, { act: 'session.end', subjectType: 'user', subjectId: actor.userId });
    await endSession(sessionId, transaction);
  });
}
