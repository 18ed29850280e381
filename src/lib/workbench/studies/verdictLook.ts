import type { VerdictHue, VerdictKind } from '$lib/ui/types';

/** What each kind of verdict is called. */
export const verdictWords: Record<string, string> = {
  coexistence: 'Coexistence',
  exclusion: 'Exclusion',
  depends: 'Depends on the start',
  cycles: 'Cycles',
  crash: 'Crash',
  unbounded: 'Grows without limit',
  undecided: 'Undecided',
  none: 'No verdict yet'
};

const drawn = ['coexistence', 'exclusion', 'depends', 'cycles', 'crash'] as const;
const hues = ['holds', 'depends', 'lost', 'cycles'] as const;

/** The pictogram of a verdict; kinds without one get the empty plane. */
export const verdictKindOf = (kind: string): VerdictKind => drawn.find((k) => k === kind) ?? 'none';

/** The hue says what a verdict means for what is to be kept; where nothing is, a cycle still has a hue of its own. */
export function hueOf({ kind, consequence }: { kind: string; consequence: string }): VerdictHue {
  return hues.find((hue) => hue === consequence) ?? (kind === 'cycles' ? 'cycles' : 'unknown');
}
