/** Runs steps one after another, all of them whatever fails, and ends with the tally. */
import { installPackages, requireNode } from './prepare.mjs';
import { tail } from './processes.mjs';
import { say, Refusal } from './say.mjs';
import { sync } from './steps.mjs';
import { Tally } from './tally.mjs';

const longestOutput = 300;

/** @param {{ name: string, run: (tally: Tally) => Promise<string> }[]} steps */
export async function runSteps(steps) {
  requireNode();
  await installPackages();
  const complaint = await sync();
  if (complaint) throw new Refusal(`svelte-kit sync failed:\n${tail(complaint)}`);
  const tally = new Tally();
  for (const step of steps) {
    const begin = Date.now();
    const [nPassed, nFailed] = [tally.passed, tally.failures.length];
    let output;
    try {
      output = await step.run(tally);
    } catch (error) {
      if (!(error instanceof Refusal)) throw error;
      tally.count(step.name, false);
      output = error.message;
    }
    const seconds = ((Date.now() - begin) / 1000).toFixed(1);
    if (output) console.log(tail(output, longestOutput));
    say(step.name, `${tally.passed - nPassed} passed, ${tally.failures.length - nFailed} failed (${seconds} s)`);
  }
  if (tally.failures.length > 0) console.log(`\nFailed:\n${tally.failures.map((name) => `  ${name}`).join('\n')}\n`);
  console.log(tally.line);
  process.exit(tally.failures.length === 0 ? 0 : 1);
}
