/** Refusals: every reason for which the server says no, with its status and a sentence fit for a person. */

/** One complaint about a value, at a dotted path such as `model.first.growth.rate`; '' is the whole. */
export interface FieldIssue {
  path: string;
  message: string;
  /** The steps of the path, where a name of the sender's may hold a dot. */
  steps?: readonly string[];
  /** In a text that could not be read at all: where, from 1. */
  line?: number;
  column?: number;
}

/** The one list. A code is stable; its sentence may be sharpened where it is thrown. */
export const CATALOGUE = {
  'input.invalid': [422, 'Some of what was sent cannot be used.'],
  'input.tooLarge': [422, 'What was sent is larger than this accepts.'],
  'input.notJson': [422, 'The body is not JSON.'],
  'input.notForm': [422, 'What was sent is not a form that can be read.'],
  'auth.required': [401, 'Sign in first.'],
  'auth.invalidToken': [401, 'This token is unknown, withdrawn or past its date.'],
  'auth.wrongCredentials': [422, 'The e-mail address and the password do not match an account.'],
  'auth.wrongPassword': [422, 'This is not your present password.'],
  'auth.weakPassword': [422, 'Choose another password.'],
  'auth.foreignOrigin': [403, 'This request came from another site.'],
  'auth.scope': [403, 'This token may only read.'],
  'policy.forbidden': [403, 'Your role does not allow this.'],
  'rate.limited': [429, 'Too many tries. Wait a little and try again.'],
  'workspace.notFound': [404, 'There is no such workspace, or it is not yours to see.'],
  'study.notFound': [404, 'There is no such study, or it is not yours to see.'],
  'study.stale': [
    409,
    'Somebody saved this study after you opened it. Reload to see their change, then make yours again.'
  ],
  'study.archived': [409, 'This study is archived. Restore it to change it.'],
  'study.deleted': [404, 'There is no such study, or it is not yours to see.'],
  'study.stateConflict': [409, 'The study is not in a state that allows this.'],
  'share.notFound': [404, 'This person does not have a share of the study.'],
  'share.owner': [409, 'The owner already has the study.'],
  'thread.notFound': [404, 'There is no such comment.'],
  'thread.closed': [409, 'This comment is closed.'],
  'token.notFound': [404, 'There is no such token of yours.'],
  'session.notFound': [404, 'There is no such sign-in of yours.'],
  'member.notFound': [404, 'There is no such member.'],
  'member.last': [409, 'A workspace needs an administrator: make somebody else one first.'],
  'member.already': [409, 'This person is already a member.'],
  'invitation.notFound': [404, 'This invitation is unknown, used or past its date. Ask for a new one.'],
  'invitation.otherPerson': [403, 'This invitation was sent to another e-mail address. Sign in with that one.'],
  'invitation.signInFirst': [409, 'There is an account with this e-mail address. Sign in to accept.'],
  'reset.notFound': [404, 'This link is unknown, used or older than an hour. Ask for a new one.'],
  'mail.notFound': [404, 'There is no such message.'],
  'mail.failed': [
    503,
    'The e-mail could not be handed to the mail server. Nothing was changed; try again in a minute.'
  ],
  'engine.failed': [422, 'The calculation stopped before it reached the accuracy asked for.'],
  'engine.tooLong': [422, 'The calculation was stopped because it would have taken too long.'],
  'database.unavailable': [
    503,
    'The records cannot be reached at the moment. Nothing was lost; try again in a minute.'
  ],
  'page.notFound': [404, 'There is nothing at this address.']
} as const satisfies Record<string, readonly [number, string]>;

export type ErrorCode = keyof typeof CATALOGUE;

export interface RefusalOptions {
  message?: string;
  issues?: FieldIssue[];
  retryAfterSeconds?: number;
  latestRevision?: number;
  cause?: unknown;
}

/** A refusal with a stable code, an HTTP status and a message for a person. Anything else that is thrown is a fault. */
export class AppError extends Error {
  readonly issues: FieldIssue[];
  readonly retryAfterSeconds: number | null;
  /** The revision that a form must name to be saved after all, where somebody saved in between. */
  readonly latestRevision: number | null;

  constructor(
    readonly code: ErrorCode,
    readonly status: number,
    message: string,
    options: Omit<RefusalOptions, 'message'> = {}
  ) {
    super(message, { cause: options.cause });
    this.name = 'AppError';
    this.issues = options.issues ?? [];
    this.retryAfterSeconds = options.retryAfterSeconds ?? null;
    this.latestRevision = options.latestRevision ?? null;
  }
}

/** Makes the refusal of that code from the catalogue: `throw refusal('study.notFound')`. */
export function refusal(code: ErrorCode, options: RefusalOptions = {}): AppError {
  const [status, message] = CATALOGUE[code];
  return new AppError(code, status, options.message ?? message, options);
}

/** Makes the 422 that names one field: `throw invalid('email', 'This address is already a member.')`. */
export function invalid(path: string, message: string): AppError {
  return refusal('input.invalid', { message, issues: [{ path, message }] });
}
