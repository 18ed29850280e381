import { RatePatch } from '$lib/contracts/rateChange';
import { saveRate } from '$lib/server/commands/saveRate';
import { asEndpoint } from '$lib/server/kit/asEndpoint';
import { readJson } from '$lib/server/kit/readJson';
import { openStudy } from '$lib/server/studies/access';
import type { RequestEvent } from './$types';

/** Saves one rate. The right to do so is looked at before the body, so that a reader learns 403 whatever they send. */
export const PATCH = asEndpoint(async (event: RequestEvent, context) => {
  const { studyId } = event.params;
  await openStudy(context, studyId, 'study.edit');
  const { revision, rate } = await readJson(event, RatePatch);
  return saveRate(context, { studyId, revision, rate });
});
