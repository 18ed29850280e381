import { asEndpoint } from '$lib/server/kit/asEndpoint';
import { studyReport } from '$lib/server/queries/studyReport';
import type { RequestEvent } from './$types';

/** The equilibria of the study's own model, as `POST /api/v1/equilibria` would answer for it. */
export const GET = asEndpoint(({ params }: RequestEvent, context) => studyReport(context, params.studyId));
