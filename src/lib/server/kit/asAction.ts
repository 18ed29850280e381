import { error, fail, redirect, type ActionFailure, type RequestEvent } from '@sveltejs/kit';
import { message, setError, superValidate, type SuperValidated } from 'sveltekit-superforms';
import { zod4, type ZodValidationSchema } from 'sveltekit-superforms/adapters';
import type { z } from 'zod';
import type { Context } from '../context';
import { asRefusal } from '../db/connection';
import { AppError, refusal, type FieldIssue } from '../errors';
import { contextOf } from './contextOf';
import { signInPath } from './requireUser';

type FormSchema = ZodValidationSchema & z.ZodType<Record<string, unknown>, Record<string, unknown>>;

export interface ActionProblem {
  code: string;
  message: string;
  issues: FieldIssue[];
}

/** Whether a posted form broke off, or is none in spite of what its header says. No browser sends such a thing. */
function isUnreadable(thrown: unknown): boolean {
  return thrown instanceof TypeError && /FormData|multipart/i.test(thrown.message);
}

/** The refusal behind what was thrown; rethrows faults, redirects and failures. A missing sign-in redirects. */
function refusedOr(event: RequestEvent, thrown: unknown): AppError {
  const refused = isUnreadable(thrown) ? refusal('input.notForm', { cause: thrown }) : asRefusal(thrown);
  if (!(refused instanceof AppError)) throw thrown;
  if (refused.status === 401) redirect(303, signInPath(event));
  if (refused.code === 'database.unavailable') event.locals.databaseAway = true;
  if (refused.retryAfterSeconds !== null) event.setHeaders({ 'retry-after': String(refused.retryAfterSeconds) });
  return refused;
}

/** An action that reads its own fields, or none: a refusal becomes `fail(status, { problem })`; `fn` may return a failure of its own. */
export function asAction<E extends RequestEvent, T>(
  fn: (event: E, context: Context) => T | Promise<T>
): (event: E) => Promise<T | ActionFailure<{ problem: ActionProblem }>> {
  return async (event) => {
    try {
      return await fn(event, contextOf(event));
    } catch (thrown) {
      const { status, code, message, issues } = refusedOr(event, thrown);
      return fail(status, { problem: { code, message, issues } });
    }
  };
}

/** Parses a posted form against a schema, keeping what was typed. */
export function parseForm<S extends FormSchema>(request: Request | FormData | null, schema: S, id?: string) {
  return superValidate(request, zod4(schema), id ? { id } : {});
}

/** An empty form of a schema, or one that shows `data`; for a `load`. */
export function emptyForm<S extends FormSchema>(schema: S, data: Partial<z.input<S>> | null = null, id?: string) {
  return superValidate(data, zod4(schema), { errors: false, ...(id ? { id } : {}) });
}

/**
 * The one way a form action answers: 422 with each field's complaint, a refusal of the command beside the field it
 * names (or above the form), and otherwise what `fn` returns or where it redirects.
 * @param options.secrets fields that are blanked before the form travels back, because a password is never echoed
 * @param options.id tells forms of one page apart; the same as in the page's `emptyForm`
 */
export function asFormAction<E extends RequestEvent, S extends FormSchema, T>(
  schema: S,
  fn: (
    form: SuperValidated<z.output<S>, App.Superforms.Message, z.input<S>>,
    event: E,
    context: Context
  ) => T | Promise<T>,
  options: { secrets?: (keyof z.output<S> & string)[]; id?: string } = {}
) {
  return async (event: E) => {
    const posted = await event.request.formData().catch((thrown: unknown) => {
      const { status, message } = refusedOr(event, thrown);
      error(status, message);
    });
    const parsed = await superValidate(posted, zod4(schema), options.id ? { id: options.id } : {});
    const form = parsed as SuperValidated<z.output<S>, App.Superforms.Message, z.input<S>>;
    const typed = { ...form.data };
    const blank = () => {
      for (const key of options.secrets ?? []) Object.assign(form.data, { [key]: '' });
    };
    if (!form.valid) {
      blank();
      return fail(422, { form });
    }
    try {
      const result = await fn(form, event, contextOf(event));
      blank();
      return result;
    } catch (thrown) {
      const refused = refusedOr(event, thrown);
      Object.assign(form.data, typed);
      blank();
      return refuseForm(form, refused);
    }
  };
}

type AnyForm = SuperValidated<Record<string, unknown>, App.Superforms.Message>;

function refuseForm(form: AnyForm, refused: AppError): ActionFailure<{ form: AnyForm }> {
  let placed = 0;
  for (const issue of refused.issues) {
    const [head] = issue.path.split('.');
    if (!head || !(head in form.data)) continue;
    setError(form, issue.path.replace(/\.(\d+)/g, '[$1]') as '', issue.message);
    placed += 1;
  }
  form.valid = false;
  // Whoever has read what was saved meanwhile may press the same button again: nothing they typed has to be typed twice.
  if (refused.latestRevision !== null && 'revision' in form.data) form.data.revision = String(refused.latestRevision);
  if (placed === 0 || placed < refused.issues.length) message(form, { tone: 'error', text: refused.message });
  return fail(refused.status, { form });
}
