import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize
} from 'sequelize';
import type { StudyQuestion } from '$lib/contracts/study';
import type { StudySketch } from '$lib/contracts/views';
import type { PartStatus } from '$lib/study';

/**
 * One study as its list row: who owns it, where it stands, and what its latest revision says, restated so that the list
 * is drawn from this table alone. The words and numbers of a study live in its revisions.
 */
export class Study extends Model<InferAttributes<Study>, InferCreationAttributes<Study>> {
  declare id: CreationOptional<string>;
  declare workspaceId: string;
  declare ownerId: string;
  declare originId: CreationOptional<string | null>;
  declare title: string;
  declare place: string;
  declare kind: StudyQuestion['interaction'];
  declare species: { first: { common: string; scientific: string }; second: { common: string; scientific: string } };
  declare state: CreationOptional<'open' | 'archived'>;
  /** Number of the latest revision. */
  declare revision: CreationOptional<number>;
  declare fingerprint: string;
  /** Kept by the database library: a second writer of a stale row is refused. */
  declare lockVersion: CreationOptional<number>;
  declare verdictKind: string;
  declare verdictConsequence: string;
  declare verdictSentence: string;
  declare partStates: PartStatus[];
  declare sketch: CreationOptional<StudySketch | null>;
  /** Lower-case words that the list searches. */
  declare searchText: string;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
  /** When a person last changed something in it; `updatedAt` also moves when the row is only recomputed. */
  declare changedAt: CreationOptional<Date>;
  declare deletedAt: CreationOptional<Date | null>;
  declare deletedById: CreationOptional<string | null>;

  static register(sequelize: Sequelize): void {
    Study.init(
      {
        id: { type: DataTypes.UUID, primaryKey: true, defaultValue: DataTypes.UUIDV4 },
        workspaceId: { type: DataTypes.UUID, allowNull: false },
        ownerId: { type: DataTypes.UUID, allowNull: false },
        originId: { type: DataTypes.UUID, allowNull: true },
        title: { type: DataTypes.TEXT, allowNull: false },
        place: { type: DataTypes.TEXT, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        species: { type: DataTypes.JSONB, allowNull: false },
        state: { type: DataTypes.TEXT, allowNull: false, defaultValue: 'open' },
        revision: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 1 },
        fingerprint: { type: DataTypes.TEXT, allowNull: false },
        lockVersion: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
        verdictKind: { type: DataTypes.TEXT, allowNull: false },
        verdictConsequence: { type: DataTypes.TEXT, allowNull: false },
        verdictSentence: { type: DataTypes.TEXT, allowNull: false },
        partStates: { type: DataTypes.JSONB, allowNull: false },
        sketch: { type: DataTypes.JSONB, allowNull: true },
        searchText: { type: DataTypes.TEXT, allowNull: false },
        createdAt: { type: DataTypes.DATE, allowNull: false },
        updatedAt: { type: DataTypes.DATE, allowNull: false },
        changedAt: { type: DataTypes.DATE, allowNull: false, defaultValue: DataTypes.NOW },
        deletedAt: { type: DataTypes.DATE, allowNull: true },
        deletedById: { type: DataTypes.UUID, allowNull: true }
      },
      { sequelize, tableName: 'studies', version: 'lockVersion' }
    );
  }
}
