/** `npm test [-- --only unit,browser]`: every check and test; the last line is `N passed, N failed`. */
import { loadEnvironment } from './lib/project.mjs';
import { runSteps } from './lib/runSteps.mjs';
import { Refusal, runScript } from './lib/say.mjs';
import { allSteps } from './lib/steps.mjs';

function chosenSteps(args) {
  const at = args.indexOf('--only');
  const list = at >= 0 ? args[at + 1] : args.find((arg) => arg.startsWith('--only='))?.slice('--only='.length);
  if (args.length === 0) return allSteps;
  const names = allSteps.map((step) => step.name);
  const wanted = (list ?? '').split(',').filter(Boolean);
  const unknown = wanted.filter((name) => !names.includes(name));
  if (wanted.length === 0 || unknown.length > 0) {
    throw new Refusal(`Unknown: ${unknown.join(', ') || args.join(' ')}`, `Give --only and some of ${names.join(',')}`);
  }
  return allSteps.filter((step) => wanted.includes(step.name));
}

await runScript(async () => {
  loadEnvironment();
  // Tests bring their own database; the one of the environment is never theirs to change.
  delete process.env.DATABASE_URL;
  await runSteps(chosenSteps(process.argv.slice(2)));
});
