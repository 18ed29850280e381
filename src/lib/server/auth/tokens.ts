/** Bearer tokens of the API: how they look and how they are found again. */
import { Op } from 'sequelize';
import type { Actor } from '../context';
import { ApiToken } from '../db/models/ApiToken';
import { loadActor } from './loadActor';
import { hashSecret, newSecret } from './secrets';

/** Lets a scanner of leaked secrets know what it has found. */
export const TOKEN_PREFIX = 'sdg_';

/** `last_used_at` is for the owner's eye: once in a while is often enough, and spares a write for each request. */
const TOUCH_EVERY_MS = 5 * 60_000;

/** A new token and what is kept of it. */
export function newToken(): { secret: string; tokenHash: string; last4: string } {
  const secret = TOKEN_PREFIX + newSecret();
  return { secret, tokenHash: hashSecret(secret), last4: secret.slice(-4) };
}

/** The person behind a token that is known, not withdrawn and not past its date; otherwise null. */
export async function resolveToken(secret: string, now: Date): Promise<Actor | null> {
  if (!secret.startsWith(TOKEN_PREFIX)) return null;
  const token = await ApiToken.findOne({
    where: { tokenHash: hashSecret(secret), revokedAt: null, expiresAt: { [Op.gt]: now } }
  });
  if (!token) return null;
  if (!token.lastUsedAt || now.getTime() - token.lastUsedAt.getTime() > TOUCH_EVERY_MS) {
    await token.update({ lastUsedAt: now });
  }
  return loadActor(token.userId, 'token', token.scopes);
}
