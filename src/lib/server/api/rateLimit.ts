/** How often something may be tried. The counts of sign-ins live in PostgreSQL, so a restart forgives nobody. */
import {
  RateLimiterMemory,
  RateLimiterPostgres,
  RateLimiterRes,
  type RateLimiterAbstract
} from 'rate-limiter-flexible';
import type { Sequelize } from 'sequelize';
import { hashSecret } from '../auth/secrets';
import { config, type Config } from '../config';
import { sequelize } from '../db/connection';
import { refusal } from '../errors';

export type Limit = keyof Config['limits'];

/** Seconds of each window; the number of tries in it comes from the configuration. */
const WINDOW_SECONDS: Record<Limit, number> = {
  signIn: 15 * 60,
  signInAddress: 15 * 60,
  reset: 60 * 60,
  invitation: 60 * 60,
  api: 60
};

/** One set of limiters for each connection: tests point the process at a database of their own. */
const limiters = new WeakMap<Sequelize, Map<Limit, RateLimiterAbstract>>();

function limiterOf(limit: Limit): RateLimiterAbstract {
  const connection = sequelize();
  const known = limiters.get(connection) ?? new Map<Limit, RateLimiterAbstract>();
  limiters.set(connection, known);
  const found = known.get(limit);
  if (found) return found;
  const options = { keyPrefix: limit, points: config().limits[limit], duration: WINDOW_SECONDS[limit] };
  const made =
    limit === 'api'
      ? new RateLimiterMemory(options)
      : new RateLimiterPostgres({
          ...options,
          storeClient: connection,
          storeType: 'sequelize',
          tableName: 'rate_limits',
          // A migration makes it: the library would make it in the background and refuse the first tries meanwhile.
          tableCreated: true
        });
  known.set(limit, made);
  return made;
}

/** Counts one try. Throws the 429 refusal, with the seconds to wait, when there were too many. */
export async function countTry(limit: Limit, key: string): Promise<void> {
  try {
    // Hashed, so that the table holds no addresses and a long key fits.
    await limiterOf(limit).consume(hashSecret(key));
  } catch (error) {
    if (!(error instanceof RateLimiterRes)) throw error;
    throw refusal('rate.limited', { retryAfterSeconds: Math.max(1, Math.ceil(error.msBeforeNext / 1000)) });
  }
}

/** Forgets the tries of a key, after one that succeeded. */
export async function forgetTries(limit: Limit, key: string): Promise<void> {
  await limiterOf(limit).delete(hashSecret(key));
}
