/**
 * Seeded, splittable streams of chance. A stream is named by a seed and any number of whole numbers (which draw, which
 * species, which year), not by how much was drawn before it: work can be cut up in any way and still gives the same bytes.
 */

/** Chance in the shapes that simulations ask for. */
export interface RandomStream {
  /** Four words that move on with every draw; a kernel may draw from them itself. */
  readonly state: Int32Array;
  /** The next 32 bits, 0 to 2^32 - 1. */
  bits(): number;
  /** Uniform on [0, 1) with 53 bits. */
  uniform(): number;
  /** Standard normal. */
  normal(): number;
  /** Exponential of mean 1. */
  exponential(): number;
  /** exp(mu + sigma N). */
  lognormal(mu: number, sigma: number): number;
  /** Poisson of the given mean, >= 0; 0 when the mean is 0. */
  poisson(mean: number): number;
  /** Number of successes in n trials of probability p. */
  binomial(n: number, p: number): number;
  /** An independent stream, named within this one; drawing from either leaves the other as it was. */
  split(index: number): RandomStream;
}

/** Every bit of the answer depends on every bit of the argument. @source appleby2011 (the finalizer) */
function mix(word: number): number {
  let z = word | 0;
  z = Math.imul(z ^ (z >>> 16), 0x85ebca6b);
  z = Math.imul(z ^ (z >>> 13), 0xc2b2ae35);
  return z ^ (z >>> 16);
}

const GOLDEN = 0x9e3779b9;

/** Folds a whole number up to 2^53 into a name of four words, in place. */
export function foldName(name: Int32Array, index: number): void {
  const low = index | 0;
  const high = Math.floor(index / 4294967296) | 0;
  for (let i = 0; i < 4; i++) {
    const other = name[(i + 1) & 3]!;
    name[i] = mix(
      Math.imul(name[i]! + i, 0x2c1b3c6d) ^ mix(low + Math.imul(GOLDEN, i + 1)) ^ mix(high ^ other) ^ other
    );
  }
}

/**
 * Words of a name made into a state of the generator, which mixes slowly from a poor start: twelve words are thrown away.
 * @param state four words, overwritten
 */
export function startState(name: Int32Array, state: Int32Array): void {
  state.set(name);
  state[3] = state[3]! | 1;
  for (let i = 0; i < 12; i++) nextBits(state);
}

/** One step of the generator: three words of chaotic state and a counter, period at least 2^32. @source dotyHumphrey2010 */
export function nextBits(s: Int32Array): number {
  const a = s[0]!;
  const b = s[1]!;
  const c = s[2]!;
  const sum = (a + b + s[3]!) | 0;
  s[3] = (s[3]! + 1) | 0;
  s[0] = b ^ (b >>> 9);
  s[1] = (c + (c << 3)) | 0;
  s[2] = (((c << 21) | (c >>> 11)) + sum) | 0;
  return sum;
}

/**
 * Tables of a ziggurat: layers of equal area under a falling density f, f(0) = 1, the lowest with the tail beyond `edge`.
 * `x` are right edges from the outermost to 0, `f` the density there.
 */
export interface Ziggurat {
  x: Float64Array;
  f: Float64Array;
}

/** @param area of each layer. @param inverse of the density. @source marsagliaTsang2000 */
function ziggurat(
  edge: number,
  area: number,
  density: (x: number) => number,
  inverse: (f: number) => number
): Ziggurat {
  const layers = 256;
  const x = new Float64Array(layers + 1);
  const f = new Float64Array(layers + 1);
  // The lowest layer is as wide as its area needs, as if it had no tail.
  x[0] = area / density(edge);
  x[1] = edge;
  for (let i = 2; i < layers; i++) x[i] = inverse(density(x[i - 1]!) + area / x[i - 1]!);
  for (let i = 0; i <= layers; i++) f[i] = density(x[i]!);
  return { x, f };
}

