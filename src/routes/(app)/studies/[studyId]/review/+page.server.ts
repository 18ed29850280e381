import { fail, redirect, type RequestEvent } from '@sveltejs/kit';
import type { Context } from '$lib/server/context';
import { AppError } from '$lib/server/errors';
import { openThread } from '$lib/server/commands/openThread';
import { replyToThread } from '$lib/server/commands/replyToThread';
import { resolveThread } from '$lib/server/commands/resolveThread';
import { asAction } from '$lib/server/kit/asAction';
import { safeNext } from '$lib/server/kit/requireUser';
import type { Actions } from './$types';

type Event = RequestEvent<{ studyId: string }>;

/** Comments are posted here from every page of the study; afterwards the reader is back where they were. */
function posting(command: (context: Context, studyId: string, data: FormData) => Promise<unknown>) {
  return asAction(async (event: Event, context) => {
    const data = await event.request.formData();
    try {
      await command(context, event.params.studyId, data);
    } catch (thrown) {
      if (!(thrown instanceof AppError) || thrown.status !== 422) throw thrown;
      const typed = { anchor: text(data, 'anchor'), kind: text(data, 'kind'), body: text(data, 'body') };
      return fail(422, { refused: { ...typed, message: thrown.message } });
    }
    redirect(303, safeNext(text(data, 'here'), `/studies/${event.params.studyId}/review`));
  });
}
const text = (data: FormData, name: string) => String(data.get(name) ?? '');

/** `rate:first.growth.r` as the anchor of a comment. */
function anchorOf(value: string): unknown {
  const [kind = 'study', ...key] = value.split(':');
  return kind === 'study' ? { kind } : { kind, key: key.join(':') };
}

export const actions: Actions = {
  open: posting((context, studyId, data) =>
    openThread(context, {
      studyId,
      anchor: anchorOf(text(data, 'anchor')),
      kind: text(data, 'kind'),
      body: text(data, 'body')
    })
  ),
  reply: posting((context, studyId, data) =>
    replyToThread(context, { studyId, threadId: text(data, 'threadId'), body: text(data, 'body') })
  ),
  resolve: posting((context, studyId, data) =>
    resolveThread(context, {
      studyId,
      threadId: text(data, 'threadId'),
      resolved: text(data, 'resolved') === 'true'
    })
  )
};
