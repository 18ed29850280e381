import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize
} from 'sequelize';
import type { TokenScope } from '$lib/contracts/people';

/** A bearer token of the API. Only its hash is kept; `last4` lets its owner recognise it. */
export class ApiToken extends Model<InferAttributes<ApiToken>, InferCreationAttributes<ApiToken>> {
  declare id: CreationOptional<string>;
  declare userId: string;
  declare name: string;
  declare tokenHash: string;
  declare last4: string;
  declare scopes: TokenScope[];
  declare expiresAt: Date;
  declare revokedAt: CreationOptional<Date | null>;
  declare lastUsedAt: CreationOptional<Date | null>;
  declare createdAt: CreationOptional<Date>;

  static register(sequelize: Sequelize): void {
    ApiToken.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true, defaultValue: DataTypes.UUIDV4 },
        userId: { type: DataTypes.UUID, allowNull: false },
        name: { type: DataTypes.STRING(80), allowNull: false },
        tokenHash: { type: DataTypes.CHAR(64), allowNull: false },
        last4: { type: DataTypes.CHAR(4), allowNull: false },
        scopes: { type: DataTypes.ARRAY(DataTypes.TEXT), allowNull: false },
        expiresAt: { type: DataTypes.DATE, allowNull: false },
        revokedAt: DataTypes.DATE,
        lastUsedAt: DataTypes.DATE,
        createdAt: DataTypes.DATE
      },
      { sequelize, tableName: 'api_tokens', updatedAt: false }
    );
  }
}
