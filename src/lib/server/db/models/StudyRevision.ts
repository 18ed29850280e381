import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize
} from 'sequelize';
import type { StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';

/** What a study said at one moment, whole. Append-only: the database refuses to change a row. */
export class StudyRevision extends Model<InferAttributes<StudyRevision>, InferCreationAttributes<StudyRevision>> {
  declare id: CreationOptional<string>;
  declare studyId: string;
  /** 1, 2, 3 … within a study. */
  declare number: number;
  declare question: StudyQuestion;
  declare content: StudyContent;
  /** SHA-256 of the canonical JSON of question and content. */
  declare fingerprint: string;
  /** What changed since the revision before, in plain words. */
  declare summary: string;
  declare authorId: string;
  declare createdAt: CreationOptional<Date>;

  static register(sequelize: Sequelize): void {
    StudyRevision.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true, defaultValue: DataTypes.UUIDV4 },
        studyId: { type: DataTypes.UUID, allowNull: false },
        number: { type: DataTypes.INTEGER, allowNull: false },
        question: { type: DataTypes.JSONB, allowNull: false },
        content: { type: DataTypes.JSONB, allowNull: false },
        fingerprint: { type: DataTypes.TEXT, allowNull: false },
        summary: { type: DataTypes.TEXT, allowNull: false },
        authorId: { type: DataTypes.UUID, allowNull: false },
        createdAt: { type: DataTypes.DATE, allowNull: false }
      },
      { sequelize, tableName: 'study_revisions', updatedAt: false }
    );
  }
}
