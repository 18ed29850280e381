import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { ApiToken } from '../db/models/ApiToken';
import { withTransaction } from '../db/transaction';
import { refusal } from '../errors';
import { isUuid } from '../isUuid';
import { authorize, requireActor } from '../policies/ability';

/** Withdraws one of one's own tokens at once. Throws 404 for anybody else's. */
export async function revokeToken(context: Context, tokenId: string): Promise<void> {
  const { userId } = requireActor(context.actor);
  authorize(context.actor, 'token.manage', { kind: 'token', userId });
  if (!isUuid(tokenId)) throw refusal('token.notFound');
  await withTransaction(async (transaction) => {
    const token = await ApiToken.findOne({ where: { id: tokenId, userId, revokedAt: null }, transaction });
    if (!token) throw refusal('token.notFound');
    await token.update({ revokedAt: context.now() }, { transaction });
    await recordAudit(context, transaction, {
      act: 'token.revoke',
      subjectType: 'token',
      subjectId: token.id,
      details: { name: token.name, last4: token.last4 }
    });
  });
}
