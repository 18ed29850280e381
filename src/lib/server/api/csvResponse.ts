import { invalid } from '../errors';

export type UnitsOption = 'none' | 'header' | 'row';

/**
 * Whether a caller asks for CSV: `text/csv` is named in Accept and not liked less than JSON. A browser's wildcard and a
 * missing header mean JSON.
 */
export function prefersCsv(headers: Headers): boolean {
  const accepted = (headers.get('accept') ?? '').split(',').map((part) => {
    const [type = '', ...parameters] = part.split(';').map((piece) => piece.trim().toLowerCase());
    const quality = parameters.find((parameter) => parameter.startsWith('q='));
    return { type, quality: quality ? Number(quality.slice(2)) : 1 };
  });
  const likes = (type: string) => accepted.find((entry) => entry.type === type)?.quality ?? 0;
  return likes('text/csv') > 0 && likes('text/csv') >= likes('application/json');
}

/** The `units` option of an address: absent for none, `header` beside the names, `row` in a row below them. */
export function unitsOption(parameters: URLSearchParams): UnitsOption {
  const asked = parameters.get('units');
  if (asked === null || asked === 'none') return 'none';
  if (asked === 'header' || asked === 'row') return asked;
  throw invalid('units', 'Units go in the `header`, in a `row` of their own, or are left out.');
}

/** A table as a download. */
export function csvResponse(fileName: string, text: string): Response {
  return new Response(text, {
    headers: {
      'content-type': 'text/csv; charset=utf-8; header=present',
      'content-disposition': `attachment; filename="${fileName}"`,
      'cache-control': 'private, no-store'
    }
  });
}
