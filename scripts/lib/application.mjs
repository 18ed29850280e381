/** The built application as a child process: started, waited for, stopped. */
import { closeSync, mkdirSync, openSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { pause, spawnTied, stopChild, tail } from './processes.mjs';
import { logFolder, root } from './project.mjs';
import { Refusal } from './say.mjs';

/** The first start migrates and makes the demo; a slow machine needs a while for that. */
const readyPatienceMs = 180_000;

async function answersReady(address) {
  try {
    const response = await fetch(`${address}/health/ready`, {
      // A connection kept open would hold up the server's end.
      headers: { connection: 'close' },
      signal: AbortSignal.timeout(5_000)
    });
    return response.status === 200;
  } catch {
    return false;
  }
}

/** An address as it is written in a URL. */
export const hostInUrl = (host) => (host.includes(':') ? `[${host}]` : host);

/**
 * Starts `build/index.js` and waits until it is ready to work.
 * @param {{ host: string, port: number, databaseUrl: string, origin: string, environment?: Record<string, string>,
 *   logName?: string }} options
 * @returns the child process and its log file. Throws a Refusal with the end of the log when it stops or never gets ready.
 */
export async function startApplication({ host, port, databaseUrl, origin, environment = {}, logName = 'server' }) {
  mkdirSync(logFolder, { recursive: true });
  const logFile = join(logFolder, `${logName}.log`);
  const log = openSync(logFile, 'w', 0o600);
  const child = spawnTied(process.execPath, [join(root, 'build', 'index.js')], {
    cwd: root,
    stdio: ['ignore', log, log],
    deathSignal: 'TERM',
    env: {
      SHUTDOWN_TIMEOUT: '5',
      BODY_SIZE_LIMIT: '1M',
      ...process.env,
      ...environment,
      HOST: host,
      PORT: `${port}`,
      ORIGIN: origin,
      DATABASE_URL: databaseUrl
    }
  });
  closeSync(log);
  // A server that listens on every address is asked on loopback.
  const reachable = ['0.0.0.0', '::'].includes(host) ? '127.0.0.1' : host;
  const address = `http://${hostInUrl(reachable)}:${port}`;
  for (const deadline = Date.now() + readyPatienceMs; Date.now() < deadline; await pause(100)) {
    if (child.exitCode !== null || child.signalCode !== null) {
      throw new Refusal(
        `The server stopped while starting:\n${tail(readFileSync(logFile, 'utf8'))}`,
        `Its log: ${logFile}`
      );
    }
    if (await answersReady(address)) return { child, logFile };
  }
  await stopChild(child, 'SIGTERM', 5_000);
  throw new Refusal(
    `The server was not ready within ${readyPatienceMs / 1000} seconds:\n${tail(readFileSync(logFile, 'utf8'))}`,
    `Its log: ${logFile}`
  );
}
