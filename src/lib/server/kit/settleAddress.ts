import type { Handle } from '@sveltejs/kit';

const loopback = /^(localhost|127\.0\.0\.1|\[::1\])(:\d+)?$/;

/**
 * Sends a page asked for at another name of this machine (`localhost` for `127.0.0.1`) to the address the server goes by.
 * Forms are accepted from that address alone, so a person who stayed at the other name could not even sign in.
 */
export const settleAddress: Handle = ({ event, resolve }) => {
  const { request, url } = event;
  const host = request.headers.get('host') ?? url.host;
  const isPage = request.method === 'GET' && (request.headers.get('accept') ?? '').includes('text/html');
  if (isPage && host !== url.host && loopback.test(host) && loopback.test(url.host)) {
    return new Response(null, { status: 307, headers: { location: url.href } });
  }
  return resolve(event);
};
