/** What a person reads while a script works: one plain line a step, and a refusal that says what to do. */

/** Prints one step as `label  sentence`, labels aligned. @param {string} label @param {string} sentence */
export function say(label, sentence) {
  console.log(`${label.padEnd(12)}${sentence}`);
}

/** Something a person can put right. The first line says what is wrong, the others what to do about it. */
export class Refusal extends Error {
  /** @param {...string} lines */
  constructor(...lines) {
    super(lines.join('\n'));
    this.name = 'Refusal';
  }
}

/** Runs a script's body; a refusal is printed plainly, a fault with its stack, and both end with exit code 1. */
export async function runScript(body) {
  try {
    await body();
  } catch (error) {
    console.error(error instanceof Refusal ? error.message : error);
    process.exit(1);
  }
}
