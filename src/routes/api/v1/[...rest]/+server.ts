import { refusal } from '$lib/server/errors';
import { asOpenEndpoint } from '$lib/server/kit/asEndpoint';

/** What is not at any other address of this API is told so in its own words, not by a page. */
export const fallback = asOpenEndpoint(() => {
  throw refusal('page.notFound');
});
