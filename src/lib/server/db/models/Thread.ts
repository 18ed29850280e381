import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize
} from 'sequelize';
import type { AnchorKind } from '$lib/contracts/comment';

/** A question or remark about one thing in a study, with what that thing read when it was asked. */
export class Thread extends Model<InferAttributes<Thread>, InferCreationAttributes<Thread>> {
  declare id: CreationOptional<string>;
  declare studyId: string;
  /** 1, 2, 3 … within a study: the number in the margin. */
  declare number: number;
  declare anchorKind: AnchorKind;
  /** A rate path, a point's letter, a part's key; empty for the study. */
  declare anchorKey: string;
  declare anchorQuote: string;
  declare anchorRevision: number;
  declare state: CreationOptional<'open' | 'resolved'>;
  declare openerId: string;
  declare resolvedById: CreationOptional<string | null>;
  declare resolvedAt: CreationOptional<Date | null>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;

  static register(sequelize: Sequelize): void {
    Thread.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true, defaultValue: DataTypes.UUIDV4 },
        studyId: { type: DataTypes.UUID, allowNull: false },
        number: { type: DataTypes.INTEGER, allowNull: false },
        anchorKind: { type: DataTypes.TEXT, allowNull: false },
        anchorKey: { type: DataTypes.TEXT, allowNull: false },
        anchorQuote: { type: DataTypes.TEXT, allowNull: false },
        anchorRevision: { type: DataTypes.INTEGER, allowNull: false },
        state: { type: DataTypes.TEXT, allowNull: false, defaultValue: 'open' },
        openerId: { type: DataTypes.UUID, allowNull: false },
        resolvedById: { type: DataTypes.UUID, allowNull: true },
        resolvedAt: { type: DataTypes.DATE, allowNull: true },
        createdAt: { type: DataTypes.DATE, allowNull: false },
        updatedAt: { type: DataTypes.DATE, allowNull: false }
      },
      { sequelize, tableName: 'threads' }
    );
  }
}
