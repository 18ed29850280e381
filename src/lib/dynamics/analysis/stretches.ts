/** Where a stretch of a walk along a face lies: what it passes, and how far points are apart. */
import { between, type CurvePoint } from './continuation';
import type { Face } from './faces';

/** A point of a stretch this near to a place, in units of the scale, is that place. */
const NEAR = 1e-6;

/** Distance of two points in units of the scale, by state alone. */
export function apart(face: Face, a: Float64Array, b: Float64Array): number {
  const scale = new Float64Array(a.length);
  face.curve.scale(a, scale);
  let largest = 0;
  for (let i = 0; i + 1 < a.length; i++) largest = Math.max(largest, Math.abs(a[i]! - b[i]!) / scale[i]!);
  return largest;
}

/** Whether the stretch between two points of a walk passes through a given point of the curve. */
export function passes(face: Face, a: CurvePoint, b: CurvePoint, z: Float64Array): boolean {
  const scale = new Float64Array(z.length);
  face.curve.scale(z, scale);
  let along = 0;
  let chord = 0;
  for (let i = 0; i < z.length; i++) {
    const step = (b.z[i]! - a.z[i]!) / scale[i]!;
    along += (step * (z[i]! - a.z[i]!)) / scale[i]!;
    chord += step * step;
  }
  const share = along / chord;
  if (!(share >= -1e-9 && share <= 1 + 1e-9)) return false;
  // Another part of the curve may run close by: only the point of this very stretch counts.
  const there = between(face.curve, a, b, Math.min(1, Math.max(0, share)));
  return there !== null && there.every((value, i) => Math.abs(value - z[i]!) <= NEAR * scale[i]!);
}

/** Whether a walk goes on in the direction in which it began. */
export function agrees(face: Face, { tangent }: CurvePoint, start: CurvePoint): boolean {
  const scale = new Float64Array(tangent.length);
  face.curve.scale(start.z, scale);
  return tangent.reduce((sum, entry, i) => sum + (entry / scale[i]!) * (start.tangent[i]! / scale[i]!), 0) > 0;
}

/** Whether a stretch of a branch passes through a place, or ends there. */
export function touches(face: Face, a: CurvePoint | undefined, b: CurvePoint, z: Float64Array): boolean {
  const scale = new Float64Array(z.length);
  face.curve.scale(z, scale);
  if (z.every((value, i) => Math.abs(value - b.z[i]!) < NEAR * scale[i]!)) return true;
  return a !== undefined && passes(face, a, b, z);
}
