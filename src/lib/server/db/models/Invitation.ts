import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize
} from 'sequelize';
import type { StudyRole, WorkspaceRole } from '$lib/contracts/people';
import type { User } from './User';
import type { Workspace } from './Workspace';

/** An invitation by e-mail into a workspace, to a study, or both. Only the hash of its link is kept. */
export class Invitation extends Model<InferAttributes<Invitation>, InferCreationAttributes<Invitation>> {
  declare id: CreationOptional<string>;
  declare email: string;
  declare workspaceId: CreationOptional<string | null>;
  declare workspaceRole: CreationOptional<WorkspaceRole | null>;
  declare studyId: CreationOptional<string | null>;
  declare studyRole: CreationOptional<StudyRole | null>;
  declare invitedById: string;
  declare tokenHash: string;
  declare expiresAt: Date;
  declare acceptedAt: CreationOptional<Date | null>;
  declare acceptedById: CreationOptional<string | null>;
  declare withdrawnAt: CreationOptional<Date | null>;
  declare createdAt: CreationOptional<Date>;
  declare invitedBy?: NonAttribute<User>;
  declare workspace?: NonAttribute<Workspace | null>;

  static register(sequelize: Sequelize): void {
    Invitation.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true, defaultValue: DataTypes.UUIDV4 },
        email: { type: DataTypes.STRING(254), allowNull: false },
        workspaceId: DataTypes.UUID,
        workspaceRole: DataTypes.STRING(20),
        studyId: DataTypes.UUID,
        studyRole: DataTypes.STRING(20),
        invitedById: { type: DataTypes.UUID, allowNull: false },
        tokenHash: { type: DataTypes.CHAR(64), allowNull: false },
        expiresAt: { type: DataTypes.DATE, allowNull: false },
        acceptedAt: DataTypes.DATE,
        acceptedById: DataTypes.UUID,
        withdrawnAt: DataTypes.DATE,
        createdAt: DataTypes.DATE
      },
      { sequelize, tableName: 'invitations', updatedAt: false }
    );
  }
}
