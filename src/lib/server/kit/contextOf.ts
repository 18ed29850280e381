import type { RequestEvent } from '@sveltejs/kit';
import type { Actor, Context } from '../context';
import { refusal } from '../errors';

export interface SignedInContext extends Context {
  actor: Actor;
}

/** The address of the caller; '' where the adapter does not know it. */
export function addressOf(event: RequestEvent): string {
  try {
    return event.getClientAddress();
  } catch {
    return '';
  }
}

/** The context of a request, as commands and queries want it. */
export function contextOf(event: RequestEvent): Context {
  return {
    actor: event.locals.actor,
    requestId: event.locals.requestId,
    ip: addressOf(event),
    now: () => new Date()
  };
}

/** The context of a signed-in person's request; throws the 401 refusal, which `asLoad` turns into the way to sign in. */
export function signedInContextOf(event: RequestEvent): SignedInContext {
  const context = contextOf(event);
  if (!context.actor) throw refusal('auth.required');
  return { ...context, actor: context.actor };
}
