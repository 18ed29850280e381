import { z } from 'zod';
import { RateEntry } from './content';

/** One rate as the API takes it, with the revision of the study it was made from. */
export const RatePatch = z.strictObject({
  revision: z.number({ error: 'Say which revision this change was made from.' }).int().min(1),
  rate: RateEntry
});
export type RatePatch = z.infer<typeof RatePatch>;
