const UUID = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/i;

/** Whether a text can be the id of a row at all; PostgreSQL answers anything else with a fault instead of "none". */
export function isUuid(text: string): boolean {
  return UUID.test(text);
}
