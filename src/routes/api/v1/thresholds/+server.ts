import { z } from 'zod';
import { asEndpoint } from '$lib/server/kit/asEndpoint';
import { readJson } from '$lib/server/kit/readJson';
import { computeThresholds, readThresholdsRequest } from '$lib/server/numerics/thresholds';

export const POST = asEndpoint(async (event) =>
  computeThresholds(readThresholdsRequest(await readJson(event, z.unknown())))
);
