/** Small shapes that pages are given and that say nothing of the database. Instants are ISO texts. */

export interface PersonName {
  id: string;
  name: string;
}

/** One thing that differs between two revisions. `before` or `after` is null where it was not there. */
export interface Change {
  /** Such as `question.area`, `rates.first.growth.r`, `structure.competition`, `starts.0`, `run.span`. */
  path: string;
  /** What a person calls it: "Growth when rare of native crayfish". */
  label: string;
  before: string | null;
  after: string | null;
}

/** What a save answers. `changed` is empty, and no revision was made, when nothing was different. */
export interface Saved {
  studyId: string;
  revision: number;
  fingerprint: string;
  summary: string;
  changed: Change[];
}

/** A thumbnail of the state plane for the list: everything scaled into the unit square, y upwards. */
export interface StudySketch {
  /** Isoclines; a species may have several pieces. */
  first: [number, number][][];
  second: [number, number][][];
  /** Rest points: filled where they hold. */
  points: { x: number; y: number; holds: boolean }[];
  /** The path from today's counts; empty where there are none. */
  path: [number, number][];
  /** A cycle that holds, where there is one. */
  cycle: [number, number][];
}
