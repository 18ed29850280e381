import type { TokenScope } from '$lib/contracts/people';
import type { Context } from '../context';
import { ApiToken } from '../db/models/ApiToken';
import { authorize, requireActor } from '../policies/ability';

export interface TokenRow {
  id: string;
  name: string;
  last4: string;
  scopes: TokenScope[];
  createdAt: string;
  expiresAt: string;
  lastUsedAt: string | null;
  isPast: boolean;
}

/** One's own tokens that are not withdrawn, newest first; never their secrets. */
export async function ownTokens(context: Context): Promise<TokenRow[]> {
  const { userId } = requireActor(context.actor);
  authorize(context.actor, 'token.manage', { kind: 'token', userId });
  const tokens = await ApiToken.findAll({ where: { userId, revokedAt: null }, order: [['createdAt', 'DESC']] });
  return tokens.map((token) => ({
    id: token.id,
    name: token.name,
    last4: token.last4,
    scopes: token.scopes,
    createdAt: token.createdAt.toISOString(),
    expiresAt: token.expiresAt.toISOString(),
    lastUsedAt: token.lastUsedAt?.toISOString() ?? null,
    isPast: token.expiresAt <= context.now()
  }));
}
