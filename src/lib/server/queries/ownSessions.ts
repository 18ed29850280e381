import { Op } from 'sequelize';
import { hashSecret } from '../auth/secrets';
import type { Context } from '../context';
import { Session } from '../db/models/Session';
import { authorize, requireActor } from '../policies/ability';

export interface SessionRow {
  /** The hash that is kept: it names the session and opens nothing. */
  id: string;
  browser: string;
  ip: string;
  startedAt: string;
  isThis: boolean;
}

/** A browser and its system in words, as far as its own description can be believed. */
export function browserOf(userAgent: string): string {
  const browser = /Edg\//.test(userAgent)
    ? 'Edge'
    : /Firefox\//.test(userAgent)
      ? 'Firefox'
      : /Chrome\//.test(userAgent)
        ? 'Chrome'
        : /Safari\//.test(userAgent)
          ? 'Safari'
          : null;
  const system = /Android/.test(userAgent)
    ? 'Android'
    : /iPhone|iPad/.test(userAgent)
      ? 'iOS'
      : /Windows/.test(userAgent)
        ? 'Windows'
        : /Mac OS X/.test(userAgent)
          ? 'macOS'
          : /Linux/.test(userAgent)
            ? 'Linux'
            : null;
  if (!browser) return 'Unknown browser';
  return system ? `${browser} on ${system}` : browser;
}

/** One's own signed-in browsers, newest first. @param sessionId the secret of this browser's cookie */
export async function ownSessions(context: Context, sessionId: string | null): Promise<SessionRow[]> {
  const { userId } = requireActor(context.actor);
  authorize(context.actor, 'token.manage', { kind: 'token', userId });
  const here = sessionId === null ? null : hashSecret(sessionId);
  const sessions = await Session.findAll({
    where: { userId, expiresAt: { [Op.gt]: context.now() } },
    order: [['createdAt', 'DESC']]
  });
  return sessions.map(({ id, ip, userAgent, createdAt }) => ({
    id,
    ip,
    browser: browserOf(userAgent),
    startedAt: createdAt.toISOString(),
    isThis: id === here
  }));
}
