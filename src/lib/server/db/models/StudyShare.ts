import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize
} from 'sequelize';
import type { StudyRole } from '$lib/contracts/study';

/** One person's part in one study, beside what their workspace role already gives them. */
export class StudyShare extends Model<InferAttributes<StudyShare>, InferCreationAttributes<StudyShare>> {
  declare id: CreationOptional<string>;
  declare studyId: string;
  declare userId: string;
  declare role: StudyRole;
  declare sharedById: CreationOptional<string | null>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;

  static register(sequelize: Sequelize): void {
    StudyShare.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true, defaultValue: DataTypes.UUIDV4 },
        studyId: { type: DataTypes.UUID, allowNull: false },
        userId: { type: DataTypes.UUID, allowNull: false },
        role: { type: DataTypes.TEXT, allowNull: false },
        sharedById: { type: DataTypes.UUID, allowNull: true },
        createdAt: { type: DataTypes.DATE, allowNull: false },
        updatedAt: { type: DataTypes.DATE, allowNull: false }
      },
      { sequelize, tableName: 'study_shares' }
    );
  }
}
