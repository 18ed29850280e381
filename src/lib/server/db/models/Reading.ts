import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize
} from 'sequelize';

export type ReadingPart = 'equilibria' | 'trajectories';

/**
 * An author's statement of what a result says, tied to the inputs it was read from. When the inputs move on, the part is
 * stale: the fingerprint here no longer matches.
 */
export class Reading extends Model<InferAttributes<Reading>, InferCreationAttributes<Reading>> {
  declare id: CreationOptional<string>;
  declare studyId: string;
  declare part: ReadingPart;
  declare fingerprint: string;
  declare revision: number;
  declare sentence: string;
  declare userId: string;
  declare createdAt: CreationOptional<Date>;

  static register(sequelize: Sequelize): void {
    Reading.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true, defaultValue: DataTypes.UUIDV4 },
        studyId: { type: DataTypes.UUID, allowNull: false },
        part: { type: DataTypes.TEXT, allowNull: false },
        fingerprint: { type: DataTypes.TEXT, allowNull: false },
        revision: { type: DataTypes.INTEGER, allowNull: false },
        sentence: { type: DataTypes.TEXT, allowNull: false },
        userId: { type: DataTypes.UUID, allowNull: false },
        createdAt: { type: DataTypes.DATE, allowNull: false }
      },
      { sequelize, tableName: 'readings', updatedAt: false }
    );
  }
}
