/** Passwords: argon2id, and the few that are refused. */
import { hash, verify } from '@node-rs/argon2';
import { PASSWORD_MAX, PASSWORD_MIN } from '$lib/contracts/people';

/** OWASP's first recommendation for argon2id; the library's default algorithm is argon2id. */
const COST = { memoryCost: 19_456, timeCost: 2, parallelism: 1 };

/** Long enough to pass the length rule, and the first that anybody would try. */
const COMMON = new Set([
  'passwordpassword',
  'password1234',
  'password12345',
  'password123456',
  'password123!',
  'passw0rd1234',
  '123456789012',
  '1234567890123',
  '1234567890123456',
  'qwertyuiopasdfgh',
  'qwertyuiop123',
  'qwerty123456',
  'letmeinletmein',
  'administrator',
  'administrator1',
  'welcomewelcome',
  'welcome12345',
  'iloveyouiloveyou',
  'changemechangeme',
  'changeme1234',
  'sedgelinesedgeline'
]);

/** A hash of no one's password, so that an unknown address costs the same time as a wrong password. */
let decoy: Promise<string> | null = null;

/** Hashes a password for keeping. */
export function hashPassword(password: string): Promise<string> {
  return hash(password, COST);
}

/** Whether the password belongs to the hash; with null for the hash, false after the same time. */
export async function verifyPassword(stored: string | null, password: string): Promise<boolean> {
  decoy ??= hash('no one has this password', COST);
  const matches = await verify(stored ?? (await decoy), password);
  return matches && stored !== null;
}

/** Why a password is refused, as a sentence with the fix, or null when it will do. Length, not composition, is the rule. */
export function weaknessOf(password: string, person: { email: string; name?: string }): string | null {
  const plain = password.trim().toLowerCase();
  if ([...password].length < PASSWORD_MIN)
    return `Use at least ${PASSWORD_MIN} characters; a few words together are fine.`;
  if (password.length > PASSWORD_MAX) return `Use at most ${PASSWORD_MAX} characters.`;
  if (plain === person.email.toLowerCase()) return 'Do not use your e-mail address; a few unrelated words are better.';
  if (person.name && plain === person.name.trim().toLowerCase())
    return 'Do not use your name; a few unrelated words are better.';
  if (COMMON.has(plain) || new Set(plain).size <= 2)
    return 'This is among the first that anybody would try; use a few unrelated words.';
  return null;
}
