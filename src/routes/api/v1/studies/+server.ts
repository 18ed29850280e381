import { StudyListQuery } from '$lib/contracts/study';
import { asEndpoint } from '$lib/server/kit/asEndpoint';
import { presentStudyList } from '$lib/server/presenters/study';
import { studyList } from '$lib/server/queries/studyList';

export const GET = asEndpoint(async ({ url }, context) =>
  presentStudyList(await studyList(context, StudyListQuery.parse(Object.fromEntries(url.searchParams))))
);
