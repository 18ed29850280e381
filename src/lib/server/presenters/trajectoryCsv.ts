import { toCsv, type Cell } from '$lib/formats/csv';
import type { UnitsOption } from '../api/csvResponse';

/** A column of a table of numbers: its name, its unit and its values. */
export interface Column {
  name: string;
  unit: string;
  values: readonly Cell[];
}

/** Columns to a table, its units left out, beside the names in the header, or in a row below it. */
export function tableCsv(columns: readonly Column[], units: UnitsOption): string {
  const header = columns.map(({ name, unit }) => (units === 'header' && unit ? `${name} (${unit})` : name));
  const rows: Cell[][] = [header];
  if (units === 'row') rows.push(columns.map(({ unit }) => unit));
  const length = Math.max(0, ...columns.map(({ values }) => values.length));
  for (let i = 0; i < length; i += 1) rows.push(columns.map(({ values }) => values[i] ?? null));
  return toCsv(rows);
}

/** The path of a model that belongs to no study: its units are whatever its rates were given in. */
export function trajectoryCsv(
  path: { t: readonly number[]; x: readonly number[]; y: readonly number[] },
  options: { units: UnitsOption }
): string {
  const abundance = 'study abundance unit';
  return tableCsv(
    [
      { name: 't', unit: 'study time unit', values: path.t },
      { name: 'x', unit: abundance, values: path.x },
      { name: 'y', unit: abundance, values: path.y }
    ],
    options.units
  );
}
