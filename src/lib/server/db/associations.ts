/** Every model, and how they hang together. Called once for each connection. */
import type { Sequelize } from 'sequelize';
import { ApiToken } from './models/ApiToken';
import { AuditEvent } from './models/AuditEvent';
import { Invitation } from './models/Invitation';
import { MailMessage } from './models/MailMessage';
import { Membership } from './models/Membership';
import { PasswordReset } from './models/PasswordReset';
import { Session } from './models/Session';
import { User } from './models/User';
import { Workspace } from './models/Workspace';

/** Each model has `static register(sequelize)`. */
const MODELS = [User, Workspace, Membership, Session, ApiToken, PasswordReset, Invitation, MailMessage, AuditEvent];

/** Registers every model with the connection, then joins them. */
export function registerModels(sequelize: Sequelize): void {
  for (const model of MODELS) model.register(sequelize);

  Membership.belongsTo(User, { as: 'user', foreignKey: 'userId' });
  Membership.belongsTo(Workspace, { as: 'workspace', foreignKey: 'workspaceId' });
  User.hasMany(Membership, { as: 'memberships', foreignKey: 'userId' });
  Workspace.hasMany(Membership, { as: 'memberships', foreignKey: 'workspaceId' });
  Invitation.belongsTo(User, { as: 'invitedBy', foreignKey: 'invitedById' });
  Invitation.belongsTo(Workspace, { as: 'workspace', foreignKey: 'workspaceId' });
}
