/** `npm run token -- <e-mail>`: makes an API token for a person; the token stands alone on the last line. */
import { runCli } from './lib/runCli.mjs';
import { Refusal, runScript } from './lib/say.mjs';

await runScript(async () => {
  const args = process.argv.slice(2);
  if (args.length === 0 || !args[0].includes('@')) {
    throw new Refusal('Whose token?', 'Give the e-mail address: npm run token -- ecologist@quillmere.example');
  }
  process.exit(await runCli('token', args));
});
