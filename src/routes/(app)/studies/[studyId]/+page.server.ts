import { asLoad } from '$lib/server/kit/asLoad';
import { studyPictures } from '$lib/server/queries/studyPictures';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = asLoad(async (event, context) => ({
  pictures: await studyPictures(context, event.params.studyId)
}));
