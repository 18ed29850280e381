/** The problem document of RFC 9457, as every refusal of the API is written. */
import { z } from 'zod';

export const Problem = z.object({
  type: z.literal('about:blank'),
  /** The status in words. */
  title: z.string(),
  status: z.number().int(),
  /** One sentence for a person. */
  detail: z.string(),
  /** Stable, for programs. */
  code: z.string(),
  requestId: z.string(),
  /** Each field that was refused, by its dotted path. */
  issues: z.array(z.object({ path: z.string(), message: z.string() })).optional()
});
export type Problem = z.infer<typeof Problem>;
