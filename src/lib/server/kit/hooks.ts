/** What happens around every request, from the outside in: id and log, headers, theme, database away, sign-in. */
import { randomUUID } from 'node:crypto';
import type { Handle, HandleServerError, RequestEvent, ServerInit } from '@sveltejs/kit';
import { sequence } from '@sveltejs/kit/hooks';
import { blankSessionCookie, resolveSession, sessionCookieName } from '../auth/sessions';
import { config } from '../config';
import { isDatabaseAway } from '../db/connection';
import { log } from '../log';
import { startUp } from '../startUp';
import { settleAddress } from './settleAddress';
import { unavailableResponse } from './unavailable';

export const THEME_COOKIE = 'theme';

const isApi = (event: RequestEvent) => event.url.pathname.startsWith('/api/');

// A function of its own, since the compiler remembers the null that the hook begins with.
const userIdOf = (event: RequestEvent) => event.locals.actor?.userId;

function wantsJson(event: RequestEvent): boolean {
  return (
    isApi(event) || event.isDataRequest || !(event.request.headers.get('accept') ?? 'text/html').includes('text/html')
  );
}

const identify: Handle = async ({ event, resolve }) => {
  event.locals.requestId = randomUUID();
  event.locals.actor = null;
  event.locals.session = null;
  event.locals.databaseAway = false;
  const startedAt = performance.now();
  const response = await resolve(event);
  log()[response.status >= 500 ? 'warn' : 'debug'](
    {
      requestId: event.locals.requestId,
      method: event.request.method,
      // The route, not the address: links to reset a password carry their secret in it.
      route: event.route.id,
      status: response.status,
      ms: Math.round(performance.now() - startedAt),
      userId: userIdOf(event)
    },
    'request'
  );
  return response;
};

const secure: Handle = async ({ event, resolve }) => {
  const response = await resolve(event);
  const set = (name: string, value: string) => {
    if (!response.headers.has(name)) response.headers.set(name, value);
  };
  set('x-request-id', event.locals.requestId);
  set('x-content-type-options', 'nosniff');
  set('referrer-policy', 'same-origin');
  set('x-frame-options', 'DENY');
  set('cross-origin-opener-policy', 'same-origin');
  set('permissions-policy', 'camera=(), geolocation=(), microphone=(), payment=(), usb=()');
  set('cache-control', 'private, no-store');
  if (config().origin.startsWith('https:')) set('strict-transport-security', 'max-age=31536000; includeSubDomains');
  return response;
};

const theme: Handle = ({ event, resolve }) => {
  const chosen = event.cookies.get(THEME_COOKIE);
  event.locals.theme = chosen === 'light' || chosen === 'dark' ? chosen : 'system';
  return resolve(event, { transformPageChunk: ({ html }) => html.replace('%sedgeline.theme%', event.locals.theme) });
};

/** Answers 503 whether the database was missed before the page, in its load, or in the middle of an action. */
const survive: Handle = async ({ event, resolve }) => {
  try {
    const response = await resolve(event);
    return event.locals.databaseAway ? unavailableResponse(event.locals.requestId, wantsJson(event)) : response;
  } catch (error) {
    if (!isDatabaseAway(error)) throw error;
    log().warn({ requestId: event.locals.requestId, err: error }, 'database away');
    return unavailableResponse(event.locals.requestId, wantsJson(event));
  }
};

const signIn: Handle = async ({ event, resolve }) => {
  const id = event.cookies.get(sessionCookieName());
  if (!id || event.url.pathname.startsWith('/health/')) return resolve(event);
  const found = await resolveSession(id);
  const cookie = found ? found.cookie : blankSessionCookie();
  if (cookie) event.cookies.set(cookie.name, cookie.value, cookie.attributes);
  if (found) {
    event.locals.actor = found.actor;
    event.locals.session = { id: found.id, expiresAt: found.expiresAt };
  }
  return resolve(event);
};

export const handle: Handle = sequence(identify, secure, settleAddress, theme, survive, signIn);

/** Faults: logged with the request's id; the person sees a plain sentence and that id. */
export const handleError: HandleServerError = ({ error, event, status }) => {
  const { requestId } = event.locals;
  if (status === 404) return { message: 'There is nothing at this address.', code: 'page.notFound', requestId };
  if (isDatabaseAway(error)) event.locals.databaseAway = true;
  if (status >= 500) log().error({ requestId, route: event.route.id, err: error }, 'fault');
  return { message: 'Something failed on our side. Nothing that was saved is lost.', code: 'fault', requestId };
};

/** The server listens only after this has resolved; if it fails, the process ends with 1. */
export const init: ServerInit = () => startUp();
