/** `npm run seed`: makes the demo in the installation that runs, as far as it is not there yet. */
import { runCli } from './lib/runCli.mjs';
import { demo } from './lib/project.mjs';
import { runScript, say } from './lib/say.mjs';

await runScript(async () => {
  const code = await runCli('seed', process.argv.slice(2), { SEDGELINE_SEED: 'demo' });
  if (code === 0) {
    say('Sign in', `as ${demo.accounts.join(', ')}`);
    say('Password', demo.password);
  }
  process.exit(code);
});
