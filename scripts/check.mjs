/** `npm run check`: the static half of `npm test`, that is format, lint, types and the direction of imports. */
import { runSteps } from './lib/runSteps.mjs';
import { runScript } from './lib/say.mjs';
import { architectureStep, staticSteps } from './lib/steps.mjs';

await runScript(() => runSteps([...staticSteps, architectureStep]));
