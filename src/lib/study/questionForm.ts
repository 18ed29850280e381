import { z } from 'zod';
import { StudyQuestion } from '$lib/contracts/study';
import { typedNumber } from './typedNumber';

/** The question as a form posts it: text throughout, so that whatever was typed comes back as it was typed. */
export const QuestionForm = z.object({
  title: z.string().default(''),
  place: z.string().default(''),
  areaValue: z.string().default(''),
  areaUnit: z.string().default('har'),
  interaction: z.string().default(''),
  firstCommon: z.string().default(''),
  firstScientific: z.string().default(''),
  firstCounted: z.string().default(''),
  firstUnit: z.string().default('{ind}/har'),
  secondCommon: z.string().default(''),
  secondScientific: z.string().default(''),
  secondCounted: z.string().default(''),
  secondUnit: z.string().default('{ind}/har'),
  protects: z.string().default('both'),
  timeUnit: z.string().default('a'),
  horizon: z.string().default(''),
  objective: z.string().default(''),
  acceptableRisk: z.string().default(''),
  /** The revision the form was drawn from; empty for a new study. */
  revision: z.string().default('')
});
export type QuestionForm = z.infer<typeof QuestionForm>;
export type QuestionField = keyof QuestionForm;

/** Which field of the form shows a complaint about a path of the question; null for one that no field shows. */
export function questionField(path: string): QuestionField | null {
  const tail = path.replace(/^question\./, '');
  const nested = /^(first|second)\.(common|scientific|counted|unit)$/.exec(tail);
  if (nested) return `${nested[1]}${capital(nested[2] as string)}` as QuestionField;
  if (tail === 'area.value' || tail === 'area') return 'areaValue';
  if (tail === 'area.unit') return 'areaUnit';
  return tail in QuestionForm.shape ? (tail as QuestionField) : null;
}

/** @returns the question, or every complaint with the field it belongs to. Never throws. */
export function readQuestion(
  form: QuestionForm
): { ok: true; question: StudyQuestion } | { ok: false; errors: { field: QuestionField; message: string }[] } {
  const errors = new Map<QuestionField, string>();
  const number = (field: 'areaValue' | 'horizon' | 'acceptableRisk', what: string): number => {
    const typed = typedNumber(form[field]);
    if (typed.ok) return typed.value;
    errors.set(field, form[field].trim() === '' ? `Give ${what}.` : typed.message);
    return Number.NaN;
  };
  const question = {
    title: form.title,
    place: form.place,
    area: { value: number('areaValue', 'the area'), unit: form.areaUnit },
    interaction: form.interaction,
    first: species(form.firstCommon, form.firstScientific, form.firstCounted, form.firstUnit),
    second: species(form.secondCommon, form.secondScientific, form.secondCounted, form.secondUnit),
    protects: form.protects,
    timeUnit: form.timeUnit,
    horizon: number('horizon', 'the horizon'),
    objective: form.objective,
    acceptableRisk: number('acceptableRisk', 'the risk, as a percentage')
  };
  const checked = StudyQuestion.safeParse(question);
  if (checked.success && errors.size === 0) return { ok: true, question: checked.data };
  for (const issue of checked.error?.issues ?? []) {
    const field = questionField(issue.path.join('.'));
    if (field && !errors.has(field)) errors.set(field, issue.message);
  }
  return { ok: false, errors: [...errors].map(([field, message]) => ({ field, message })) };
}

/** The form that shows a question as it was saved. */
export function questionToForm(question: StudyQuestion, revision: number): QuestionForm {
  return {
    title: question.title,
    place: question.place,
    areaValue: String(question.area.value),
    areaUnit: question.area.unit,
    interaction: question.interaction,
    firstCommon: question.first.common,
    firstScientific: question.first.scientific,
    firstCounted: question.first.counted,
    firstUnit: question.first.unit,
    secondCommon: question.second.common,
    secondScientific: question.second.scientific,
    secondCounted: question.second.counted,
    secondUnit: question.second.unit,
    protects: question.protects,
    timeUnit: question.timeUnit,
    horizon: String(question.horizon),
    objective: question.objective,
    acceptableRisk: String(question.acceptableRisk),
    revision: String(revision)
  };
}

function species(common: string, scientific: string, counted: string, unit: string) {
  return { common, scientific, counted, unit };
}
function capital(word: string): string {
  return word.charAt(0).toUpperCase() + word.slice(1);
}
