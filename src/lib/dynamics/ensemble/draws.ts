/** Uncertain rates as draws: log-normal, with a given mean and coefficient of variation, together or apart. */
import { withParameter } from '../model/parameters';
import type { ModelSpec } from '../model/spec';
import type { RandomStream } from '../numeric/random';

/** A number of the model that is known with a spread. */
export interface UncertainRate {
  /** Where it stands, e.g. `first.growth.r`. */
  path: string;
  /** Arithmetic mean, >= 0, in the study's units; a mean of 0 stays 0. */
  mean: number;
  /** Standard deviation over mean, >= 0; left out where a covariance is given. */
  cv?: number;
}

export interface DrawPlan {
  rates: readonly UncertainRate[];
  /** Covariance of the logarithms, in the order of `rates`, as a fit gives it; the spreads are then its diagonal. */
  logCovariance?: readonly (readonly number[])[];
}

/** What `makeDraws` hands out: values of one draw, in the order of the plan. */
export interface Draws {
  readonly n: number;
  /** Writes n values. A stream gives the same values every time. */
  write(stream: RandomStream, out: Float64Array): void;
}

/** Negative pivots down to this share of the diagonal are rounding in a matrix that is singular. */
const SINGULAR = 1e-10;

/**
 * Lower triangle L with L L' = matrix, row by row.
 * @throws RangeError when the matrix is not square, symmetric and free of negative directions.
 * @source golub2013 §4.2 (written out for a semi-definite matrix: a zero pivot leaves its column empty)
 */
export function cholesky(matrix: readonly (readonly number[])[]): Float64Array {
  const n = matrix.length;
  const lower = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    const row = matrix[i]!;
    if (row.length !== n) throw new RangeError('a covariance must be square');
    for (let j = 0; j <= i; j++) {
      const value = row[j]!;
      const mirror = matrix[j]![i]!;
      const size = Math.sqrt(Math.abs(row[i]! * matrix[j]![j]!));
      if (!Number.isFinite(value) || Math.abs(value - mirror) > SINGULAR * size) {
        throw new RangeError('a covariance must be symmetric and finite');
      }
      let rest = value;
      for (let m = 0; m < j; m++) rest -= lower[i * n + m]! * lower[j * n + m]!;
      if (i === j) {
        if (rest < -SINGULAR * Math.abs(value)) throw new RangeError('a covariance must not have negative directions');
        lower[i * n + i] = rest > SINGULAR * Math.abs(value) ? Math.sqrt(rest) : 0;
      } else {
        const pivot = lower[j * n + j]!;
        if (pivot === 0 && Math.abs(rest) > Math.sqrt(SINGULAR) * size) {
          throw new RangeError('a covariance must not have negative directions');
        }
        lower[i * n + j] = pivot === 0 ? 0 : rest / pivot;
      }
    }
  }
  return lower;
}

/** Logarithmic mean and standard deviation of a log-normal number: sigma^2 = ln(1 + cv^2), mu = ln mean - sigma^2/2. */
export function logMoments(mean: number, cv: number): { mu: number; sigma: number } {
  const variance = Math.log1p(cv * cv);
  return { mu: Math.log(mean) - variance / 2, sigma: Math.sqrt(variance) };
}

/**
 * @param plan rates and how they spread. @returns draws that allocate nothing.
 * @throws RangeError for a mean or spread that is negative or not finite, or a covariance that is none.
 */
export function makeDraws({ rates, logCovariance }: DrawPlan): Draws {
  const n = rates.length;
  const mu = new Float64Array(n);
  if (logCovariance !== undefined && logCovariance.length !== n) {
    throw new RangeError('a covariance needs a row for each rate');
  }
  const lower = logCovariance ? cholesky(logCovariance) : new Float64Array(n * n);
  rates.forEach(({ path, mean, cv }, i) => {
    if (!(mean >= 0) || !(mean < Infinity)) throw new RangeError(`the mean of ${path} must be 0 or more`);
    if (logCovariance) mu[i] = Math.log(mean) - logCovariance[i]![i]! / 2;
    else {
      if (cv === undefined || !(cv >= 0) || !(cv < Infinity))
        throw new RangeError(`the spread of ${path} must be 0 or more`);
      const moments = logMoments(mean, cv);
      mu[i] = moments.mu;
      lower[i * n + i] = moments.sigma;
    }
  });
  const isDiagonal = logCovariance === undefined;
  const z = new Float64Array(n);
  return {
    n,
    write(stream, out) {
      for (let i = 0; i < n; i++) z[i] = stream.normal();
      for (let i = 0; i < n; i++) {
        let deviation = 0;
        for (let j = isDiagonal ? i : 0; j <= i; j++) deviation += lower[i * n + j]! * z[j]!;
        // A mean of 0 has a logarithm of minus infinity and stays 0; a spread of 0 gives the mean back as it is.
        out[i] = deviation === 0 && lower[i * n + i] === 0 ? rates[i]!.mean : Math.exp(mu[i]! + deviation);
      }
    }
  };
}

/** A model whose numbers at some paths are overwritten in place, again and again. */
export interface BoundModel {
  /** Always the same object: read it, or copy it, before the next call. */
  readonly spec: ModelSpec;
  set(values: Float64Array): void;
}

type Json = { [key: string]: unknown };

/**
 * A copy of a model bound to paths. @param paths those that parametersOf lists, each once.
 * @throws RangeError when the model has no such parameter, or one is named twice.
 */
export function bindModel(spec: ModelSpec, paths: readonly string[]): BoundModel {
  if (new Set(paths).size < paths.length) throw new RangeError('a rate is named twice');
  // Written once as it should be, so that optional parts exist; then found again in the copy.
  const bound = structuredClone(paths.reduce((model, path) => withParameter(model, path, 0), spec));
  const places = paths.map((path) => {
    const keys = path.split('.');
    const last = keys.pop() ?? '';
    const parent = keys.reduce<Json>((value, key) => value[key] as Json, bound as unknown as Json);
    return { parent, last };
  });
  return {
    spec: bound,
    set(values) {
      for (let i = 0; i < places.length; i++) places[i]!.parent[places[i]!.last] = values[i]!;
    }
  };
}
