import type { System } from '../model/spec';
import { INTERVAL, interval, signOf, type Interval } from '../numeric/interval';
import { rangeOf } from '../numeric/realRoots';
import { tidy, type Lifted } from './certify';
import { firstAlone, secondAlone } from './elimination';
import type { AbsorbingState, Stability } from './results';
import { rootsOf, type PinnedPlace as RootPlace } from './rootPlaces';

type Key = 'first' | 'second';

const NAMES: Record<Key, string> = { first: 'the first species', second: 'the second species' };

/** A species from which a quota takes more than is added stays at 0 once it has run out: what is stocked is taken at once. */
function isHeld(system: System, key: Key): boolean {
  const species = system.spec[key];
  return (species.removal?.quota ?? 0) > (species.stocking ?? 0);
}

/** Stability of the loss of both, one held: the other leaves 0 if it grows from a few. */
function stabilityAtZero(polynomial: readonly Interval[]): Stability {
  for (const coefficient of polynomial) {
    const sign = signOf(coefficient);
    if (sign === null) return 'undetermined';
    if (sign !== 0) return sign > 0 ? 'unstable' : 'stable';
  }
  return 'neutral';
}

/** Sign of a polynomial just beside a root, from where rounding lets it be told. */
function signBeside(polynomial: readonly Interval[], root: RootPlace, side: -1 | 1): number {
  const edge = side < 0 ? Math.min(root.lo, root.from) : Math.max(root.hi, root.to);
  for (let air = 2 ** -50; air < 0.1; air *= 2) {
    const sign = signOf(rangeOf(polynomial, edge * (1 + side * air), edge * (1 + side * air)));
    if (sign !== null && sign !== 0) return sign;
  }
  return 0;
}

/** Stability of a level above 0 of what remains: growth below it and decline above. */
function stabilityAlone(polynomial: readonly Interval[], root: RootPlace): Stability {
  const [below, above] = [signBeside(polynomial, root, -1), signBeside(polynomial, root, 1)];
  if (below === 0 || above === 0) return 'undetermined';
  return below > 0 && above < 0 ? 'stable' : 'unstable';
}

function oneHeld(lifted: Lifted, held: Key): AbsorbingState[] {
  const free: Key = held === 'first' ? 'second' : 'first';
  const own = held === 'first' ? secondAlone(INTERVAL, lifted.interval) : firstAlone(INTERVAL, lifted.interval);
  const untouched = INTERVAL.isZero(held === 'first' ? lifted.interval.s2 : lifted.interval.s1);
  const at = (n: number) => (held === 'first' ? { x: 0, y: n } : { x: n, y: 0 });
  const states: AbsorbingState[] = rootsOf(own, false).places.map((root) => ({
    ...at(tidy(root.value, interval(root.lo, root.hi))),
    held: [held],
    stability: stabilityAlone(own, root),
    remark: `Holds only because ${NAMES[held]} ran out under its quota; ${NAMES[free]} rests on its own.`
  }));
  if (untouched) {
    states.push({
      ...at(0),
      held: [held],
      stability: stabilityAtZero(own),
      remark:
        own.length === 0
          ? `${NAMES[held].replace('the', 'The')} ran out under its quota; ${NAMES[free]} then stays at whatever level it has.`
          : `Both are gone: ${NAMES[held]} ran out under its quota.`
    });
  }
  return states;
}

function bothGone(held: Key[], remark: string): AbsorbingState {
  return { x: 0, y: 0, held, stability: 'stable', remark };
}

/**
 * States that hold only because a species has run out under its quota, with the rest points of what remains.
 * @returns states sorted by x, then y; none when no quota is set. Under leslie growth a held resource leaves the consumer
 *   without a defined ceiling, so only the loss of both is listed. Never throws.
 */
export function absorbingStates(system: System, lifted: Lifted): AbsorbingState[] {
  const first = isHeld(system, 'first');
  const second = isHeld(system, 'second');
  const states: AbsorbingState[] = [];
  const withoutCeiling = !INTERVAL.isZero(lifted.interval.leslie);
  if (first && !withoutCeiling) states.push(...oneHeld(lifted, 'first'));
  if (second) states.push(...oneHeld(lifted, 'second'));
  if (first && second) {
    states.push(bothGone(['first', 'second'], 'Both species ran out under their quotas.'));
  } else if (first && withoutCeiling) {
    states.push(
      bothGone(['first'], 'The first species ran out under its quota, and without it the consumer is gone too.')
    );
  }
  return states.sort((p, q) => p.x - q.x || p.y - q.y);
}
