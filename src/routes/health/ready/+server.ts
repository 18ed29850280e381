import { json } from '@sveltejs/kit';
import { pingDatabase, sequelize } from '$lib/server/db/connection';
import { pendingMigrations } from '$lib/server/db/migrate';
import type { RequestHandler } from './$types';

/** A probe that waits longer than this has its answer: not ready. */
const patienceMs = 3_000;

type Readiness = {
  ready: boolean;
  database: 'reachable' | 'unreachable';
  migrations: 'applied' | 'pending' | 'unknown';
};

async function readiness(): Promise<Readiness> {
  try {
    await pingDatabase();
  } catch {
    return { ready: false, database: 'unreachable', migrations: 'unknown' };
  }
  try {
    const nPending = (await pendingMigrations(sequelize())).length;
    return { ready: nPending === 0, database: 'reachable', migrations: nPending === 0 ? 'applied' : 'pending' };
  } catch {
    return { ready: false, database: 'reachable', migrations: 'unknown' };
  }
}

/** Whether work can be done here: the database answers and its tables are up to date. 200 when so, otherwise 503. */
export const GET: RequestHandler = async () => {
  let timer: NodeJS.Timeout | undefined;
  const late = new Promise<Readiness>((resolve) => {
    timer = setTimeout(() => resolve({ ready: false, database: 'unreachable', migrations: 'unknown' }), patienceMs);
  });
  const answer = await Promise.race([readiness(), late]);
  clearTimeout(timer);
  return json(answer, { status: answer.ready ? 200 : 503, headers: { 'cache-control': 'no-store' } });
};
