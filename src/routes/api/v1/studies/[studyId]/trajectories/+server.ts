import { prefersCsv, csvResponse, unitsOption } from '$lib/server/api/csvResponse';
import { asEndpoint } from '$lib/server/kit/asEndpoint';
import { studyPaths, studyTrajectoriesCsv } from '$lib/server/queries/studyTrajectories';
import type { RequestEvent } from './$types';

/** The paths from the study's starts, as JSON or, by `Accept: text/csv`, as one table. */
export const GET = asEndpoint(async ({ params, request, url }: RequestEvent, context) => {
  const units = unitsOption(url.searchParams);
  if (!prefersCsv(request.headers)) return studyPaths(context, params.studyId);
  const { fileName, text } = await studyTrajectoriesCsv(context, params.studyId, { units });
  return csvResponse(fileName, text);
});
