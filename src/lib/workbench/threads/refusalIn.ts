const messageIn = (value: unknown): string | null =>
  typeof value === 'object' && value !== null && 'message' in value && typeof value.message === 'string'
    ? value.message
    : null;

/** @returns the sentence of a refused post, whether one field or the whole was refused */
export function refusalIn(data: Record<string, unknown> | undefined): string {
  return messageIn(data?.refused) ?? messageIn(data?.problem) ?? 'This could not be posted. Try again.';
}
