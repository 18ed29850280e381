/** The problem document of RFC 9457, as every refusal of the API is written. */
import { z } from 'zod';

/** One field that was refused. */
export const FieldError = z.object({
  pointer: z.string().describe('Where it stands, as a JSON pointer (RFC 6901); empty for the whole.'),
  path: z.string().describe('The same with dots, as people say it.'),
  detail: z.string(),
  line: z.number().int().optional().describe('For a body that is not JSON: where it stops being so, from 1.'),
  column: z.number().int().optional()
});
export type FieldError = z.infer<typeof FieldError>;

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
  /** Each field that was refused, at most a hundred of them. */
  errors: z.array(FieldError).optional()
});
export type Problem = z.infer<typeof Problem>;
