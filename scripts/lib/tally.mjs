/** Counts of what passed and failed, over checks and over the tests inside the runners' own reports. */
import { existsSync, readFileSync } from 'node:fs';
import { relative } from 'node:path';
import { root } from './project.mjs';

/** Adds up results; `failures` names what failed, in order. */
export class Tally {
  passed = 0;
  /** @type {string[]} */
  failures = [];

  /** @param {string} name @param {boolean} isPassed */
  count(name, isPassed) {
    if (isPassed) this.passed += 1;
    else this.failures.push(name);
  }

  /** The last line of a test run. */
  get line() {
    return `${this.passed} passed, ${this.failures.length} failed`;
  }
}

function report(file) {
  return existsSync(file) ? JSON.parse(readFileSync(file, 'utf8')) : undefined;
}

/**
 * Counts the tests of Vitest's JSON report. A test that did not run counts as failed, and so does a file that could not
 * be loaded, or a run that failed without saying where.
 */
export function countVitest(tally, step, file, code) {
  const before = tally.failures.length;
  const results = report(file)?.testResults ?? [];
  for (const result of results) {
    const path = relative(root, result.name);
    for (const test of result.assertionResults) {
      const note = ['passed', 'failed'].includes(test.status) ? '' : ' (did not run)';
      tally.count(`${step}: ${path}: ${test.fullName}${note}`, test.status === 'passed');
    }
    if (result.assertionResults.length === 0)
      tally.count(`${step}: ${path} could not be loaded or holds no test`, false);
  }
  if (tally.failures.length === before && (code !== 0 || results.length === 0))
    tally.count(`${step}: the run itself`, false);
}

function* specsOf(suites, path = []) {
  for (const suite of suites ?? []) {
    const titles = [...path, suite.title];
    for (const spec of suite.specs ?? []) yield { title: [...titles, spec.title].join(': '), tests: spec.tests };
    yield* specsOf(suite.suites, titles);
  }
}

/** Counts the tests of Playwright's JSON report, by the same rules. */
export function countPlaywright(tally, step, file, code) {
  const before = tally.failures.length;
  let nTests = 0;
  for (const { title, tests } of specsOf(report(file)?.suites)) {
    for (const test of tests) {
      nTests += 1;
      const note = test.status === 'skipped' ? ' (did not run)' : '';
      tally.count(`${step}: ${title}${note}`, test.status === 'expected');
    }
  }
  if (tally.failures.length === before && (code !== 0 || nTests === 0)) tally.count(`${step}: the run itself`, false);
}
