/**
 * Quantiles of sorted numbers, with linear interpolation between neighbours: the p-quantile of n numbers stands at place
 * (n - 1) p. @param sorted ascending, the first n count. @param p 0 to 1. @returns NaN when there are none.
 * @source hyndmanFan1996 (definition 7)
 */
export function quantileOf(sorted: Float64Array, n: number, p: number): number {
  if (n === 0) return Number.NaN;
  const place = (n - 1) * p;
  const below = Math.floor(place);
  const share = place - below;
  const low = sorted[below]!;
  return share === 0 ? low : low + share * (sorted[below + 1]! - low);
}

/** Values at the wanted shares of one series over time: bands[i][j] is the quantile `shares[i]` at the j-th time. */
export interface Bands {
  shares: number[];
  x: number[][];
  y: number[][];
}

/**
 * Bands of many paths. @param parts values of some runs each: pairs, time by time, run by run. @param nTimes times a run.
 * @param shares quantiles wanted, 0 to 1. Runs that ended early carry NaN from there and are left out from there.
 */
export function bandsOf(parts: readonly Float64Array[], nTimes: number, shares: readonly number[]): Bands {
  const width = 2 * nTimes;
  const nRuns = parts.reduce((sum, part) => sum + part.length / width, 0);
  const column = new Float64Array(nRuns);
  const side = (offset: number): number[][] => {
    const rows = shares.map(() => new Array<number>(nTimes).fill(0));
    for (let j = 0; j < nTimes; j++) {
      let n = 0;
      for (const part of parts) {
        for (let at = 2 * j + offset; at < part.length; at += width) {
          const value = part[at]!;
          if (value === value) column[n++] = value;
        }
      }
      const sorted = column.subarray(0, n).sort();
      shares.forEach((p, i) => {
        rows[i]![j] = quantileOf(sorted, n, p);
      });
    }
    return rows;
  };
  return { shares: [...shares], x: side(0), y: side(1) };
}
