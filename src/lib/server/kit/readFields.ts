import type { z } from 'zod';
import { parseValue } from '../api/problem';

/** The fields of a small form, such as the button of a row; throws 422 when they are not what the page sends. */
export async function readFields<S extends z.ZodType>(request: Request, schema: S): Promise<z.output<S>> {
  return parseValue(schema, Object.fromEntries(await request.formData()));
}
