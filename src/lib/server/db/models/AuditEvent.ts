import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize
} from 'sequelize';

/** One act: who, when, what, on which thing. The table refuses changes and deletions by itself. */
export class AuditEvent extends Model<InferAttributes<AuditEvent>, InferCreationAttributes<AuditEvent>> {
  /** A bigint, which the driver hands over as text. */
  declare id: CreationOptional<string>;
  declare at: Date;
  declare actorId: string | null;
  declare actorName: string;
  declare via: string;
  declare act: string;
  declare subjectType: string;
  declare subjectId: string;
  declare studyId: CreationOptional<string | null>;
  declare workspaceId: CreationOptional<string | null>;
  declare details: Record<string, unknown>;
  declare requestId: string;
  declare ip: string;

  static register(sequelize: Sequelize): void {
    AuditEvent.init(
      {
        id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
        at: { type: DataTypes.DATE, allowNull: false },
        actorId: DataTypes.UUID,
        actorName: { type: DataTypes.STRING(120), allowNull: false },
        via: { type: DataTypes.STRING(10), allowNull: false },
        act: { type: DataTypes.STRING(60), allowNull: false },
        subjectType: { type: DataTypes.STRING(40), allowNull: false },
        subjectId: { type: DataTypes.TEXT, allowNull: false },
        studyId: DataTypes.UUID,
        workspaceId: DataTypes.UUID,
        details: { type: DataTypes.JSONB, allowNull: false },
        requestId: { type: DataTypes.TEXT, allowNull: false },
        ip: { type: DataTypes.STRING(64), allowNull: false }
      },
      { sequelize, tableName: 'audit_events', timestamps: false }
    );
  }
}
