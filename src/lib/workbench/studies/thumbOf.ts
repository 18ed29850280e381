import type { StudySketch } from '$lib/contracts/views';

const asPoints = (line: readonly (readonly [number, number])[]) => line.map(([x, y]) => ({ x, y }));

/** A stored sketch, scaled into the unit square, as the thumbnail chart wants it. */
export function thumbOf(sketch: StudySketch | null) {
  if (!sketch) return {};
  return {
    window: { xMax: 1, yMax: 1 },
    isoclines: (['first', 'second'] as const).flatMap((species) =>
      sketch[species].map((line) => ({ species, points: asPoints(line) }))
    ),
    equilibria: sketch.points.map(({ x, y, holds }) => ({ x, y, kind: 'node' as const, stable: holds })),
    cycles: sketch.cycle.length ? [{ points: asPoints(sketch.cycle), stable: true }] : [],
    trajectory: sketch.path.length ? { points: asPoints(sketch.path), label: '' } : undefined
  };
}
