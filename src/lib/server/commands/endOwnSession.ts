import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { Session } from '../db/models/Session';
import { withTransaction } from '../db/transaction';
import { refusal } from '../errors';
import { authorize, requireActor } from '../policies/ability';

/** What `hashSecret` makes; PostgreSQL answers some other texts with a fault instead of "none". */
const HASH = /^[0-9a-f]{64}$/;

/** Signs one of the person's other browsers out. @param sessionId as `ownSessions` lists it. Throws 404 for anybody else's. */
export async function endOwnSession(context: Context, sessionId: string): Promise<void> {
  const { userId } = requireActor(context.actor);
  authorize(context.actor, 'token.manage', { kind: 'token', userId });
  if (!HASH.test(sessionId)) throw refusal('session.notFound');
  await withTransaction(async (transaction) => {
    const ended = await Session.destroy({ where: { id: sessionId, userId }, transaction });
    if (ended === 0) throw refusal('session.notFound');
    await recordAudit(context, transaction, {
      act: 'session.end',
      subjectType: 'user',
      subjectId: userId,
      details: { other: true }
    });
  });
}
