import type { RequestEvent } from '@sveltejs/kit';
import type { z } from 'zod';
import { jsonFault } from '../api/jsonFault';
import { parseValue } from '../api/problem';
import { refusal } from '../errors';

const MEGABYTE = 1_048_576;

function tooLarge(maxBytes: number) {
  const message = `The body is larger than ${Math.round(maxBytes / 1024)} kB.`;
  return refusal('input.tooLarge', { message, issues: [{ path: '', message }] });
}

async function readText(request: Request, maxBytes: number): Promise<string> {
  if (Number(request.headers.get('content-length') ?? 0) > maxBytes) throw tooLarge(maxBytes);
  const chunks: Uint8Array[] = [];
  let size = 0;
  try {
    for await (const chunk of request.body ?? []) {
      size += chunk.byteLength;
      if (size > maxBytes) throw tooLarge(maxBytes);
      chunks.push(chunk);
    }
  } catch (thrown) {
    // The adapter has a limit of its own and breaks the stream when it is passed.
    if (thrown instanceof Error && 'status' in thrown && thrown.status === 413) throw tooLarge(maxBytes);
    throw thrown;
  }
  return Buffer.concat(chunks).toString('utf8');
}

/**
 * The JSON body of a request, checked against a schema. Throws 422 for what is not JSON (`NaN` is not), is larger than
 * `maxBytes`, or does not fit the schema, naming each path.
 */
export async function readJson<S extends z.ZodType>(
  event: RequestEvent,
  schema: S,
  maxBytes = MEGABYTE
): Promise<z.output<S>> {
  const text = await readText(event.request, maxBytes);
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch {
    const fault = jsonFault(text);
    const where = fault ? ` from line ${fault.line}, column ${fault.column} on` : '';
    const message = `The body is not JSON${where} (note that NaN and Infinity are not numbers in JSON).`;
    throw refusal('input.notJson', { message, issues: [{ path: '', message, ...fault }] });
  }
  return parseValue(schema, value);
}
