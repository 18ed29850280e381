import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize
} from 'sequelize';

/** One signed-in browser. */
export class Session extends Model<InferAttributes<Session>, InferCreationAttributes<Session>> {
  declare id: string;
  declare userId: string;
  declare expiresAt: Date;
  declare ip: CreationOptional<string>;
  declare userAgent: CreationOptional<string>;
  declare createdAt: CreationOptional<Date>;

  static register(sequelize: Sequelize): void {
    Session.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true },
        userId: { type: DataTypes.UUID, allowNull: false },
        expiresAt: { type: DataTypes.DATE, allowNull: false },
        ip: { type: DataTypes.STRING(64), allowNull: false, defaultValue: '' },
        userAgent: { type: DataTypes.STRING(300), allowNull: false, defaultValue: '' },
        createdAt: DataTypes.DATE
      },
      { sequelize, tableName: 'sessions', updatedAt: false }
    );
  }
}
