/** `npm start`: from a bare clone to a running Sedgeline; Ctrl-C stops everything it started. */
import { readFileSync } from 'node:fs';
import { hostInUrl, startApplication } from './lib/application.mjs';
import { isPortFree, nextFreePort } from './lib/ports.mjs';
import { buildWhenStale, installPackages, requireNode } from './lib/prepare.mjs';
import { onStopRequest, pause, stopChild, tail } from './lib/processes.mjs';
import { clearRun, demo, loadEnvironment, writeRun } from './lib/project.mjs';
import { Refusal, runScript, say } from './lib/say.mjs';
import { startPostgres } from './postgres.mjs';

const defaultPort = 4173;
/** More restarts of the database than this within a minute mean that it cannot be kept up. */
const maxRestarts = 5;

async function choosePort(host) {
  const given = process.env.PORT;
  if (given) {
    const port = Number(given);
    if (!Number.isInteger(port) || port < 1 || port > 65_535) throw new Refusal(`PORT=${given} is not a port number.`);
    if (await isPortFree(host, port)) return port;
    throw new Refusal(
      `Port ${port} on ${host} is taken.`,
      'Give another one, such as PORT=8080 npm start, or none at all.'
    );
  }
  const port = await nextFreePort(host, defaultPort);
  if (!port)
    throw new Refusal(`Ports ${defaultPort} to ${defaultPort + 19} are all taken.`, 'Give one: PORT=8080 npm start');
  if (port !== defaultPort) say('Port', `${defaultPort} is taken, so this run uses ${port}`);
  return port;
}

/** Starts the database again when it ends unasked, as it would after a crash or a kill. */
async function keepUp(server, isStopping) {
  const restarts = [];
  for (;;) {
    await server.whenEnded();
    if (isStopping()) return;
    const now = Date.now();
    restarts.push(now);
    if (restarts.filter((at) => now - at < 60_000).length > maxRestarts) {
      say('Database', `stopped again and again; its log is ${server.home}/postgres.log`);
      return;
    }
    await pause(1_000);
    if (isStopping()) return;
    try {
      await server.resume();
      say('Database', 'had stopped and runs again');
    } catch (error) {
      say('Database', `stopped and does not start again: ${error.message}`);
      return;
    }
  }
}

await runScript(async () => {
  requireNode();
  loadEnvironment();
  const host = process.env.HOST || '127.0.0.1';
  const foreignUrl = process.env.DATABASE_URL;
  const hasDemo = process.env.SEDGELINE_SEED
    ? process.env.SEDGELINE_SEED === 'demo'
    : !(process.env.NODE_ENV === 'production' && foreignUrl);
  let isStopping = false;
  let server;
  let application;
  const stop = async (code) => {
    if (isStopping) return;
    isStopping = true;
    if (application) await stopChild(application.child, 'SIGTERM', 10_000);
    await server?.stop();
    clearRun();
    process.exit(code);
  };
  onStopRequest(() => {
    say('Stopping', 'the server and its database');
    stop(0);
  });

  try {
    // Refused before the long steps rather than after them.
    if (process.env.PORT) await choosePort(host);
    await installPackages();
    await buildWhenStale();
    if (foreignUrl) {
      say('Database', 'the one of DATABASE_URL');
    } else {
      server = await startPostgres();
      const what = server.isBorrowed
        ? 'shared with a run that is already going'
        : server.isNew
          ? 'made and started'
          : 'started';
      say('Database', `${what}, on 127.0.0.1:${server.port}, kept in ${server.home}`);
      keepUp(server, () => isStopping);
    }
    const port = await choosePort(host);
    const shown = ['0.0.0.0', '::'].includes(host) ? 'localhost' : hostInUrl(host);
    const origin = process.env.ORIGIN || `http://${shown}:${port}`;
    const databaseUrl = foreignUrl || server.url;
    say(
      'Server',
      hasDemo ? 'starting: tables brought up to date, demo made once' : 'starting: tables brought up to date'
    );
    application = await startApplication({
      host,
      port,
      databaseUrl,
      origin,
      environment: { SEDGELINE_SEED: hasDemo ? 'demo' : '' }
    });
    if (isStopping) return;
    application.child.once('exit', (code) => {
      if (isStopping) return;
      console.error(`The server stopped by itself (${code ?? 'killed'}):`);
      console.error(tail(readFileSync(application.logFile, 'utf8')));
      stop(1);
    });
    writeRun({ databaseUrl, origin });
    say('Ready', origin);
    if (hasDemo) {
      say('Sign in', `as ${demo.accounts.join(', ')}`);
      say('Password', demo.password);
    }
    say('Stop', 'with Ctrl-C');
  } catch (error) {
    if (isStopping) return;
    console.error(error instanceof Refusal ? error.message : error);
    await stop(1);
  }
});
