/** `seed`: makes the demo in this installation, as far as it is not there yet. */
import { closeDatabase, pingDatabase, sequelize } from '../db/connection';
import { migrate } from '../db/migrate';
import { AppError } from '../errors';
import { seed } from '../seed/seed';

try {
  await pingDatabase();
  await migrate(sequelize());
  await seed();
} catch (error) {
  console.error(error instanceof AppError ? error.message : error);
  process.exitCode = 1;
} finally {
  await closeDatabase();
}
