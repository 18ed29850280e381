import { csvResponse, unitsOption } from '$lib/server/api/csvResponse';
import { asEndpoint } from '$lib/server/kit/asEndpoint';
import { studyTrajectoriesCsv } from '$lib/server/queries/studyTrajectories';
import type { RequestEvent } from './$types';

/** The same table at an address of its own, for a link that a browser downloads. */
export const GET = asEndpoint(async ({ params, url }: RequestEvent, context) => {
  const units = unitsOption(url.searchParams);
  const { fileName, text } = await studyTrajectoriesCsv(context, params.studyId, { units });
  return csvResponse(fileName, text);
});
