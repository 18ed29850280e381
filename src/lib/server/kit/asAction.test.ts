import { isRedirect, type RequestEvent } from '@sveltejs/kit';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { AppError, invalid, refusal } from '../errors';
import { asAction, asFormAction } from './asAction';

const Schema = z.strictObject({
  email: z.string().min(3, 'Type an address.'),
  password: z.string().min(1, 'Type a password.')
});

function eventOf(fields: Record<string, string>): RequestEvent & { sent: Record<string, string> } {
  const body = new URLSearchParams(fields);
  const url = new URL('http://localhost:5173/sign-in');
  const sent: Record<string, string> = {};
  return {
    url,
    sent,
    request: new Request(url, { method: 'POST', body }),
    locals: { requestId: 'r', actor: null, session: null, theme: 'system', databaseAway: false },
    getClientAddress: () => '192.0.2.40',
    setHeaders: (headers: Record<string, string>) => Object.assign(sent, headers)
  } as unknown as RequestEvent & { sent: Record<string, string> };
}

async function post(fields: Record<string, string>, thrown?: unknown) {
  const event = eventOf(fields);
  const action = asFormAction(
    Schema,
    (form) => {
      if (thrown) throw thrown;
      return { form };
    },
    { secrets: ['password'] }
  );
  const result = await action(event);
  const { status, data } = result as { status?: number; data?: { form: Awaited<ReturnType<typeof action>> } };
  const form = (data ?? result) as {
    form: { data: Record<string, string>; errors: Record<string, string[]>; message?: { text: string } };
  };
  return { status: status ?? 200, ...form.form, event };
}

describe('a form that is refused', () => {
  it('keeps what was typed, names the field, and never sends a password back', async () => {
    const { status, data, errors } = await post({ email: 'x', password: 'the secret' });
    expect(status).toBe(422);
    expect(data).toEqual({ email: 'x', password: '' });
    expect(errors).toEqual({ email: ['Type an address.'] });
  });

  it('by a command puts the sentence beside the field it is about', async () => {
    const { status, data, errors, message } = await post({ email: 'a@b', password: 'p' }, invalid('email', 'Taken.'));
    expect([status, errors.email, message]).toEqual([422, ['Taken.'], undefined]);
    expect(data).toEqual({ email: 'a@b', password: '' });
  });

  it('as a whole puts it above the form', async () => {
    const { status, message, data } = await post({ email: 'a@b', password: 'p' }, refusal('policy.forbidden'));
    expect([status, message?.text]).toEqual([403, 'Your role does not allow this.']);
    expect(data.email).toBe('a@b');
  });

  it('for too many tries says when to come back', async () => {
    const { status, event } = await post(
      { email: 'a@b', password: 'p' },
      refusal('rate.limited', { retryAfterSeconds: 9 })
    );
    expect([status, event.sent['retry-after']]).toEqual([429, '9']);
  });

  it('while the database is away leads to the plain page', async () => {
    const { status, event } = await post({ email: 'a@b', password: 'p' }, refusal('database.unavailable'));
    expect([status, event.locals.databaseAway]).toEqual([503, true]);
  });
});

describe('a form that is taken', () => {
  it('does not send the password back either', async () => {
    expect((await post({ email: 'a@b', password: 'p' })).data).toEqual({ email: 'a@b', password: '' });
  });
});

describe('an action', () => {
  it('without a sign-in leads there', async () => {
    const action = asAction(() => {
      throw refusal('auth.required');
    });
    const thrown = await action(eventOf({})).catch((error: unknown) => error);
    expect(isRedirect(thrown) && thrown.location).toBe('/sign-in?next=%2Fsign-in');
  });

  it('lets a fault through', async () => {
    const action = asAction(() => {
      throw new Error('broken');
    });
    const thrown = await action(eventOf({})).catch((error: unknown) => error);
    expect(thrown).toBeInstanceOf(Error);
    expect(thrown).not.toBeInstanceOf(AppError);
  });
});
