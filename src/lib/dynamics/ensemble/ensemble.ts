/**
 * Many draws of uncertain rates, each followed: where it comes to rest, and its path. Draws are numbered and each has a
 * stream of its own, so that chunks of them can be worked out anywhere, in any order, and give the same bytes.
 */
import { equallySpaced, simulate } from '../analysis/trajectory';
import type { ModelSpec } from '../model/spec';
import { randomStream } from '../numeric/random';
import { isPlanar, makePlanarIntegrator, planarTimes, primePlanar } from '../solve/planar';
import { PLANAR_KERNELS } from '../solve/planarKernels';
import { L, PLANAR_RATES, planarFamilyOf, writePlanarRates } from '../solve/planarRates';
import { bindModel, logMoments, makeDraws, type DrawPlan } from './draws';
import {
  equilibriaFast,
  hasFastEquilibria,
  makeEquilibriaTable,
  NON_HYPERBOLIC,
  POINT_WIDTH,
  STABLE_CODES
} from './fastEquilibria';
import { seeManaged } from './managedEquilibria';
import { bandsOf, quantileOf, type Bands } from './quantiles';

/** What the stable resting places of a draw are, whatever the start. */
export const DRAW_OUTCOMES = [
  'coexistence',
  'first alone',
  'second alone',
  'neither',
  'depends on the start',
  'no stable equilibrium',
  'undecided'
] as const;
export type DrawOutcome = (typeof DRAW_OUTCOMES)[number];

export interface EnsemblePlan extends DrawPlan {
  /** A model without issues; the numbers at the paths of `rates` are overwritten. */
  spec: ModelSpec;
  /** Whole number that names all chance in this ensemble. */
  seed: number;
  /** Number of draws. */
  draws: number;
  /** Abundances at the first time; with a spread, log-normal as well. */
  start: { x: number; y: number; cvX?: number; cvY?: number };
  span: readonly [number, number];
  /** Output times, equally spaced, both ends included, default 201. */
  samples?: number;
  /** Relative tolerance of each step, default 1e-7. */
  rtol?: number;
  /** Abundances below which a species counts as gone, for `lowest`. */
  gone?: { first?: number; second?: number };
  /** Default 0.05, 0.25, 0.5, 0.75, 0.95. */
  quantiles?: readonly number[];
}

/** Results of the draws from..to-1; plain typed arrays, which a worker can hand over. */
export interface EnsembleChunk {
  from: number;
  to: number;
  /** Indices into DRAW_OUTCOMES. */
  outcomes: Uint8Array;
  /** Stable equilibrium with both species: pairs; NaN where there is none or more than one. */
  resting: Float64Array;
  /** Values drawn, in the order of the plan. */
  drawn: Float64Array;
  /** Pairs of abundances, time by time, draw by draw; NaN from where a path could not be followed. */
  values: Float64Array;
  /** Lowest abundance of each species over the output times: pairs. */
  lowest: Float64Array;
  /** 1 where the path could not be followed to the end. */
  failed: Uint8Array;
}

export interface EnsembleSummary {
  draws: number;
  times: number[];
  bands: Bands;
  /** Share of the draws, 0 to 1, and its standard error, in the order of DRAW_OUTCOMES; outcomes not met are left out. */
  outcomes: { outcome: DrawOutcome; share: number; standardError: number }[];
  /** Quantiles of the stable equilibrium with both species, over the draws that have exactly one. */
  resting: { share: number; shares: number[]; x: number[]; y: number[] };
  /** Share of the draws in which a species fell below its level of `gone` at an output time; null without a level. */
  fellBelow: { first: number | null; second: number | null };
  failed: number;
}

export const DEFAULT_QUANTILES = [0.05, 0.25, 0.5, 0.75, 0.95] as const;
const BOTH = 1;
const FIRST = 2;
const SECOND = 4;
const NEITHER = 8;
const kindOf = (x: number, y: number): number => (x > 0 ? (y > 0 ? BOTH : FIRST) : y > 0 ? SECOND : NEITHER);

/** Index into DRAW_OUTCOMES of a set of stable resting places. */
function outcomeOf(mask: number, undecided: boolean): number {
  switch (mask) {
    case 0:
      return undecided ? 6 : 5;
    case BOTH:
      return 0;
    case FIRST:
      return 1;
    case SECOND:
      return 2;
    case NEITHER:
      return 3;
    default:
      return 4;
  }
}

interface Resting {
  outcome: number;
  x: number;
  y: number;
}

