import { compile } from '../model/compile';
import type { ModelSpec, SpeciesKey, System } from '../model/spec';
import { findEquilibria } from './equilibria';
import type { Equilibrium } from './results';

/** Whether a species that is rare can spread while the other one rests on its own. */
export interface Invasion {
  resident: SpeciesKey;
  /** Where the resident rests; the invader is at 0. */
  residentState: { x: number; y: number };
  invader: SpeciesKey;
  /** Growth rate per head of the invader when rare, 1/time. */
  rate: number;
  /** True when the rate is positive, false when negative, null when it is 0 within rounding. */
  canInvade: boolean | null;
}

/** The resident alone returns to this state: the eigenvalue along its own axis is negative. */
function restsAlone(equilibrium: Equilibrium, resident: SpeciesKey): boolean {
  const { x, y, jacobian } = equilibrium;
  const [own, other] = resident === 'first' ? [x, y] : [y, x];
  return own > 0 && other === 0 && (resident === 'first' ? jacobian[0][0] : jacobian[1][1]) < 0;
}

function isNeutral(system: System, at: { x: number; y: number }, invader: SpeciesKey, rate: number): boolean {
  // The magnitude per head of the invader, just off its axis, is the scale of the terms its rate is summed from.
  const size = new Float64Array(2);
  const step = 1e-9 * Math.max(at.x, at.y);
  const [x, y] = invader === 'first' ? [step, at.y] : [at.x, step];
  system.magnitude(x, y, size);
  const scale = (invader === 'first' ? size[0]! : size[1]!) / step;
  return Math.abs(rate) <= 1e-12 * scale;
}

/**
 * Growth per head of each species when it is rare and the other one rests at a stable state of its own.
 * @param spec a model without issues
 * @returns one entry for each such state, first resident first, ascending; none for a species that cannot live alone, or
 *   for an invader that is stocked or under a quota, because then it is never merely rare. Never throws.
 * @source strogatz2015 §6.4
 */
export function invasion(spec: ModelSpec): Invasion[] {
  const system = compile(spec);
  const { equilibria } = findEquilibria(spec);
  const rates = new Float64Array(2);
  const found: Invasion[] = [];
  for (const resident of ['first', 'second'] as const) {
    const invader: SpeciesKey = resident === 'first' ? 'second' : 'first';
    const free = invader === 'first' ? system.firstAxisInvariant : system.secondAxisInvariant;
    if (!free) continue;
    for (const equilibrium of equilibria.filter((candidate) => restsAlone(candidate, resident))) {
      const { x, y } = equilibrium;
      system.perHead(x, y, rates);
      const rate = invader === 'first' ? rates[0]! : rates[1]!;
      const canInvade = isNeutral(system, { x, y }, invader, rate) ? null : rate > 0;
      found.push({ resident, residentState: { x, y }, invader, rate, canInvade });
    }
  }
  return found;
}
