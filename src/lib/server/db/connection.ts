/** The one connection pool of the process, made on first use. */
import { ConnectionAcquireTimeoutError, ConnectionError, DatabaseError, Sequelize, TimeoutError } from 'sequelize';
import { config } from '../config';
import { AppError, refusal } from '../errors';
import { log } from '../log';
import { registerModels } from './associations';

let instance: Sequelize | null = null;

function open(url: string, pool: number): Sequelize {
  const made = new Sequelize(url, {
    dialect: 'postgres',
    logging: (sql) => log().trace({ sql }, 'sql'),
    // Idle connections are closed soon: after a restart of the server none of them is worth keeping.
    pool: { max: pool, min: 0, idle: 10_000, acquire: 10_000 },
    dialectOptions: { connectionTimeoutMillis: 5_000, application_name: 'sedgeline' },
    define: { underscored: true }
  });
  registerModels(made);
  return made;
}

/** The Sequelize instance of this process, with every model registered. Opens no connection until the first query. */
export function sequelize(): Sequelize {
  instance ??= open(config().databaseUrl, config().databasePool);
  return instance;
}

/** Points the process at another database; for tests and tools. Await `closeDatabase()` before the process ends. */
export function configureDatabase(url: string, pool = 5): Sequelize {
  void instance?.close();
  instance = open(url, pool);
  return instance;
}

/** Closes the pool. The next query opens a new one. */
export async function closeDatabase(): Promise<void> {
  const closing = instance;
  instance = null;
  await closing?.close();
}

/** Resolves when the database answers; throws the 503 refusal when it does not. */
export async function pingDatabase(): Promise<void> {
  try {
    await sequelize().query('select 1');
  } catch (error) {
    throw asRefusal(error);
  }
}

/** SQLSTATEs of a server that is starting, stopping, or out of connections. */
const AWAY = /^(08...|57P0[1235]|53300)$/;

/** Whether an error means that the database cannot be reached now, as opposed to having refused a statement. */
export function isDatabaseAway(error: unknown): boolean {
  if (error instanceof ConnectionError || error instanceof ConnectionAcquireTimeoutError) return true;
  if (error instanceof TimeoutError) return false;
  const parent = error instanceof DatabaseError ? error.parent : error;
  if (!(parent instanceof Error)) return false;
  const code = 'code' in parent ? String(parent.code) : '';
  return (
    AWAY.test(code) || code === 'ECONNRESET' || code === 'ECONNREFUSED' || /^Connection terminated/.test(parent.message)
  );
}

/** Turns "the database is away" into the 503 refusal and leaves every other error as it is. */
export function asRefusal(error: unknown): unknown {
  if (error instanceof AppError) return error;
  return isDatabaseAway(error) ? refusal('database.unavailable', { cause: error }) : error;
}

// The development server replaces modules; without this each replacement would leave a pool behind.
if (import.meta.hot) import.meta.hot.dispose(() => void closeDatabase());
