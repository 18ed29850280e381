/**
 * The built application on a throwaway database, for the browser tests. A second, tiny address takes the database away
 * and brings it back, so that a test can see what people see then: POST /database/stop and /database/start. It is named
 * in `.sedgeline/e2e.json` together with the database's own address.
 */
import { createServer } from 'node:http';
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { startApplication } from './lib/application.mjs';
import { buildWhenStale } from './lib/prepare.mjs';
import { onStopRequest, stopChild } from './lib/processes.mjs';
import { stateFolder } from './lib/project.mjs';
import { runScript, say } from './lib/say.mjs';
import { startPostgres } from './postgres.mjs';

/** The browser tests sign in far more often than people do. */
const generousLimits = {
  SIGN_IN_LIMIT: '1000',
  SIGN_IN_ADDRESS_LIMIT: '10000',
  RESET_LIMIT: '1000',
  INVITATION_LIMIT: '1000',
  API_LIMIT: '100000'
};

function control(server) {
  const acts = { '/database/stop': server.halt, '/database/start': server.resume };
  return createServer(async (request, response) => {
    const act = request.method === 'POST' ? acts[request.url] : undefined;
    try {
      await act?.();
      response.writeHead(act ? 204 : 404).end();
    } catch (error) {
      response.writeHead(500).end(error.message);
    }
  });
}

await runScript(async () => {
  const port = Number(process.env.E2E_PORT ?? 4199);
  const origin = `http://127.0.0.1:${port}`;
  let application;
  let server;
  onStopRequest(async () => {
    if (application) await stopChild(application.child, 'SIGTERM', 8_000);
    await server?.stop();
    process.exit(0);
  });
  await buildWhenStale();
  server = await startPostgres({ ephemeral: true });
  const environment = { SEDGELINE_SEED: 'demo', SMTP_URL: '', LOG_LEVEL: 'info', ...generousLimits };
  const options = { host: '127.0.0.1', port, databaseUrl: server.url, origin, environment, logName: 'e2e-server' };
  try {
    application = await startApplication(options);
  } catch (error) {
    await server.stop();
    throw error;
  }
  application.child.once('exit', async () => {
    await server.stop();
    process.exit(1);
  });
  const controller = control(server);
  await new Promise((resolve) => controller.listen(0, '127.0.0.1', resolve));
  const controlUrl = `http://127.0.0.1:${controller.address().port}`;
  writeFileSync(join(stateFolder, 'e2e.json'), JSON.stringify({ controlUrl, databaseUrl: server.url }), {
    mode: 0o600
  });
  say('Ready', origin);
});
