import { createHash } from 'node:crypto';
import type { StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { canonicalJson, partInputs } from '$lib/study';

/**
 * SHA-256 of the canonical JSON, 64 hex digits: equal values give equal fingerprints whatever order their fields were
 * typed or stored in (PostgreSQL reorders the keys of jsonb).
 */
export function fingerprintOf(value: unknown): string {
  return createHash('sha256').update(canonicalJson(value)).digest('hex');
}

/** The parts whose result a person can read and state. */
export type ResultPart = 'equilibria' | 'trajectories';

/** Fingerprint of what a result rests on: numbers, units and structure, but no source, note or title. */
export function inputsFingerprint(part: ResultPart, question: StudyQuestion, content: StudyContent): string {
  return fingerprintOf(partInputs(part, question, content));
}