/** Right edge of the lowest layer and area of 256 layers, for which the topmost closes at f = 1. */
export const NORMAL_EDGE = 3.6541528853610088;
const NORMAL_AREA = 0.00492867323399;
export const EXPONENTIAL_EDGE = 7.69711747013105;
const EXPONENTIAL_AREA = 0.003949659822581557;

export const NORMAL_ZIGGURAT = ziggurat(
  NORMAL_EDGE,
  NORMAL_AREA,
  (x) => Math.exp(-0.5 * x * x),
  (f) => Math.sqrt(-2 * Math.log(f))
);
export const EXPONENTIAL_ZIGGURAT = ziggurat(
  EXPONENTIAL_EDGE,
  EXPONENTIAL_AREA,
  (x) => Math.exp(-x),
  (f) => -Math.log(f)
);

/** Above these means numbers are found by rejection, in constant time, rather than by adding up probabilities. */
const POISSON_BY_REJECTION = 12;
const BINOMIAL_BY_REJECTION = 12;

const FACTORIALS = 128;
const LOG_FACTORIAL = new Float64Array(FACTORIALS);
for (let i = 2; i < FACTORIALS; i++) LOG_FACTORIAL[i] = LOG_FACTORIAL[i - 1]! + Math.log(i);

/** ln n!, n >= 0 whole; the series errs by less than 1e-14 beyond the table. @source abramowitzStegun1964 §6.1.41 */
export function logFactorial(n: number): number {
  if (n < FACTORIALS) return LOG_FACTORIAL[n]!;
  const x = n + 1;
  const r = 1 / (x * x);
  return (x - 0.5) * Math.log(x) - x + 0.9189385332046728 + (1 / 12 - r * (1 / 360 - r * (1 / 1260 - r / 1680))) / x;
}

