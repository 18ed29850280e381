import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize
} from 'sequelize';

/** A message taken in by the built-in mail server, which delivers to nobody. */
export class MailMessage extends Model<InferAttributes<MailMessage>, InferCreationAttributes<MailMessage>> {
  declare id: CreationOptional<string>;
  declare sender: string;
  declare recipient: string;
  declare subject: string;
  declare text: string;
  declare html: CreationOptional<string>;
  declare receivedAt: CreationOptional<Date>;

  static register(sequelize: Sequelize): void {
    MailMessage.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true, defaultValue: DataTypes.UUIDV4 },
        sender: { type: DataTypes.STRING(320), allowNull: false },
        recipient: { type: DataTypes.STRING(320), allowNull: false },
        subject: { type: DataTypes.TEXT, allowNull: false },
        text: { type: DataTypes.TEXT, allowNull: false },
        html: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
        receivedAt: { type: DataTypes.DATE, allowNull: false, defaultValue: DataTypes.NOW }
      },
      { sequelize, tableName: 'mail_messages', timestamps: false }
    );
  }
}
