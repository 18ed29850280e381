/** A fresh, migrated database for each test file, dropped after it. */
import { randomBytes } from 'node:crypto';
import { Client } from 'pg';
import { afterAll, inject } from 'vitest';

const serverUrl = inject('postgresUrl');

async function onServer(statement: string): Promise<void> {
  const client = new Client({ connectionString: serverUrl });
  await client.connect();
  try {
    await client.query(statement);
  } finally {
    await client.end();
  }
}

const name = `test_${randomBytes(8).toString('hex')}`;
await onServer(`create database ${name}`);
const url = new URL(serverUrl);
url.pathname = `/${name}`;

// The server's modules read their configuration on first use, so the address stands in the environment before they load.
process.env.DATABASE_URL = url.href;
process.env.LOG_LEVEL ??= 'silent';
const { closeDatabase, configureDatabase } = await import('$lib/server/db/connection');
const { migrate } = await import('$lib/server/db/migrate');
await migrate(configureDatabase(url.href));

afterAll(async () => {
  await closeDatabase();
  await onServer(`drop database if exists ${name} with (force)`);
});
