/** Refusals as RFC 9457 problem documents. */
import { STATUS_CODES } from 'node:http';
import type { z } from 'zod';
import '$lib/contracts/plainWords';
import type { FieldError, Problem } from '$lib/contracts/problem';
import { AppError, refusal, type FieldIssue } from '../errors';

/** More complaints than this help nobody, and a small body could ask for an answer a hundred times its size. */
const MOST_ERRORS = 100;

/** One complaint as a problem document says it, with its place as a JSON pointer (RFC 6901). */
export function fieldErrorOf({ path, message, steps, line, column }: FieldIssue): FieldError {
  const all = steps ?? (path === '' ? [] : path.split('.'));
  const pointer = all.map((step) => `/${step.replaceAll('~', '~0').replaceAll('/', '~1')}`).join('');
  return { pointer, path, detail: message, ...(line && column ? { line, column } : {}) };
}

/** The document of a refusal. */
export function problemOf(error: AppError, requestId: string): Problem {
  return {
    type: 'about:blank',
    title: STATUS_CODES[error.status] ?? 'Refused',
    status: error.status,
    detail: error.message,
    code: error.code,
    requestId,
    ...(error.issues.length ? { errors: error.issues.slice(0, MOST_ERRORS).map(fieldErrorOf) } : {})
  };
}

/** The document of a fault: nothing about its cause leaves the server but the id to ask for. */
export function problemOfFault(requestId: string): Problem {
  return {
    type: 'about:blank',
    title: 'Internal Server Error',
    status: 500,
    detail: `Something failed on our side. It is on record as ${requestId}.`,
    code: 'fault',
    requestId
  };
}

/** A problem document as a response, with the headers that belong to its status. */
export function problemResponse(problem: Problem, retryAfterSeconds: number | null = null): Response {
  const headers = new Headers({ 'content-type': 'application/problem+json', 'cache-control': 'no-store' });
  if (problem.status === 401) headers.set('www-authenticate', 'Bearer realm="sedgeline"');
  const wait = retryAfterSeconds ?? (problem.status === 503 ? 10 : null);
  if (wait !== null) headers.set('retry-after', String(wait));
  return new Response(JSON.stringify(problem), { status: problem.status, headers });
}

type Complaint = z.core.$ZodIssue;

/** A name that nobody chose to be read, such as a megabyte of letters, is not sent back whole. */
function shortened(key: string): string {
  return key.length > 100 ? `${key.slice(0, 99)}…` : key;
}

function complaintAt(steps: string[], message: string): FieldIssue {
  return { path: steps.join('.'), message, steps };
}

function complaintsOf(issue: Complaint, base: string[]): FieldIssue[] {
  const path = [...base, ...issue.path.map(String)];
  if (issue.code === 'unrecognized_keys') {
    return issue.keys
      .slice(0, MOST_ERRORS)
      .map((key) => complaintAt([...path, shortened(key)], 'There is no such field.'));
  }
  // Of several alternatives the one that got furthest is the one that was meant.
  if (issue.code === 'invalid_union' && issue.errors.length > 0) {
    const depth = (branch: Complaint[]) => Math.max(0, ...branch.map((inner) => inner.path.length));
    const [best = []] = [...issue.errors].sort((a, b) => depth(b) - depth(a) || a.length - b.length);
    if (depth(best) > 0) return best.flatMap((inner) => complaintsOf(inner, path));
  }
  return [complaintAt(path, issue.message)];
}

/** What a schema complains of, by dotted path; an unknown field is named itself, not its parent. */
export function issuesOf(error: z.core.$ZodError): FieldIssue[] {
  return error.issues.slice(0, MOST_ERRORS).flatMap((issue) => complaintsOf(issue, []));
}

/** Parses a value, or throws the 422 that names every field at fault. */
export function parseValue<S extends z.ZodType>(schema: S, value: unknown): z.output<S> {
  const parsed = schema.safeParse(value);
  if (parsed.success) return parsed.data;
  const issues = issuesOf(parsed.error);
  const first = issues[0];
  const message = first ? `${first.path || 'The body'}: ${first.message}` : undefined;
  throw refusal('input.invalid', { issues, message });
}
