/** `npm run dev`: the development server with the project's own database and the demo in it. */
import { installPackages, requireNode } from './lib/prepare.mjs';
import { ended, onStopRequest, spawnTied, stopChild } from './lib/processes.mjs';
import { clearRun, demo, loadEnvironment, root, writeRun } from './lib/project.mjs';
import { runScript, say } from './lib/say.mjs';
import { startPostgres } from './postgres.mjs';

await runScript(async () => {
  requireNode();
  loadEnvironment();
  await installPackages();
  const foreignUrl = process.env.DATABASE_URL;
  const server = foreignUrl ? undefined : await startPostgres();
  const databaseUrl = foreignUrl || server.url;
  const port = process.env.PORT || '5173';
  const origin = process.env.ORIGIN || `http://localhost:${port}`;
  say('Database', foreignUrl ? 'the one of DATABASE_URL' : `on 127.0.0.1:${server.port}`);
  say('Sign in', `as ${demo.accounts[1]} with ${demo.password}`);
  writeRun({ databaseUrl, origin });
  const vite = spawnTied(
    process.execPath,
    ['node_modules/vite/bin/vite.js', 'dev', '--port', port, '--strictPort', ...process.argv.slice(2)],
    {
      cwd: root,
      stdio: ['ignore', 'inherit', 'inherit'],
      env: { SEDGELINE_SEED: 'demo', ...process.env, DATABASE_URL: databaseUrl, ORIGIN: origin }
    }
  );
  onStopRequest(() => stopChild(vite, 'SIGTERM', 5_000));
  const code = await ended(vite);
  await server?.stop();
  clearRun();
  process.exit(code === 128 || code === 143 ? 0 : code);
});
