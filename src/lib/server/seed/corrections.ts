/** How a raw count of the demo becomes a density, with the error of the count and of what it is corrected by. */

export interface Density {
  value: number;
  se: number;
}

/** Three figures are all that such counts bear. */
const rounded = (value: number, se: number): Density => ({
  value: Number(value.toPrecision(4)),
  se: Number(se.toPrecision(2))
});

/** Animals per hectare from a catch: count / (effort × catchability). Effort in trap-nights, catchability in ha per trap-night. */
export function countPerHectare(caught: {
  count: number;
  effort: number;
  catchability: number;
  catchabilitySe: number;
}): Density {
  const { count, effort, catchability, catchabilitySe } = caught;
  const value = count / (effort * catchability);
  return rounded(value, value * Math.hypot(1 / Math.sqrt(count), catchabilitySe / catchability));
}

/** Animals per area from a count of which only a share is found: count / (share × area). Poisson error of the count. */
export function foundPerArea(found: { count: number; share: number; shareSe: number; area: number }): Density {
  const { count, share, shareSe, area } = found;
  const value = count / (share * area);
  return rounded(value, value * Math.hypot(1 / Math.sqrt(count), shareSe / share));
}

/** A density read directly, with the relative spread of repeated plots. */
export function plots(value: number, cv: number): Density {
  return rounded(value, value * cv);
}
