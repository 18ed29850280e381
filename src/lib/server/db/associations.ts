/** Every model, and how they hang together. Called once for each connection. */
import type { Sequelize } from 'sequelize';
import { ApiToken } from './models/ApiToken';
import { AuditEvent } from './models/AuditEvent';
import { Comment } from './models/Comment';
import { Invitation } from './models/Invitation';
import { MailMessage } from './models/MailMessage';
import { Membership } from './models/Membership';
import { PasswordReset } from './models/PasswordReset';
import { Reading } from './models/Reading';
import { Session } from './models/Session';
import { Study } from './models/Study';
import { StudyRevision } from './models/StudyRevision';
import { StudyShare } from './models/StudyShare';
import { Thread } from './models/Thread';
import { User } from './models/User';
import { Workspace } from './models/Workspace';

/** Each model has `static register(sequelize)`. */
const MODELS = [
  User,
  Workspace,
  Membership,
  Session,
  ApiToken,
  PasswordReset,
  Invitation,
  MailMessage,
  AuditEvent,
  Study,
  StudyRevision,
  StudyShare,
  Reading,
  Thread,
  Comment
];

/** Registers every model with the connection, then joins them. */
export function registerModels(sequelize: Sequelize): void {
  for (const model of MODELS) model.register(sequelize);

  Membership.belongsTo(User, { as: 'user', foreignKey: 'userId' });
  Membership.belongsTo(Workspace, { as: 'workspace', foreignKey: 'workspaceId' });
  User.hasMany(Membership, { as: 'memberships', foreignKey: 'userId' });
  Workspace.hasMany(Membership, { as: 'memberships', foreignKey: 'workspaceId' });
  Invitation.belongsTo(User, { as: 'invitedBy', foreignKey: 'invitedById' });
  Invitation.belongsTo(Workspace, { as: 'workspace', foreignKey: 'workspaceId' });

  Study.belongsTo(User, { as: 'owner', foreignKey: 'ownerId' });
  Study.hasMany(StudyShare, { as: 'shares', foreignKey: 'studyId' });
  StudyShare.belongsTo(User, { as: 'user', foreignKey: 'userId' });
  StudyRevision.belongsTo(User, { as: 'author', foreignKey: 'authorId' });
  Reading.belongsTo(User, { as: 'user', foreignKey: 'userId' });
  Thread.belongsTo(User, { as: 'opener', foreignKey: 'openerId' });
  Thread.belongsTo(User, { as: 'resolvedBy', foreignKey: 'resolvedById' });
  Thread.hasMany(Comment, { as: 'comments', foreignKey: 'threadId' });
  Comment.belongsTo(User, { as: 'author', foreignKey: 'authorId' });
  Comment.belongsTo(Thread, { as: 'thread', foreignKey: 'threadId' });
}
