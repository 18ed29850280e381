import { openApiDocument } from '$lib/server/api/openapi';
import { asOpenEndpoint } from '$lib/server/kit/asEndpoint';

/** The description of this API. It says nothing of any study, so it needs no sign-in. */
export const GET = asOpenEndpoint(() => openApiDocument());
