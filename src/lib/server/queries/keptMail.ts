import { QueryTypes } from 'sequelize';
import { config } from '../config';
import type { Context } from '../context';
import { sequelize } from '../db/connection';
import { refusal } from '../errors';
import { authorize } from '../policies/ability';

export interface MailRow {
  id: string;
  recipient: string;
  sender: string;
  subject: string;
  text: string;
  receivedAt: string;
}

const NEWEST = 100;

/**
 * The newest messages that the built-in mail server has kept for the people of a workspace: its members and those it
 * invited, but nobody who belongs to another workspace, has a share of a study there or was invited there as well, since a
 * link in their mail, such as the one to set a new password, opens that too.
 * Throws 404 where a real mail server is in use.
 */
export async function keptMail(context: Context, workspaceId: string): Promise<MailRow[]> {
  authorize(context.actor, 'workspace.readMail', { kind: 'workspace', workspaceId });
  if (config().smtpUrl !== null) throw refusal('page.notFound');
  const rows = await sequelize().query<Omit<MailRow, 'receivedAt'> & { receivedAt: Date }>(
    `select m.id, m.recipient, m.sender, m.subject, m.text, m.received_at as "receivedAt"
     from mail_messages m
     where (
       exists (select 1 from users u join memberships b on b.user_id = u.id
               where u.email = lower(m.recipient) and b.workspace_id = :workspaceId)
       or exists (select 1 from invitations i where i.email = lower(m.recipient) and i.workspace_id = :workspaceId)
     ) and not exists (select 1 from users u join memberships b on b.user_id = u.id
                       where u.email = lower(m.recipient) and b.workspace_id <> :workspaceId)
       and not exists (select 1 from users u join study_shares h on h.user_id = u.id join studies s on s.id = h.study_id
                       where u.email = lower(m.recipient) and s.workspace_id <> :workspaceId)
       and not exists (select 1 from invitations i
                       where i.email = lower(m.recipient) and i.workspace_id <> :workspaceId)
     order by m.received_at desc, m.id
     limit ${NEWEST}`,
    { replacements: { workspaceId }, type: QueryTypes.SELECT }
  );
  return rows.map((row) => ({ ...row, receivedAt: row.receivedAt.toISOString() }));
}
