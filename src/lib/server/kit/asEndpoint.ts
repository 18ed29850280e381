import { isHttpError, isRedirect, type RequestEvent } from '@sveltejs/kit';
import { authenticate } from '../api/authenticate';
import { problemOf, problemOfFault, problemResponse } from '../api/problem';
import { countTry } from '../api/rateLimit';
import { asRefusal } from '../db/connection';
import { AppError } from '../errors';
import { log } from '../log';
import { contextOf, type SignedInContext } from './contextOf';

function responseOf(value: unknown, status: number): Response {
  if (value instanceof Response) return value;
  if (value === undefined) return new Response(null, { status: 204 });
  return new Response(JSON.stringify(value), {
    status,
    headers: { 'content-type': 'application/json', 'cache-control': 'private, no-store' }
  });
}

function problemFor(thrown: unknown, requestId: string): Response {
  if (isRedirect(thrown) || isHttpError(thrown)) throw thrown;
  const refused = asRefusal(thrown);
  if (refused instanceof AppError) return problemResponse(problemOf(refused, requestId), refused.retryAfterSeconds);
  log().error({ err: thrown, requestId }, 'endpoint failed');
  return problemResponse(problemOfFault(requestId));
}

/**
 * An API endpoint out of a function of the event and a signed-in context (session cookie or bearer token).
 * What it returns is sent as JSON (nothing: 204; a Response: as it is); what it throws becomes a problem document.
 */
export function asEndpoint<E extends RequestEvent>(
  fn: (event: E, context: SignedInContext) => unknown,
  options: { status?: number } = {}
): (event: E) => Promise<Response> {
  return async (event) => {
    const context = contextOf(event);
    try {
      const actor = await authenticate({
        headers: event.request.headers,
        method: event.request.method,
        ownOrigin: event.url.origin,
        sessionActor: event.locals.actor,
        now: context.now()
      });
      event.locals.actor = actor;
      await countTry('api', actor.userId);
      return responseOf(await fn(event, { ...context, actor }), options.status ?? 200);
    } catch (thrown) {
      return problemFor(thrown, context.requestId);
    }
  };
}

/** An endpoint that anybody may ask, such as the health of the server. */
export function asOpenEndpoint<E extends RequestEvent>(fn: (event: E) => unknown): (event: E) => Promise<Response> {
  return async (event) => {
    try {
      return responseOf(await fn(event), 200);
    } catch (thrown) {
      return problemFor(thrown, event.locals.requestId);
    }
  };
}
