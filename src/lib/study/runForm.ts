import type { RunSettings, Start } from '$lib/contracts/content';
import { typedNumber } from './typedNumber';

/** Starting states and run settings as forms post them: text, one row a start, kept as typed when something is refused. */
export interface TypedStart {
  label: string;
  x: string;
  y: string;
  seX: string;
  seY: string;
  source: string;
}
/** Complaints by field: `starts.1.x`, `run.span`. */
export type TypedErrors = Record<string, string>;

export const blankStart: TypedStart = { label: '', x: '', y: '', seX: '', seY: '', source: '' };
const startFields = Object.keys(blankStart) as (keyof TypedStart)[];

/** The rows of a posted form, in order; rows in which nothing was typed are left out. */
export function typedStarts(data: FormData): TypedStart[] {
  const columns = startFields.map((field) => data.getAll(field).map(String));
  const n = Math.max(0, ...columns.map((c) => c.length));
  return Array.from({ length: n }, (_, i) => {
    const row = { ...blankStart };
    startFields.forEach((field, k) => (row[field] = columns[k]?.[i] ?? ''));
    return row;
  }).filter((row) => startFields.some((field) => row[field].trim() !== ''));
}

/** @returns the starts, or what is wrong with which cell. Whether the values may stand is judged by the contract. */
export function readStarts(rows: readonly TypedStart[]): { starts: unknown[]; errors: TypedErrors } {
  const errors: TypedErrors = {};
  const starts = rows.map((row, i) => {
    const number = (field: 'x' | 'y' | 'seX' | 'seY', required: boolean) => {
      if (!required && row[field].trim() === '') return undefined;
      const typed = typedNumber(row[field]);
      if (typed.ok) return typed.value;
      errors[`starts.${i}.${field}`] = row[field].trim() === '' ? 'Give a count, 0 if none.' : typed.message;
      return undefined;
    };
    if (row.label.trim() === '') errors[`starts.${i}.label`] = 'Name this start.';
    const seX = number('seX', false);
    const seY = number('seY', false);
    return {
      label: row.label,
      x: number('x', true),
      y: number('y', true),
      ...(seX === undefined ? {} : { seX }),
      ...(seY === undefined ? {} : { seY }),
      source: row.source
    };
  });
  return { starts, errors };
}

/** Saved starts as rows of the form. */
export function startsToRows(starts: readonly Start[]): TypedStart[] {
  return starts.map(({ label, x, y, seX, seY, source }) => ({
    label,
    x: String(x),
    y: String(y),
    seX: seX === undefined ? '' : String(seX),
    seY: seY === undefined ? '' : String(seY),
    source
  }));
}

export interface TypedRun {
  span: string;
  samples: string;
  rtol: string;
  atol: string;
  belowFirst: string;
  belowSecond: string;
}
const runFields = ['span', 'samples', 'rtol', 'atol', 'belowFirst', 'belowSecond'] as const;

export function typedRun(data: FormData): TypedRun {
  const of = (name: string) => String(data.get(name) ?? '');
  return Object.fromEntries(runFields.map((f) => [f, of(f)])) as unknown as TypedRun;
}

/** @returns run settings, or what is wrong with which field. An empty limit is no limit. */
export function readRun(typed: TypedRun): { run: unknown; errors: TypedErrors } {
  const errors: TypedErrors = {};
  const number = (field: keyof TypedRun) => {
    const read = typedNumber(typed[field]);
    if (read.ok) return read.value;
    errors[`run.${field}`] = read.message;
    return undefined;
  };
  const thresholds = (['first', 'second'] as const).flatMap((species) => {
    const field = species === 'first' ? 'belowFirst' : 'belowSecond';
    return typed[field].trim() === '' ? [] : [{ species, below: number(field) }];
  });
  const run = {
    span: number('span'),
    samples: number('samples'),
    rtol: number('rtol'),
    atol: number('atol'),
    thresholds
  };
  return { run, errors };
}

export function runToTyped(run: RunSettings): TypedRun {
  const below = (species: 'first' | 'second') => {
    const limit = run.thresholds.find((t) => t.species === species);
    return limit ? String(limit.below) : '';
  };
  return {
    span: String(run.span),
    samples: String(run.samples),
    rtol: String(run.rtol),
    atol: String(run.atol),
    belowFirst: below('first'),
    belowSecond: below('second')
  };
}

/** Where the form shows a complaint of the contract about `run.thresholds.1.below`. */
export function runField(path: string, run: unknown): string {
  const limit = /^run\.thresholds\.(\d+)/.exec(path);
  if (!limit) return path;
  const { thresholds = [] } = run as { thresholds?: { species?: string }[] };
  return thresholds[Number(limit[1])]?.species === 'second' ? 'run.belowSecond' : 'run.belowFirst';
}
