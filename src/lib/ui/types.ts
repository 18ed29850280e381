/** How far a piece of evidence has come. One set of words, everywhere. */
export type EvidenceState = 'empty' | 'ready' | 'stale' | 'signed';

/** The words for a state, said beside every glyph. */
export const stateWords: Record<EvidenceState, string> = {
  empty: 'empty',
  ready: 'ready',
  stale: 'stale',
  signed: 'signed off'
};

/** The kind of an outcome: it picks the pictogram. */
export type VerdictKind = 'coexistence' | 'exclusion' | 'depends' | 'cycles' | 'crash' | 'none';

/** What an outcome means for what is to be kept: it picks the hue. */
export type VerdictHue = 'holds' | 'depends' | 'lost' | 'cycles' | 'unknown';

/** First is blue, single line, disc; second is rust, double line, diamond. */
export type SpeciesSlot = 'first' | 'second';

/** What a field hands to the control inside it, so that label, hint and error are tied to it. */
export interface FieldControl {
  id: string;
  'aria-describedby': string | undefined;
  'aria-invalid': true | undefined;
}

/** One message or several, as validators give them. */
export type FieldError = string | readonly string[] | null | undefined;

/** The first sentence of an error, or null where there is none. */
export function firstError(error: FieldError): string | null {
  if (!error) return null;
  if (typeof error === 'string') return error;
  return error[0] ?? null;
}
