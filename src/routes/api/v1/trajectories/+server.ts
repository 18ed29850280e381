import { TrajectoryRequest } from '$lib/contracts/trajectory';
import { prefersCsv, csvResponse, unitsOption } from '$lib/server/api/csvResponse';
import { asEndpoint } from '$lib/server/kit/asEndpoint';
import { readJson } from '$lib/server/kit/readJson';
import { computeTrajectory } from '$lib/server/numerics/trajectory';
import { trajectoryCsv } from '$lib/server/presenters/trajectoryCsv';

export const POST = asEndpoint(async (event) => {
  const units = unitsOption(event.url.searchParams);
  const answer = computeTrajectory(await readJson(event, TrajectoryRequest));
  if (!prefersCsv(event.request.headers)) return answer;
  return csvResponse('trajectory.csv', trajectoryCsv(answer, { units }));
});
