/** What is shown while the database is away: needs no database, no script and no file. */
import { problemOf, problemResponse } from '../api/problem';
import { refusal } from '../errors';

const PAGE = (requestId: string) => `<!doctype html>
<html lang="en-GB"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width, initial-scale=1">
<title>Not reachable · Sedgeline</title>
<style>
  :root { color-scheme: light dark; }
  body { margin: 0; font: 1rem/1.55 system-ui, sans-serif; background: #fbfcfa; color: #14211d; }
  main { max-width: 34rem; margin: 18vh auto 0; padding: 0 1.5rem; }
  h1 { font: 400 1.75rem/1.22 Georgia, serif; }
  a { color: #1c5240; }
  small { color: #586760; }
  @media (prefers-color-scheme: dark) {
    body { background: #131c19; color: #e8efe9; } a { color: #a9d3b7; } small { color: #94a39a; }
  }
</style></head>
<body><main>
<h1>The records cannot be reached at the moment.</h1>
<p>Nothing that was saved is lost. Sedgeline tries again by itself; wait a minute, then <a href="">load this page again</a>.</p>
<p><small>On record as ${requestId}.</small></p>
</main></body></html>`;

/** The 503 of a page, or the problem document where a program asks. */
export function unavailableResponse(requestId: string, wantsJson: boolean): Response {
  if (wantsJson) return problemResponse(problemOf(refusal('database.unavailable'), requestId));
  return new Response(PAGE(requestId), {
    status: 503,
    headers: {
      'content-type': 'text/html; charset=utf-8',
      'retry-after': '10',
      'cache-control': 'no-store',
      'content-security-policy':
        "default-src 'none'; style-src 'unsafe-inline'; base-uri 'none'; frame-ancestors 'none'"
    }
  });
}