/** Reads the stable resting places of one draw after another. */
function makeRestingReader(): (spec: ModelSpec, k: Float64Array) => Resting {
  const table = makeEquilibriaTable();
  const resting: Resting = { outcome: 0, x: Number.NaN, y: Number.NaN };
  return (spec, k) => {
    let mask = 0;
    let nBoth = 0;
    let undecided = false;
    const seen = (x: number, y: number): void => {
      const kind = kindOf(x, y);
      mask |= kind;
      if (kind !== BOTH) return;
      nBoth += 1;
      resting.x = x;
      resting.y = y;
    };
    if (hasFastEquilibria(k)) {
      const isSigmoid = spec.interaction === 'consumer-resource' && spec.feeding.response === 'holling-3';
      equilibriaFast(k, isSigmoid, table);
      for (let i = 0; i < table.count; i++) {
        const code = table.classes[i]!;
        if (code < STABLE_CODES) seen(table.points[i * POINT_WIDTH]!, table.points[i * POINT_WIDTH + 1]!);
        else if (code === NON_HYPERBOLIC) undecided = true;
      }
      // The collapse of a ceiling that follows the resource rests at no equilibrium.
      if (k[L] !== 0 && mask === 0) undecided = true;
    } else {
      seeManaged(spec, (x, y, isCertain) => {
        if (isCertain) seen(x, y);
        else undecided = true;
      });
    }
    resting.outcome = outcomeOf(mask, undecided);
    if (nBoth !== 1) {
      resting.x = Number.NaN;
      resting.y = Number.NaN;
    }
    return resting;
  };
}

function timesOf({ span, samples = 201 }: Pick<EnsemblePlan, 'span' | 'samples'>): number[] {
  return equallySpaced(span, samples);
}

/** The start of a draw: the mean where there is no spread. */
function startOf(mean: number, cv: number | undefined, z: number): number {
  if (!cv || mean === 0) return mean;
  const { mu, sigma } = logMoments(mean, cv);
  return Math.exp(mu + sigma * z);
}

/** Paths of the draws by the fast way, by the general one where that gives up. */
function makeFollower(
  plan: EnsemblePlan
): (spec: ModelSpec, k: Float64Array, x: number, y: number, out: Float64Array, base: number) => boolean {
  const times = timesOf(plan);
  const padded = planarTimes(times);
  const [t0, t1] = plan.span;
  const rtol = plan.rtol ?? 1e-7;
  const integrator = makePlanarIntegrator({ rtol });
  return (spec, k, x, y, out, base) => {
    // A stocked species that starts at nothing, and one taken by the unit, want the general way's coordinates.
    if (isPlanar(k) && t1 > t0 && x > 0 && y > 0) {
      const kernel = PLANAR_KERNELS[planarFamilyOf(spec, k)];
      primePlanar(kernel, k, x, y, t1 - t0);
      if (integrator.run(kernel, k, x, y, t0, t1, padded, out, base).end === 'reached') return true;
    }
    const path = simulate(structuredClone(spec), { start: { x, y }, span: plan.span, times, rtol });
    for (let j = 0; j < times.length; j++) {
      out[base + 2 * j] = path.x[j] ?? Number.NaN;
      out[base + 2 * j + 1] = path.y[j] ?? Number.NaN;
    }
    return path.outcome.status === 'reached';
  };
}

/**
 * Works out some of the draws. @param from, to which, 0 <= from <= to <= plan.draws. @param shouldStop asked between draws.
 * @returns their results, or null when stopped. The same bytes however the draws are cut up.
 * @throws RangeError for a plan that makes no sense.
 */
