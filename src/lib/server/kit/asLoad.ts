import { error, redirect, type RequestEvent } from '@sveltejs/kit';
import type { Context } from '../context';
import { asRefusal } from '../db/connection';
import { AppError } from '../errors';
import { contextOf } from './contextOf';
import { signInPath } from './requireUser';

/** Throws what the framework understands for what our own code threw; for use in a `catch` of a load. */
export function throwForLoad(event: RequestEvent, thrown: unknown): never {
  const refused = asRefusal(thrown);
  if (!(refused instanceof AppError)) throw thrown;
  if (refused.status === 401) redirect(303, signInPath(event));
  if (refused.code === 'database.unavailable') event.locals.databaseAway = true;
  error(refused.status, { message: refused.message, code: refused.code, requestId: event.locals.requestId });
}

/**
 * A server `load` out of a function of the event and its context. A refusal becomes the error page of its status, a
 * missing sign-in the way to sign in and back; a fault goes on to `handleError`.
 */
export function asLoad<E extends RequestEvent, T>(
  fn: (event: E, context: Context) => T | Promise<T>
): (event: E) => Promise<T> {
  return async (event) => {
    try {
      return await fn(event, contextOf(event));
    } catch (thrown) {
      throwForLoad(event, thrown);
    }
  };
}
