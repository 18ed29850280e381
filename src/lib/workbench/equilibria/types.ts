import type { LetteredPoint, PointParagraph } from '$lib/study';

/** A lettered point with its errors, its name and what is said of it. */
export interface PointRow extends LetteredPoint {
  seX: number | null;
  seY: number | null;
  title: string;
  paragraph?: PointParagraph;
}
