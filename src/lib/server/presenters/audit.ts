import type { AuditEvent } from '../db/models/AuditEvent';

export interface AuditRow {
  id: string;
  at: string;
  who: string;
  via: string;
  act: string;
  subjectType: string;
  subjectId: string;
  studyId: string | null;
  /** The details as short plain pairs, such as "role: observer → reviewer". */
  details: string[];
}

function inWords(value: unknown): string {
  if (value === null || value === undefined || value === '') return 'none';
  if (Array.isArray(value)) return value.map(inWords).join(', ');
  if (typeof value === 'object') {
    if ('before' in value && 'after' in value) return `${inWords(value.before)} → ${inWords(value.after)}`;
    return JSON.stringify(value);
  }
  return String(value);
}

/** A row of the audit for a screen; dates are ISO 8601 in UTC. */
export function presentAudit(event: AuditEvent): AuditRow {
  const { id, via, act, subjectType, subjectId, studyId } = event;
  return {
    id,
    via,
    act,
    subjectType,
    subjectId,
    studyId: studyId ?? null,
    at: event.at.toISOString(),
    who: event.actorName || 'Sedgeline',
    details: Object.entries(event.details)
      .filter(([, value]) => value !== null)
      .map(([key, value]) => `${key}: ${inWords(value)}`)
  };
}
