/** Brings the tables up to date: each migration in a transaction of its own, all of them under one lock. */
import type { Sequelize } from 'sequelize';
import { SequelizeStorage, Umzug } from 'umzug';
import { migrations, type Migration } from './migrations';

/** Any constant will do, as long as nothing else in the database takes it. */
const LOCK = 7_361_902;

function umzug(sequelize: Sequelize, list: readonly Migration[]) {
  return new Umzug({
    migrations: list.map((migration) => ({
      name: migration.name,
      up: () => sequelize.transaction((t) => migration.up(sequelize.getQueryInterface(), t)),
      down: () => sequelize.transaction((t) => migration.down(sequelize.getQueryInterface(), t))
    })),
    storage: new SequelizeStorage({ sequelize, tableName: 'schema_migrations' }),
    logger: undefined
  });
}

/** Applies what is missing and returns the names applied. Two processes may call it at once: the second finds nothing to do. */
export async function migrate(sequelize: Sequelize): Promise<string[]> {
  return sequelize.transaction(async (transaction) => {
    await sequelize.query(`select pg_advisory_xact_lock(${LOCK})`, { transaction });
    const applied = await umzug(sequelize, migrations).up();
    return applied.map((migration) => migration.name);
  });
}

/** Takes the last migration back and returns its name, or null when none is applied. */
export async function migrateDown(sequelize: Sequelize): Promise<string | null> {
  return sequelize.transaction(async (transaction) => {
    await sequelize.query(`select pg_advisory_xact_lock(${LOCK})`, { transaction });
    const [reverted] = await umzug(sequelize, migrations).down();
    return reverted?.name ?? null;
  });
}

/** The names not yet applied, oldest first. */
export async function pendingMigrations(sequelize: Sequelize): Promise<string[]> {
  return (await umzug(sequelize, migrations).pending()).map((migration) => migration.name);
}
