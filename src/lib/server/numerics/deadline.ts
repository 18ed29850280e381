/** Milliseconds that one answer may take the process: it answers nobody else meanwhile. */
export const ANSWER_MS = 3500;

/** A `shouldStop` that says yes once the time is up. The engine knows no clock; this is where it gets one. */
export function deadline(ms = ANSWER_MS): () => boolean {
  const end = performance.now() + ms;
  return () => performance.now() > end;
}
