import type { EvidenceState } from '$lib/ui/types';

/** The nine parts of a study, in the order in which each rests on the one before. */
export const studyParts = [
  { key: 'surveys', name: 'Surveys' },
  { key: 'rates', name: 'Rates' },
  { key: 'model', name: 'Model' },
  { key: 'equilibria', name: 'Equilibria' },
  { key: 'trajectories', name: 'Trajectories' },
  { key: 'levers', name: 'Levers' },
  { key: 'risk', name: 'Risk' },
  { key: 'review', name: 'Review' },
  { key: 'report', name: 'Report' }
] as const;

export type PartKey = (typeof studyParts)[number]['key'];

/** A part as the rail draws it. */
export interface ShellPart {
  key: PartKey;
  name: string;
  href: string;
  state: EvidenceState;
  /** One line under the name; for a stale part, what changed. */
  summary: string;
}

/** What the head of the rail says of a study. */
export interface ShellStudy {
  title: string;
  place: string;
  /** First and second species, in the study's order. */
  species: readonly [ShellSpecies, ShellSpecies];
}

export interface ShellSpecies {
  common: string;
  scientific?: string | null;
}