/** @param name four words, not kept. */
function streamOf(name: Int32Array): RandomStream {
  const own = name.slice();
  const state = new Int32Array(4);
  startState(own, state);

  const bits = (): number => nextBits(state) >>> 0;
  const uniform = (): number => {
    const high = nextBits(state) >>> 5;
    return (high * 67108864 + (nextBits(state) >>> 6)) / 9007199254740992;
  };
  /** Never 0: what logarithms are taken of. */
  const positive = (): number => 1 - uniform();

  const normal = (): number => {
    const { x, f } = NORMAL_ZIGGURAT;
    for (;;) {
      const word = nextBits(state);
      const layer = word & 255;
      const sign = word & 256 ? -1 : 1;
      const z = uniform() * x[layer]!;
      if (z < x[layer + 1]!) return sign * z;
      if (layer === 0) {
        // The tail, by a pair of exponentials.
        let far: number;
        let gap: number;
        do {
          far = -Math.log(positive()) / NORMAL_EDGE;
          gap = -Math.log(positive());
        } while (2 * gap < far * far);
        return sign * (NORMAL_EDGE + far);
      }
      if (f[layer]! + uniform() * (f[layer + 1]! - f[layer]!) < Math.exp(-0.5 * z * z)) return sign * z;
    }
  };

  const exponential = (): number => {
    const { x, f } = EXPONENTIAL_ZIGGURAT;
    let before = 0;
    for (;;) {
      const layer = nextBits(state) & 255;
      const z = uniform() * x[layer]!;
      if (z < x[layer + 1]!) return before + z;
      // Beyond the edge an exponential starts anew.
      if (layer === 0) before += EXPONENTIAL_EDGE;
      else if (f[layer]! + uniform() * (f[layer + 1]! - f[layer]!) < Math.exp(-z)) return before + z;
    }
  };

  /** @source hormann1993 (transformed rejection with squeeze) */
  const poissonByRejection = (mean: number): number => {
    const root = Math.sqrt(mean);
    const b = 0.931 + 2.53 * root;
    const a = -0.059 + 0.02483 * b;
    const inverseAlpha = 1.1239 + 1.1328 / (b - 3.4);
    const squeeze = 0.9277 - 3.6224 / (b - 2);
    const logMean = Math.log(mean);
    for (;;) {
      const u = uniform() - 0.5;
      const v = positive();
      const us = 0.5 - Math.abs(u);
      const k = Math.floor(((2 * a) / us + b) * u + mean + 0.43);
      if (us >= 0.07 && v <= squeeze) return k;
      if (k < 0 || (us < 0.013 && v > us)) continue;
      const bound = Math.log((v * inverseAlpha) / (a / (us * us) + b));
      if (bound <= k * logMean - mean - logFactorial(k)) return k;
    }
  };

  const poisson = (mean: number): number => {
    if (!(mean > 0)) return 0;
    if (mean >= POISSON_BY_REJECTION) return poissonByRejection(mean);
    let u = uniform();
    let chance = Math.exp(-mean);
    let k = 0;
    while (u >= chance && k < 200) {
      u -= chance;
      k += 1;
      chance *= mean / k;
    }
    return k;
  };

  /** @source hormann1993b (transformed rejection with squeeze) */
  const binomialByRejection = (n: number, p: number): number => {
    const q = 1 - p;
    const spread = Math.sqrt(n * p * q);
    const b = 1.15 + 2.53 * spread;
    const a = -0.0873 + 0.0248 * b + 0.01 * p;
    const centre = n * p + 0.5;
    const alpha = (2.83 + 5.1 / b) * spread;
    const squeeze = 0.92 - 4.2 / b;
    const logOdds = Math.log(p / q);
    const mode = Math.floor((n + 1) * p);
    const atMode = logFactorial(mode) + logFactorial(n - mode);
    for (;;) {
      const u = uniform() - 0.5;
      let v = positive();
      const us = 0.5 - Math.abs(u);
      const k = Math.floor(((2 * a) / us + b) * u + centre);
      if (k < 0 || k > n) continue;
      if (us >= 0.07 && v <= squeeze) return k;
      v = Math.log((v * alpha) / (a / (us * us) + b));
      if (v <= atMode - logFactorial(k) - logFactorial(n - k) + (k - mode) * logOdds) return k;
    }
  };

  const binomial = (n: number, p: number): number => {
    if (n <= 0 || !(p > 0)) return 0;
    if (p >= 1) return n;
    if (p > 0.5) return n - binomial(n, 1 - p);
    if (n * p >= BINOMIAL_BY_REJECTION) return binomialByRejection(n, p);
    const odds = p / (1 - p);
    let chance = Math.exp(n * Math.log1p(-p));
    let u = uniform();
    let k = 0;
    while (u >= chance && k < n) {
      u -= chance;
      k += 1;
      chance *= (odds * (n - k + 1)) / k;
    }
    return k;
  };

  return {
    state,
    bits,
    uniform,
    normal,
    exponential,
    lognormal: (mu, sigma) => Math.exp(mu + sigma * normal()),
    poisson,
    binomial,
    split(index) {
      const child = own.slice();
      foldName(child, index);
      return streamOf(child);
    }
  };
}

/** The name of a seed; folding further numbers in gives the names of streams under it. */
export function seedName(seed: number): Int32Array {
  if (!Number.isSafeInteger(seed)) throw new RangeError('a seed must be a whole number');
  const name = Int32Array.of(0x243f6a88, 0x85a308d3 | 0, 0x13198a2e, 0x03707344);
  foldName(name, seed);
  return name;
}

/**
 * A stream. @param seed a whole number up to 2^53; @param indices further whole numbers that name it, such as which draw.
 * @returns a stream that is always the same for the same numbers, and unlike that of any others.
 * @throws RangeError when a number is not whole.
 */
export function randomStream(seed: number, ...indices: readonly number[]): RandomStream {
  const name = seedName(seed);
  for (const index of indices) {
    if (!Number.isSafeInteger(index)) throw new RangeError('an index must be a whole number');
    foldName(name, index);
  }
  return streamOf(name);
}
