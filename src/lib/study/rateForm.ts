import { z } from 'zod';
import { RateEntry, sourceKinds, type RatePath } from '$lib/contracts/content';
import { typedNumber } from './typedNumber';

/** One rate as a form posts it: text throughout, so that whatever was typed comes back as it was typed. */
export const RateForm = z.object({
  path: z.string().default(''),
  value: z.string().default(''),
  unit: z.string().default(''),
  form: z.string().default('plain'),
  uncertainty: z.string().default('se'),
  se: z.string().default(''),
  percent: z.string().default(''),
  low: z.string().default(''),
  high: z.string().default(''),
  sourceKind: z.string().default(''),
  sourceText: z.string().default(''),
  note: z.string().default(''),
  overrideReason: z.string().default(''),
  /** The revision the form was drawn from. */
  revision: z.string().default('')
});
export type RateForm = z.infer<typeof RateForm>;
export type RateField = keyof RateForm;

export const rateFieldLabels: Record<RateField, string> = {
  path: 'Rate',
  value: 'Value',
  unit: 'Unit',
  form: 'Form',
  uncertainty: 'How sure',
  se: 'Standard error',
  percent: 'CV',
  low: 'Lower end',
  high: 'Upper end',
  sourceKind: 'Kind of source',
  sourceText: 'Source',
  note: 'Note',
  overrideReason: 'Reason',
  revision: 'Version'
};

/** Which field shows a complaint about a path such as `rate.uncertainty.low` or `rates.first.growth.r.value`. */
export function rateField(path: string, rate: string): RateField | null {
  const tail = path.replace(`rates.${rate}.`, '').replace(/^rate\./, '');
  const moved: Record<string, RateField> = {
    'uncertainty.se': 'se',
    'uncertainty.percent': 'percent',
    'uncertainty.low': 'low',
    'uncertainty.high': 'high',
    'uncertainty.kind': 'uncertainty',
    'source.kind': 'sourceKind',
    'source.text': 'sourceText',
    source: 'sourceText'
  };
  return moved[tail] ?? (tail in RateForm.shape ? (tail as RateField) : null);
}

/** @returns the entry, or every complaint with its field. Units and model limits are checked where the study is known. */
export function readRate(
  form: RateForm
): { ok: true; entry: RateEntry } | { ok: false; errors: { field: RateField; message: string }[] } {
  const errors = new Map<RateField, string>();
  const number = (field: RateField, what: string): number => {
    const typed = typedNumber(form[field]);
    if (typed.ok) return typed.value;
    errors.set(field, form[field].trim() === '' ? what : typed.message);
    return Number.NaN;
  };
  const uncertainty = () => {
    switch (form.uncertainty) {
      case 'exact':
        return { kind: 'exact' };
      case 'cv':
        return { kind: 'cv', percent: number('percent', 'Give the CV, or say that the value is exact.') };
      case 'range':
        return {
          kind: 'range',
          low: number('low', 'Give the lower end of the range.'),
          high: number('high', 'Give the upper end of the range.')
        };
      default:
        return { kind: 'se', se: number('se', 'Give the standard error, or say that the value is exact.') };
    }
  };
  const entry = {
    path: form.path,
    value: number('value', 'Give the value.'),
    unit: form.unit,
    form: form.form || 'plain',
    uncertainty: uncertainty(),
    source: { kind: form.sourceKind, text: form.sourceText },
    note: form.note,
    overrideReason: form.overrideReason
  };
  const checked = RateEntry.safeParse(entry);
  if (checked.success && errors.size === 0) return { ok: true, entry: checked.data };
  for (const issue of checked.error?.issues ?? []) {
    const field = rateField(issue.path.join('.'), form.path);
    if (field && !errors.has(field)) errors.set(field, issue.message);
  }
  return { ok: false, errors: [...errors].map(([field, message]) => ({ field, message })) };
}

/** The form of one rate: as it was saved, or blank with the unit first on offer. */
export function rateToForm(entry: RateEntry | undefined, path: RatePath, unit: string, revision: number): RateForm {
  const blank = RateForm.parse({ path, unit, revision: String(revision) });
  if (!entry) return blank;
  const { uncertainty } = entry;
  return {
    ...blank,
    value: String(entry.value),
    unit: entry.unit,
    form: entry.form,
    uncertainty: uncertainty.kind,
    se: uncertainty.kind === 'se' ? String(uncertainty.se) : '',
    percent: uncertainty.kind === 'cv' ? String(uncertainty.percent) : '',
    low: uncertainty.kind === 'range' ? String(uncertainty.low) : '',
    high: uncertainty.kind === 'range' ? String(uncertainty.high) : '',
    sourceKind: entry.source.kind,
    sourceText: entry.source.text,
    note: entry.note,
    overrideReason: entry.overrideReason
  };
}

export const sourceKindChoices = sourceKinds.map((value) => ({
  value,
  label: value.charAt(0).toUpperCase() + value.slice(1)
}));
