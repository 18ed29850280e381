import { createHash } from 'node:crypto';
import type { StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';

/**
 * JSON with the keys of every object in order and nothing undefined, so that equal values give equal text whatever order
 * they were typed or stored in (PostgreSQL reorders the keys of jsonb).
 */
export function canonicalJson(value: unknown): string {
  if (value === null || typeof value !== 'object') return JSON.stringify(value) ?? 'null';
  if (Array.isArray(value)) return `[${value.map(canonicalJson).join(',')}]`;
  const entries = Object.entries(value)
    .filter(([, held]) => held !== undefined)
    .sort(([a], [b]) => (a < b ? -1 : 1))
    .map(([key, held]) => `${JSON.stringify(key)}:${canonicalJson(held)}`);
  return `{${entries.join(',')}}`;
}

/** SHA-256 of the canonical JSON, 64 hex digits. */
export function fingerprintOf(value: unknown): string {
  return createHash('sha256').update(canonicalJson(value)).digest('hex');
}

/** The parts whose result a person can read and state. */
export type ResultPart = 'equilibria' | 'trajectories';

/**
 * Fingerprint of what a result depends on: numbers, units and structure, but no source text, note or title, so that
 * naming a source better does not make a reading stale.
 */
export function inputsFingerprint(part: ResultPart, question: StudyQuestion, content: StudyContent): string {
  const rates = content.rates.map(({ path, value, unit, form, uncertainty }) => ({
    path,
    value,
    unit,
    form,
    uncertainty
  }));
  const inputs = {
    structure: content.structure,
    rates: rates.sort((a, b) => (a.path < b.path ? -1 : 1)),
    area: question.area,
    timeUnit: question.timeUnit,
    units: [question.first.unit, question.second.unit]
  };
  if (part === 'equilibria') return fingerprintOf(inputs);
  const starts = content.starts.map(({ label, x, y }) => ({ label, x, y }));
  return fingerprintOf({ ...inputs, starts, run: content.run });
}
