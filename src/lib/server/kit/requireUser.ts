import { redirect, type RequestEvent } from '@sveltejs/kit';
import type { Actor } from '../context';

/**
 * Only a path of our own may follow a sign-in; anything else could lead a person elsewhere. It is read the way a
 * browser reads it, which drops tabs and takes a backslash for a slash.
 */
export function safeNext(next: string | null, fallback = '/studies'): string {
  const ours = 'http://ours.invalid';
  if (!next?.startsWith('/') || !URL.canParse(next, ours)) return fallback;
  const url = new URL(next, ours);
  // "/.//elsewhere" is read as "//elsewhere", which names another host.
  return url.origin === ours && !url.pathname.startsWith('//') ? url.pathname + url.search + url.hash : fallback;
}

/** Where to sign in and come back from. */
export function signInPath(event: RequestEvent): string {
  const here = event.url.pathname + event.url.search;
  // What failed for want of a session was perhaps a post; its address is the page's, its action is not repeated.
  const next = event.request.method === 'GET' ? here : event.url.pathname;
  return next === '/' ? '/sign-in' : `/sign-in?next=${encodeURIComponent(next)}`;
}

/** The signed-in person, or the way to sign in. */
export function requireUser(event: RequestEvent): Actor {
  if (!event.locals.actor) redirect(303, signInPath(event));
  return event.locals.actor;
}
