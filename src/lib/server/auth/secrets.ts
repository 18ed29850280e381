/** Secrets that travel in links and headers, and the hashes that are kept of them. */
import { createHash, randomBytes } from 'node:crypto';

/** 256 random bits as 43 characters that need no escaping in an address. */
export function newSecret(): string {
  return randomBytes(32).toString('base64url');
}

/**
 * SHA-256 in hexadecimal. A plain hash is enough here: the secret has 256 bits of chance, so there is nothing to guess.
 * Passwords go through `passwords.ts` instead.
 */
export function hashSecret(secret: string): string {
  return createHash('sha256').update(secret).digest('hex');
}
