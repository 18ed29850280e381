import type { System } from '../model/spec';
import { INTERVAL, interval } from '../numeric/interval';
import { positiveRoots } from '../numeric/realRoots';
import { tidy, type Lifted } from './certify';
import { firstAlone, secondAlone } from './elimination';
import type { AbsorbingState, Stability } from './results';

type Key = 'first' | 'second';

const NAMES: Record<Key, string> = { first: 'the first species', second: 'the second species' };

/** A species under a quota that is never stocked stays at 0 once it has run out. */
function isHeld(system: System, key: Key): boolean {
  const species = system.spec[key];
  return (species.removal?.quota ?? 0) > 0 && (species.stocking ?? 0) === 0;
}

/** Stability of what remains, on its own axis: the sign of its slope, then of its curvature as seen from inside. */
function stabilityAlone(system: System, free: Key, n: number): Stability {
  const rate = (value: number) => {
    const out = new Float64Array(2);
    system.rhs(free === 'first' ? value : 0, free === 'first' ? 0 : value, out);
    return free === 'first' ? out[0]! : out[1]!;
  };
  const j = new Float64Array(4);
  system.jacobian(free === 'first' ? n : 0, free === 'first' ? 0 : n, j);
  const slope = free === 'first' ? j[0]! : j[3]!;
  const magnitude = new Float64Array(2);
  system.magnitude(free === 'first' ? n : 0, free === 'first' ? 0 : n, magnitude);
  const scale = n > 0 ? (free === 'first' ? magnitude[0]! : magnitude[1]!) / n : 0;
  if (Math.abs(slope) > 1e-12 * scale && slope !== 0) return slope < 0 ? 'stable' : 'unstable';
  const step = n > 0 ? 1e-3 * n : 1e-6;
  if (n === 0) {
    const ahead = rate(step);
    if (ahead === 0) return 'neutral';
    return ahead < 0 ? 'stable' : 'unstable';
  }
  const [below, above] = [rate(n - step), rate(n + step)];
  return below > 0 && above < 0 ? 'stable' : 'unstable';
}

function oneHeld(system: System, lifted: Lifted, held: Key): AbsorbingState[] {
  const free: Key = held === 'first' ? 'second' : 'first';
  const own = held === 'first' ? secondAlone(INTERVAL, lifted.interval) : firstAlone(INTERVAL, lifted.interval);
  const untouched = INTERVAL.isZero(held === 'first' ? lifted.interval.s2 : lifted.interval.s1);
  const roots = positiveRoots(own).places.map((place) => tidy(place.value, interval(place.lo, place.hi)));
  const values = untouched ? [0, ...roots] : roots;
  return values.map((n) => ({
    x: held === 'first' ? 0 : n,
    y: held === 'first' ? n : 0,
    held: [held],
    stability: stabilityAlone(system, free, n),
    remark:
      n === 0
        ? `Both are gone: ${NAMES[held]} ran out under its quota.`
        : `Holds only because ${NAMES[held]} ran out under its quota; ${NAMES[free]} rests on its own.`
  }));
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
  if (first && !withoutCeiling) states.push(...oneHeld(system, lifted, 'first'));
  if (second) states.push(...oneHeld(system, lifted, 'second'));
  if (first && second) {
    states.push(bothGone(['first', 'second'], 'Both species ran out under their quotas.'));
  } else if (first && withoutCeiling && (system.spec.second.stocking ?? 0) === 0) {
    states.push(
      bothGone(['first'], 'The first species ran out under its quota, and without it the consumer is gone too.')
    );
  }
  return states.sort((p, q) => p.x - q.x || p.y - q.y);
}
