import type { QueryInterface, Transaction } from 'sequelize';

/** One reversible step. Never edited once merged: a mistake is corrected by the next one. */
export interface Migration {
  name: string;
  up(queries: QueryInterface, transaction: Transaction): Promise<void>;
  down(queries: QueryInterface, transaction: Transaction): Promise<void>;
}

/** Makes a migration of plain SQL; each string may hold several statements. */
export function sqlMigration(name: string, up: string, down: string): Migration {
  return {
    name,
    up: async (queries, transaction) => void (await queries.sequelize.query(up, { transaction })),
    down: async (queries, transaction) => void (await queries.sequelize.query(down, { transaction }))
  };
}
