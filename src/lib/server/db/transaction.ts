import type { Transaction } from 'sequelize';
import { sequelize } from './connection';

export type { Transaction };

/** Runs `fn` in one transaction: committed when it resolves, rolled back when it throws. Returns what `fn` returns. */
export function withTransaction<T>(fn: (transaction: Transaction) => Promise<T>): Promise<T> {
  return sequelize().transaction(fn);
}
