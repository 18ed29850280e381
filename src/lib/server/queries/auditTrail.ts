import { Op } from 'sequelize';
import type { Context } from '../context';
import { AuditEvent } from '../db/models/AuditEvent';
import { authorize } from '../policies/ability';
import { presentAudit, type AuditRow } from '../presenters/audit';

const PAGE = 50;

/**
 * The audit of a workspace, newest first, fifty at a time.
 * @param before the number of the last row already shown; null begins at the newest. @returns `next` is null at the end.
 */
export async function auditTrail(
  context: Context,
  workspaceId: string,
  before: string | null
): Promise<{ rows: AuditRow[]; next: string | null }> {
  authorize(context.actor, 'workspace.readAudit', { kind: 'workspace', workspaceId });
  const from = before !== null && /^\d{1,18}$/.test(before) ? before : null;
  const events = await AuditEvent.findAll({
    where: { workspaceId, ...(from === null ? {} : { id: { [Op.lt]: from } }) },
    order: [['id', 'DESC']],
    limit: PAGE + 1
  });
  const rows = events.slice(0, PAGE).map(presentAudit);
  return { rows, next: events.length > PAGE ? (rows.at(-1)?.id ?? null) : null };
}
