import type { RequestHandler } from './$types';

/** Whether the process answers at all; asks nothing of the database. */
export const GET: RequestHandler = () =>
  new Response('alive\n', { headers: { 'content-type': 'text/plain; charset=utf-8', 'cache-control': 'no-store' } });
