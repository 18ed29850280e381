import { NewThread } from '$lib/contracts/comment';
import { openThread } from '$lib/server/commands/openThread';
import { asEndpoint } from '$lib/server/kit/asEndpoint';
import { readJson } from '$lib/server/kit/readJson';
import { openStudy } from '$lib/server/studies/access';
import type { RequestEvent } from './$types';

/** Opens a thread. The right to do so is looked at before the body. */
export const POST = asEndpoint(
  async (event: RequestEvent, context) => {
    const { studyId } = event.params;
    await openStudy(context, studyId, 'study.comment');
    return openThread(context, { studyId, ...(await readJson(event, NewThread)) });
  },
  { status: 201 }
);
