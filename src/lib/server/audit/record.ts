import type { Transaction } from 'sequelize';
import type { Context } from '../context';
import { AuditEvent } from '../db/models/AuditEvent';

export interface Act {
  /** What was done, such as `study.edit` or `member.remove`. */
  act: string;
  subjectType: string;
  subjectId: string;
  studyId?: string | null;
  workspaceId?: string | null;
  /** Old and new values where they matter; never a password, a token or a survey's data. */
  details?: Record<string, unknown>;
  /** Who did it, where nobody is signed in yet (a password set by link, an invitation accepted). */
  by?: { userId: string; name: string };
}

/** Writes one row of the audit inside the transaction of the act itself, so that neither exists without the other. */
export async function recordAudit(context: Context, transaction: Transaction, act: Act): Promise<void> {
  const { actor } = context;
  await AuditEvent.create(
    {
      at: context.now(),
      actorId: act.by?.userId ?? actor?.userId ?? null,
      actorName: act.by?.name ?? actor?.name ?? '',
      via: act.by ? 'link' : (actor?.via ?? 'system'),
      act: act.act,
      subjectType: act.subjectType,
      subjectId: act.subjectId,
      studyId: act.studyId ?? null,
      workspaceId: act.workspaceId ?? null,
      details: act.details ?? {},
      requestId: context.requestId,
      // Behind a proxy the address is a header, which may be of any length.
      ip: context.ip.slice(0, 64)
    },
    { transaction }
  );
}