export function runEnsembleChunk(
  plan: EnsemblePlan,
  from: number,
  to: number,
  shouldStop?: () => boolean
): EnsembleChunk | null {
  if (!(from >= 0 && to >= from && to <= plan.draws)) throw new RangeError('draws outside the ensemble');
  const { start } = plan;
  if (!(start.x >= 0) || !(start.y >= 0)) throw new RangeError('the start must be two numbers that are not negative');
  const nTimes = plan.samples ?? 201;
  const n = to - from;
  const draws = makeDraws(plan);
  const bound = bindModel(
    plan.spec,
    plan.rates.map((rate) => rate.path)
  );
  const read = makeRestingReader();
  const follow = makeFollower(plan);
  const k = new Float64Array(PLANAR_RATES);
  const value = new Float64Array(draws.n);
  const chunk: EnsembleChunk = {
    from,
    to,
    outcomes: new Uint8Array(n),
    resting: new Float64Array(2 * n),
    drawn: new Float64Array(draws.n * n),
    values: new Float64Array(2 * nTimes * n),
    lowest: new Float64Array(2 * n).fill(Infinity),
    failed: new Uint8Array(n)
  };
  for (let i = 0; i < n; i++) {
    if (shouldStop?.()) return null;
    const stream = randomStream(plan.seed, from + i);
    draws.write(stream, value);
    chunk.drawn.set(value, i * draws.n);
    bound.set(value);
    const x = startOf(start.x, start.cvX, stream.normal());
    const y = startOf(start.y, start.cvY, stream.normal());
    writePlanarRates(bound.spec, k);
    const resting = read(bound.spec, k);
    chunk.outcomes[i] = resting.outcome;
    chunk.resting[2 * i] = resting.x;
    chunk.resting[2 * i + 1] = resting.y;
    const base = 2 * nTimes * i;
    if (!follow(bound.spec, k, x, y, chunk.values, base)) chunk.failed[i] = 1;
    for (let j = 0; j < 2 * nTimes; j++) {
      const abundance = chunk.values[base + j]!;
      const at = 2 * i + (j & 1);
      if (abundance < chunk.lowest[at]!) chunk.lowest[at] = abundance;
    }
  }
  return chunk;
}

/** Share of the draws whose lowest abundance of one species is below a level. */
function shareBelow(
  chunks: readonly EnsembleChunk[],
  offset: number,
  level: number | undefined,
  n: number
): number | null {
  if (level === undefined) return null;
  let below = 0;
  for (const { lowest } of chunks) for (let i = offset; i < lowest.length; i += 2) if (lowest[i]! < level) below += 1;
  return below / n;
}

/**
 * Puts chunks together. @param chunks all draws of the plan, each once, in any order.
 * @throws RangeError when draws are missing or there twice.
 */
export function summariseEnsemble(plan: EnsemblePlan, chunks: readonly EnsembleChunk[]): EnsembleSummary {
  const ordered = [...chunks].sort((a, b) => a.from - b.from);
  let done = 0;
  for (const { from, to } of ordered) {
    if (from !== done) throw new RangeError('draws are missing, or there twice');
    done = to;
  }
  if (done !== plan.draws) throw new RangeError('draws are missing, or there twice');
  const shares = plan.quantiles ?? DEFAULT_QUANTILES;
  const n = plan.draws;
  const counts = DRAW_OUTCOMES.map(() => 0);
  const restX: number[] = [];
  const restY: number[] = [];
  let failed = 0;
  for (const chunk of ordered) {
    for (const code of chunk.outcomes) counts[code] = counts[code]! + 1;
    for (const flag of chunk.failed) failed += flag;
    for (let i = 0; i < chunk.resting.length; i += 2) {
      if (Number.isNaN(chunk.resting[i]!)) continue;
      restX.push(chunk.resting[i]!);
      restY.push(chunk.resting[i + 1]!);
    }
  }
  const quantiles = (list: number[]): number[] => {
    const sorted = Float64Array.from(list).sort();
    return shares.map((p) => quantileOf(sorted, sorted.length, p));
  };
  return {
    draws: n,
    times: timesOf(plan),
    bands: bandsOf(
      ordered.map((chunk) => chunk.values),
      plan.samples ?? 201,
      shares
    ),
    outcomes: DRAW_OUTCOMES.flatMap((outcome, i) => {
      const share = counts[i]! / n;
      return share > 0 ? [{ outcome, share, standardError: Math.sqrt((share * (1 - share)) / n) }] : [];
    }),
    resting: { share: restX.length / n, shares: [...shares], x: quantiles(restX), y: quantiles(restY) },
    fellBelow: {
      first: shareBelow(ordered, 0, plan.gone?.first, n),
      second: shareBelow(ordered, 1, plan.gone?.second, n)
    },
    failed
  };
}

/** Draws a chunk: small enough to stop within a moment, large enough not to count. */
export const ENSEMBLE_CHUNK = 250;

/** The whole ensemble, here and now. @returns null when stopped. See runEnsembleChunk. */
export function runEnsemble(plan: EnsemblePlan, shouldStop?: () => boolean): EnsembleSummary | null {
  const chunks: EnsembleChunk[] = [];
  for (let from = 0; from < plan.draws; from += ENSEMBLE_CHUNK) {
    const chunk = runEnsembleChunk(plan, from, Math.min(plan.draws, from + ENSEMBLE_CHUNK), shouldStop);
    if (chunk === null) return null;
    chunks.push(chunk);
  }
  return summariseEnsemble(plan, chunks);
}
