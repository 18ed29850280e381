import { asEndpoint } from '$lib/server/kit/asEndpoint';
import { presentStudy } from '$lib/server/presenters/study';
import { studyOverview } from '$lib/server/queries/studyOverview';
import type { RequestEvent } from './$types';

export const GET = asEndpoint(async ({ params }: RequestEvent, context) =>
  presentStudy(await studyOverview(context, params.studyId))
);
