/** Signed-in browsers. Lucia is frozen upstream, so nothing outside this module and its adapter knows of it. */
import { Lucia, TimeSpan, type Cookie } from 'lucia';
import { Op, type Transaction } from 'sequelize';
import { config } from '../config';
import type { Actor } from '../context';
import { Session } from '../db/models/Session';
import { adapter } from './adapter';
import { loadActor } from './loadActor';
import { hashSecret } from './secrets';

/** Where a session is started from, and in which transaction: none of it outlives the row. */
export interface SessionOrigin {
  ip?: string;
  userAgent?: string;
  transaction?: Transaction;
}

declare module 'lucia' {
  interface Register {
    Lucia: Lucia;
    DatabaseSessionAttributes: SessionOrigin;
  }
}

let instance: Lucia | null = null;

function lucia(): Lucia {
  instance ??= new Lucia(adapter, {
    sessionExpiresIn: new TimeSpan(30, 'd'),
    sessionCookie: {
      name: 'sedgeline_session',
      attributes: { sameSite: 'lax', secure: config().origin.startsWith('https:') }
    }
  });
  return instance;
}

/** A cookie to set, with the path that the framework asks for. */
export interface SessionCookie {
  name: string;
  value: string;
  attributes: Cookie['attributes'] & { path: string };
}

function toCookie(cookie: Cookie): SessionCookie {
  return { name: cookie.name, value: cookie.value, attributes: { path: '/', ...cookie.attributes } };
}

export function sessionCookieName(): string {
  return lucia().sessionCookieName;
}

/** The cookie that signs a browser out. */
export function blankSessionCookie(): SessionCookie {
  return toCookie(lucia().createBlankSessionCookie());
}

/** Signs a browser in and returns its cookie. */
export async function startSession(userId: string, from: SessionOrigin): Promise<SessionCookie> {
  const session = await lucia().createSession(userId, from);
  return toCookie(lucia().createSessionCookie(session.id));
}

export interface ResolvedSession {
  id: string;
  expiresAt: Date;
  actor: Actor;
  /** Set when the session was prolonged and the browser must hear of it. */
  cookie: SessionCookie | null;
}

/** The session of a cookie's value, with the person; null when it is unknown or past its date. */
export async function resolveSession(id: string): Promise<ResolvedSession | null> {
  const { session } = await lucia().validateSession(id);
  const actor = session && (await loadActor(session.userId, 'session'));
  if (!actor) return null;
  const cookie = session.fresh ? toCookie(lucia().createSessionCookie(session.id)) : null;
  return { id: session.id, expiresAt: session.expiresAt, actor, cookie };
}

/** Ends one session by the secret of its cookie. */
export async function endSession(id: string, transaction: Transaction): Promise<void> {
  await Session.destroy({ where: { id: hashSecret(id) }, transaction });
}

/** Ends every session of a person, but for the one whose cookie secret is given. Returns how many ended. */
export function endSessionsOf(
  userId: string,
  options: { except?: string | null; transaction: Transaction }
): Promise<number> {
  const { except, transaction } = options;
  return Session.destroy({
    where: { userId, ...(except ? { id: { [Op.ne]: hashSecret(except) } } : {}) },
    transaction
  });
}

/** Sweeps sessions past their date. */
export async function sweepSessions(): Promise<void> {
  await lucia().deleteExpiredSessions();
}
