/** Who calls the API: a bearer token, or the session of the page that is open. */
import { resolveToken } from '../auth/tokens';
import { config } from '../config';
import type { Actor } from '../context';
import { refusal } from '../errors';

export interface Caller {
  headers: Headers;
  method: string;
  /** The origin this server was addressed by. */
  ownOrigin: string;
  /** The person of the session cookie, where there is one. */
  sessionActor: Actor | null;
  now: Date;
}

const SAFE = ['GET', 'HEAD', 'OPTIONS'];

/**
 * The actor of an API request. A bearer token is looked at first and needs no origin, since no browser adds it unasked.
 * A session cookie is added by any site's form, so a request that changes something must come from our own origin.
 * Throws 401 when there is neither, or the token is not good; 403 for a foreign origin.
 */
export async function authenticate(caller: Caller): Promise<Actor> {
  const header = caller.headers.get('authorization');
  if (header !== null) {
    const secret = /^Bearer +(\S+)$/i.exec(header)?.[1];
    const actor = secret ? await resolveToken(secret, caller.now) : null;
    if (!actor) throw refusal('auth.invalidToken');
    return actor;
  }
  if (!caller.sessionActor) throw refusal('auth.required', { message: 'Sign in, or send a bearer token.' });
  const origin = caller.headers.get('origin');
  const own = [caller.ownOrigin, config().origin, ...config().trustedOrigins];
  if (!SAFE.includes(caller.method) && (origin === null || !own.includes(origin))) throw refusal('auth.foreignOrigin');
  return caller.sessionActor;
}
