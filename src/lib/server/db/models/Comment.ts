import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize
} from 'sequelize';
import type { CommentKind } from '$lib/contracts/comment';

/** One contribution to a thread, never edited once said. */
export class Comment extends Model<InferAttributes<Comment>, InferCreationAttributes<Comment>> {
  declare id: CreationOptional<string>;
  declare threadId: string;
  declare authorId: string;
  declare kind: CommentKind;
  declare body: string;
  /** The revision its author was looking at. */
  declare revision: number;
  declare createdAt: CreationOptional<Date>;

  static register(sequelize: Sequelize): void {
    Comment.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true, defaultValue: DataTypes.UUIDV4 },
        threadId: { type: DataTypes.UUID, allowNull: false },
        authorId: { type: DataTypes.UUID, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        body: { type: DataTypes.TEXT, allowNull: false },
        revision: { type: DataTypes.INTEGER, allowNull: false },
        createdAt: { type: DataTypes.DATE, allowNull: false }
      },
      { sequelize, tableName: 'comments', updatedAt: false }
    );
  }
}
