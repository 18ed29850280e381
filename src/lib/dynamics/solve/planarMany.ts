import {
  makePlanarIntegrator,
  planarTimes,
  primePlanar,
  type PlanarEnd,
  type PlanarModel,
  type PlanarOptions
} from './planar';

export interface ManyPaths {
  /** Pairs of abundances, time by time, path by path; what a path did not reach is NaN. */
  values: Float64Array;
  /** Pairs of abundances where each path ended. */
  last: Float64Array;
  ends: PlanarEnd[];
  /** Steps tried, of all paths together. */
  tries: number;
}

/**
 * Many paths over the same times. @param models one a path, or one for all. @param starts pairs of abundances >= 0.
 * @param span forwards. @param times output times in order within the span; none for the last states alone.
 * @returns paths in the order of the starts. A path that the fast way cannot finish says so in `ends`.
 * @throws RangeError when there are neither one model nor as many as starts, or for tolerances that are not positive.
 */
export function simulateMany(
  models: readonly PlanarModel[],
  starts: ArrayLike<number>,
  span: readonly [number, number],
  times: ArrayLike<number>,
  options: PlanarOptions = {}
): ManyPaths {
  const n = starts.length / 2;
  const [only] = models;
  if (only === undefined || (models.length !== 1 && models.length !== n)) {
    throw new RangeError('one model is needed for all paths, or one for each');
  }
  const width = 2 * times.length;
  const many: ManyPaths = {
    values: new Float64Array(width * n).fill(Number.NaN),
    last: new Float64Array(2 * n),
    ends: [],
    tries: 0
  };
  const padded = planarTimes(times);
  const integrator = makePlanarIntegrator(options);
  for (let i = 0; i < n; i++) {
    const { kernel, rates } = models[i] ?? only;
    const x = starts[2 * i]!;
    const y = starts[2 * i + 1]!;
    if (x > 0 && y > 0) primePlanar(kernel, rates, x, y, span[1] - span[0]);
    const run = integrator.run(kernel, rates, x, y, span[0], span[1], padded, many.values, width * i);
    many.last[2 * i] = run.x;
    many.last[2 * i + 1] = run.y;
    many.ends.push(run.end);
    many.tries += run.accepted + run.rejected;
  }
  return many;
}
