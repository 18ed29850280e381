/** What can be said of all starts at once, and on what ground. */
import { coefficientsOf, type Coefficients } from '../model/coefficients';
import type { ModelSpec } from '../model/spec';
import { INTERVAL, signOf, type Interval } from '../numeric/interval';
import { excludeCycles } from './excludeCycles';
import type { BasinShares } from './outcome';
import type { EquilibriaReport, Equilibrium } from './results';

export interface GlobalClaim {
  /** A sentence about every start. */
  claim: string;
  /** `theorem`: proven. `measured`: so for every start of a grid. `none`: the sentence says that nothing is known. */
  by: 'theorem' | 'measured' | 'none';
  /** The argument, or what stands in its way, in one sentence. */
  detail: string;
  /** The equilibrium that the claim is about, as an index in the report; null where it is about none. */
  equilibrium: number | null;
}

/** Sign of a per-head rate at great abundance: that of its last coefficient that is not 0. */
function signFarOut(coefficients: readonly Interval[]): number | null {
  for (let i = coefficients.length - 1; i >= 0; i--) {
    const sign = signOf(coefficients[i]!);
    if (sign !== 0) return sign;
  }
  return 0;
}

/**
 * Whether every path stays within bounds. Alone, each species declines at great abundance; under feeding e x + y declines
 * where the resource is bounded and the consumer dies, crowds or has a ceiling.
 */
function isBounded(k: Coefficients<Interval>): boolean {
  if (signFarOut(k.p) !== -1) return false;
  if (k.interaction === 'competition') return signFarOut(k.q) === -1;
  return k.leslie.lo > 0 || signFarOut(k.q) === -1;
}

type Draw = 'all near it' | 'a divide' | 'nobody' | 'unknown';

/** Which paths from inside the quadrant an equilibrium takes, where nothing is taken by the unit. */
function drawOf({ x, y, jacobian, class: kind, stability }: Equilibrium): Draw {
  if (stability === 'stable') return 'all near it';
  if (kind === 'centre') return 'unknown';
  // On an invariant axis, paths that stay nearby and come from inside need the slope across the axis to bring them in.
  const across = [...(y === 0 ? [jacobian[1][1]] : []), ...(x === 0 ? [jacobian[0][0]] : [])];
  if (kind === 'non-hyperbolic')
    return across.length === 1 && across[0]! > 0 && stability === 'unstable' ? 'nobody' : 'unknown';
  if (kind !== 'saddle' || across.some((slope) => slope > 0)) return 'nobody';
  return 'a divide';
}

const OPEN = 'Which starts end where is not settled for all of them at once.';

function none(detail: string): GlobalClaim {
  return { claim: OPEN, by: 'none', detail, equilibrium: null };
}

/** The ends of a grid of starts, where they are all one equilibrium. */
function measuredClaim(shares: BasinShares | undefined): GlobalClaim | null {
  const [only] = shares?.shares ?? [];
  if (!shares || shares.shares.length !== 1 || only?.end.kind !== 'equilibrium') return null;
  return {
    claim: 'Every start that was tried ends here.',
    by: 'measured',
    detail: `${shares.n * shares.n} starts, evenly over the plane, were followed to their end.`,
    equilibrium: only.end.index
  };
}

function underQuota(k: Coefficients<Interval>, report: EquilibriaReport, points: Equilibrium[]): GlobalClaim {
  if (points.length === 0 && report.complete && isBounded(k) && INTERVAL.isZero(k.leslie)) {
    return {
      claim: 'From every start a species under a quota runs out.',
      by: 'theorem',
      detail:
        'Paths stay within bounds, and one that stayed in the plane for ever would have a resting point to go to or round; there is none.',
      equilibrium: null
    };
  }
  return none('A quota can exhaust a species from some starts and not from others.');
}

/**
 * What can be said of all starts with both species present.
 * @param spec a sound model. @param report of that model, feasible equilibria all in it
 * @param shares a grid of starts followed to their ends, where there is one: the ground for a measured claim
 * @returns the claim and its ground; null where the model has no attractor to speak of, as with growth without limit. Never
 *   throws.
 * @source strogatz2015 §7.3 (Poincaré–Bendixson), hofbauerSigmund1998 §3.4 (two competitors)
 */
export function globalClaim(spec: ModelSpec, report: EquilibriaReport, shares?: BasinShares): GlobalClaim | null {
  const k = coefficientsOf(INTERVAL, spec);
  const points = report.equilibria.filter((point) => point.feasible);
  if (report.continua.length > 0)
    return none('There is a whole curve of resting points, and each draws its own starts.');
  if (k.s1.lo < 0 || k.s2.lo < 0) return measuredClaim(shares) ?? underQuota(k, report, points);
  if (!isBounded(k))
    return points.length === 0 ? null : (measuredClaim(shares) ?? none('Some paths may grow without limit.'));
  const followsResource = !INTERVAL.isZero(k.leslie);
  // Under a ceiling that follows the resource the corner x = y = 0 has no equations; a resource that grows when rare keeps off.
  const cornerKeepsOff = !followsResource || k.p[0].lo > 0 || k.s1.lo > 0;
  const draws = points.map(drawOf);
  const attractors = points.filter((_, i) => draws[i] === 'all near it');
  if (!report.complete || !cornerKeepsOff || draws.includes('unknown')) {
    return measuredClaim(shares) ?? none('The pull of one of the resting points is not known for certain.');
  }
  if (attractors.length > 1) return none(`${attractors.length} resting points attract, each its own starts.`);
  const proof = excludeCycles(spec);
  const divides = draws.includes('a divide');
  const target = attractors[0];
  if (!target) {
    if (divides || proof) return none('No resting point attracts.');
    return {
      claim: 'Every start with both species present, but a resting point itself, ends on a cycle.',
      by: 'theorem',
      detail: 'Paths stay within bounds and no resting point draws any of them (Poincaré–Bendixson).',
      equilibrium: null
    };
  }
  if (proof && (!divides || proof.by === 'monotone')) {
    const but = divides ? ', but those exactly on a divide,' : '';
    return {
      claim: `Every start with both species present${but} ends here.`,
      by: 'theorem',
      detail: `Paths stay within bounds, and no other resting point attracts. ${proof.detail}`,
      equilibrium: report.equilibria.indexOf(target)
    };
  }
  return measuredClaim(shares) ?? none('One resting point attracts, but a cycle around it is not excluded.');
}
