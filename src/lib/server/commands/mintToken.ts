import type { TokenScope } from '$lib/contracts/people';
import { recordAudit } from '../audit/record';
import { newToken } from '../auth/tokens';
import type { Context } from '../context';
import { ApiToken } from '../db/models/ApiToken';
import { withTransaction } from '../db/transaction';
import { authorize, requireActor } from '../policies/ability';

const DAY_MS = 86_400_000;

/** Makes an API token of one's own. Its secret is returned here and nowhere else, ever. */
export async function mintToken(
  context: Context,
  input: { name: string; scope: TokenScope; days: number }
): Promise<{ id: string; secret: string; expiresAt: Date }> {
  const { userId } = requireActor(context.actor);
  authorize(context.actor, 'token.manage', { kind: 'token', userId });
  const { secret, tokenHash, last4 } = newToken();
  const scopes: TokenScope[] = input.scope === 'write' ? ['read', 'write'] : ['read'];
  const expiresAt = new Date(context.now().getTime() + input.days * DAY_MS);
  return withTransaction(async (transaction) => {
    const token = await ApiToken.create(
      { userId, name: input.name, tokenHash, last4, scopes, expiresAt },
      { transaction }
    );
    await recordAudit(context, transaction, {
      act: 'token.mint',
      subjectType: 'token',
      subjectId: token.id,
      details: { name: input.name, scopes, last4, expiresAt: expiresAt.toISOString() }
    });
    return { id: token.id, secret, expiresAt };
  });
}
