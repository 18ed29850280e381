import { compile } from '../model/compile';
import { coefficientsOf } from '../model/coefficients';
import type { ModelSpec, System } from '../model/spec';
import { contains, INTERVAL, middle, ZERO } from '../numeric/interval';
import { ENGINE_VERSION } from '../version';
import { absorbingStates } from './absorbing';
import { jacobianOver, lift, type Lifted } from './certify';
import { classify } from './classify';
import { continuaOf, liesOn } from './continua';
import type { EquilibriaReport, Equilibrium } from './results';
import { searchEquilibria, type FoundPoint, type Search } from './rootSearch';

export interface EquilibriaOptions {
  /** Also list real equilibria with a negative abundance, with `feasible: false`. Default false. */
  includeInfeasible?: boolean;
}

/** Largest share of its own terms that a rate may keep at a point called an equilibrium. */
const RESTING = 1e-9;

function describe(system: System, lifted: Lifted, found: FoundPoint): Equilibrium {
  const { x, y, box, multiplicity } = found;
  const j = new Float64Array(4);
  system.jacobian(x, y, j);
  const over = box ? jacobianOver(lifted, x === 0 ? ZERO : box.x, y === 0 ? ZERO : box.y) : null;
  const usable = over?.entries.every((entry) => Number.isFinite(entry.lo) && Number.isFinite(entry.hi)) ? over : null;
  // An entry that rounding has carried out of its enclosure is taken back to the middle of it.
  const entries = Array.from(j, (entry, i) => {
    const within = usable?.entries[i];
    return within && !contains(within, entry) ? middle(within) : entry;
  }) as [number, number, number, number];
  return { x, y, feasible: x >= 0 && y >= 0, multiplicity, ...classify(system.spec, x, y, entries, usable) };
}

/** A merged place that is no equilibrium after all would be worse than a doubt. */
function isResting(system: System, { x, y }: FoundPoint): boolean {
  const rate = new Float64Array(2);
  const magnitude = new Float64Array(2);
  system.rhs(x, y, rate);
  system.magnitude(x, y, magnitude);
  return [0, 1].every((i) => Math.abs(rate[i]!) <= RESTING * magnitude[i]!);
}

function completenessOf(search: Search): string {
  if (search.doubts.length > 0) return `Not proven complete: ${search.doubts.join('; ')}.`;
  const proof = 'Proven: one species is eliminated and every root of what remains is isolated in interval arithmetic';
  return search.merged ? `${proof}; roots that coincide within rounding are listed once.` : `${proof}.`;
}

/**
 * All equilibria of a model in the closed quadrant.
 * @param spec a model without issues (see checkModel)
 * @returns equilibria sorted by x, then y; curves of equilibria; states held by a quota; and whether the list is proven
 *   complete, with the sentence that says why. Never throws.
 */
export function findEquilibria(spec: ModelSpec, options: EquilibriaOptions = {}): EquilibriaReport {
  const system = compile(spec);
  const lifted = lift(coefficientsOf(INTERVAL, spec));
  const search = searchEquilibria(spec, lifted, options.includeInfeasible ?? false);
  const continua = continuaOf(system, search);
  const resting = search.points.filter((point) => isResting(system, point));
  if (resting.length < search.points.length)
    search.doubts.push('several equilibria in one place could not be told apart');
  const isolated = resting.filter((point) => !continua.some((continuum) => liesOn(continuum, point)));
  const equilibria = isolated.map((point) => describe(system, lifted, point)).sort((p, q) => p.x - q.x || p.y - q.y);
  return {
    equilibria,
    continua,
    absorbing: absorbingStates(system, lifted),
    complete: search.doubts.length === 0,
    completeness: completenessOf(search),
    engine: ENGINE_VERSION
  };
}
