/**
 * The text of the planar integrator, once for every family of right-hand sides. Written out rather than called: a closure
 * for the right-hand side costs twice as much as the arithmetic in it, and code made at run time is refused by the
 * application's content security policy.
 */

const tableau = {
  a: [
    [],
    [1 / 5],
    [3 / 40, 9 / 40],
    [44 / 45, -56 / 15, 32 / 9],
    [19372 / 6561, -25360 / 2187, 64448 / 6561, -212 / 729],
    [9017 / 3168, -355 / 33, 46732 / 5247, 49 / 176, -5103 / 18656],
    [35 / 384, 0, 500 / 1113, 125 / 192, -2187 / 6784, 11 / 84]
  ],
  error: [71 / 57600, 0, -71 / 16695, 71 / 1920, -17253 / 339200, 22 / 525, -1 / 40],
  dense: [
    -12715105075 / 11282082432,
    0,
    87487479700 / 32700410799,
    -10690763975 / 1880347072,
    701980252875 / 199316789632,
    -1453857185 / 822651844,
    69997945 / 29380423
  ]
};

/** Of the factor between steps: safety, least, most; and of the smallest squared error remembered. */
const logs = { SAFETY: Math.log2(0.9), SHRINK: Math.log2(0.2), GROW: Math.log2(10), MEMORY: Math.log2(1e-8) };

/** Where each rate stands in the vector that `planarRates.ts` writes. */
const slots = ['p0', 'p1', 'p2', 'q0', 'q1', 'q2', 'c', 'd', 'a', 'h', 'w', 'e', 'l', 's1', 's2'];

const feeding2 = 'a / (1 + ah * X + w * Y)';
const feeding3 = '(a * X) / (1 + ah * X * X + w * Y)';
const pair = (name, rates, u, first, second, note) => ({ name, rates, u, first, second, note });

/** X and Y stand for the state; `u` is worked out first and shared by both equations. */
export const families = [
  pair('Classical', ['p0', 'q0', 'c', 'd'], null, 'X * (p0 - c * Y)', 'Y * (q0 - d * X)', 'x (p0 - c y), y (q0 - d x)'),
  pair(
    'Linear',
    ['p0', 'p1', 'q0', 'q1', 'c', 'd'],
    null,
    'X * (p0 + p1 * X - c * Y)',
    'Y * (q0 + q1 * Y - d * X)',
    'x (p0 + p1 x - c y), y (q0 + q1 y - d x)'
  ),
  pair(
    'Cubic',
    ['p0', 'p1', 'p2', 'q0', 'q1', 'q2', 'c', 'd', 's1', 's2'],
    null,
    'X * (p0 + (p1 + p2 * X) * X - c * Y) + s1',
    'Y * (q0 + (q1 + q2 * Y) * Y - d * X) + s2',
    'x (p0 + p1 x + p2 x^2 - c y) + s1, y (q0 + q1 y + q2 y^2 - d x) + s2'
  ),
  pair(
    'Saturating',
    ['p0', 'p1', 'q0', 'a', 'h', 'e'],
    'a / (1 + ah * X)',
    'X * (p0 + p1 * X - u * Y)',
    'Y * (q0 + e * u * X)',
    'x (p0 + p1 x - u y), y (q0 + e u x), u = a / (1 + a h x)'
  ),
  pair(
    'Sigmoid',
    ['p0', 'p1', 'q0', 'a', 'h', 'e'],
    '(a * X) / (1 + ah * X * X)',
    'X * (p0 + p1 * X - u * Y)',
    'Y * (q0 + e * u * X)',
    'x (p0 + p1 x - u y), y (q0 + e u x), u = a x / (1 + a h x^2)'
  ),
  ...[
    ['Saturating', feeding2, 'a / (1 + a h x + w y)'],
    ['Sigmoid', feeding3, 'a x / (1 + a h x^2 + w y)']
  ].flatMap(([name, u, text]) => [
    pair(
      `Full${name}`,
      ['p0', 'p1', 'p2', 'q0', 'q1', 'a', 'h', 'w', 'e', 's1', 's2'],
      u,
      'X * (p0 + (p1 + p2 * X) * X - u * Y) + s1',
      'Y * (q0 + q1 * Y + e * u * X) + s2',
      `x (p0 + p1 x + p2 x^2 - u y) + s1, y (q0 + q1 y + e u x) + s2, u = ${text}`
    ),
    pair(
      `Ceiling${name}`,
      ['p0', 'p1', 'p2', 'q0', 'q1', 'a', 'h', 'w', 'e', 'l', 's1', 's2'],
      u,
      'X * (p0 + (p1 + p2 * X) * X - u * Y) + s1',
      'Y * (q0 + (q1 - l / X) * Y + e * u * X) + s2',
      `x (p0 + p1 x + p2 x^2 - u y) + s1, y (q0 + q1 y - l y/x + e u x) + s2, u = ${text}`
    )
  ])
];

/** k1 is f, g; k2 to k7 are f2, g2 and so on. */
const stageName = (letter, j) => (j === 0 ? letter : `${letter}${j + 1}`);
const combination = (weights, letter) =>
  weights
    .map((weight, j) => (weight === 0 ? null : `${weight} * ${stageName(letter, j)}`))
    .filter(Boolean)
    .join(' + ')
    .replaceAll('+ -', '- ');

function slopes(family, at, x, y) {
  const put = (text) => text.replaceAll('X', x).replaceAll('Y', y).replaceAll(/\bu\b/g, `u${at}`);
  const shared = family.u === null ? '' : `const u${at} = ${put(family.u)};\n`;
  return `${shared}const f${at} = ${put(family.first)};\nconst g${at} = ${put(family.second)};`;
}

function loads(family) {
  const lines = family.rates.map((rate) => `const ${rate} = k[${slots.indexOf(rate)}]!;`);
  if (family.rates.includes('h')) lines.push('const ah = a * h;');
  return lines.join('\n');
}

function stages(family) {
  return tableau.a
    .slice(1)
    .map((row, i) => {
      const at = i + 2;
      const name = at === 7 ? ['x1', 'y1'] : [`x${at}`, `y${at}`];
      return [
        `const ${name[0]} = x + h * (${combination(row, 'f')});`,
        `const ${name[1]} = y + h * (${combination(row, 'g')});`,
        slopes(family, at, name[0], name[1])
      ].join('\n');
    })
    .join('\n');
}

function stateKernel(family) {
  return `
/** ${family.note} */
function advance${family.name}(
  s: Float64Array,
  k: Float64Array,
  times: Float64Array,
  out: Float64Array,
  base: number,
  attempts: number
): PlanarStatus {
  ${loads(family)}
  const rtol = s[RTOL]!;
  const atol = s[ATOL]!;
  const end = s[END]!;
  const longest = s[LONGEST]!;
  let t = s[T]!;
  let size = s[SIZE]!;
  let x = s[X]!;
  let y = s[Y]!;
  let f = s[F]!;
  let g = s[G]!;
  let before = s[BEFORE]!;
  let most = s[MOST]!;
  let accepted = s[ACCEPTED]!;
  let next = s[NEXT]! | 0;
  let due = times[next]!;
  let status: PlanarStatus = 0;
  let edge = s[EDGE]!;
  const bits = BITS;
  const halves = HALVES;
  const high = HIGH;
  let left = attempts;
  for (; left > 0; left--) {
    const isLast = t + 1.01 * size >= end;
    const h = isLast ? end - t : size;
    ${stages(family)}
    const ex = (h * (${combination(tableau.error, 'f')})) / (atol + rtol * (x1 > x ? x1 : x));
    const ey = (h * (${combination(tableau.error, 'g')})) / (atol + rtol * (y1 > y ? y1 : y));
    const error = 0.5 * (ex * ex + ey * ey);
    bits[0] = error > 1e-24 ? error : 1e-24;
    const log = halves[high]! * 9.5367431640625e-7 - 1023;
    if (error <= 1 && x1 >= 0 && y1 >= 0) {
      const tNext = isLast ? end : t + h;
      if (due <= tNext) {
        const riseX = x1 - x;
        const riseY = y1 - y;
        const bulgeX = h * f - riseX;
        const bulgeY = h * g - riseY;
        const cubicX = riseX - h * f7 - bulgeX;
        const cubicY = riseY - h * g7 - bulgeY;
        const quarticX = h * (${combination(tableau.dense, 'f')});
        const quarticY = h * (${combination(tableau.dense, 'g')});
        const perH = 1 / h;
        do {
          const theta = (due - t) * perH;
          const rest = 1 - theta;
          const at = base + 2 * next;
          out[at] = x + theta * (riseX + rest * (bulgeX + theta * (cubicX + rest * quarticX)));
          out[at + 1] = y + theta * (riseY + rest * (bulgeY + theta * (cubicY + rest * quarticY)));
          next = (next + 1) | 0;
          due = times[next]!;
        } while (due <= tNext);
      }
      if (left === 1) {
        const dx = x1 - x6;
        const dy = y1 - y6;
        edge = (h * h * ((f7 - f6) * (f7 - f6) + (g7 - g6) * (g7 - g6))) / (dx * dx + dy * dy);
      }
      accepted += 1;
      t = tNext;
      x = x1;
      y = y1;
      f = f7;
      g = g7;
      if (isLast) {
        status = 1;
        break;
      }
      let v = ${logs.SAFETY} - 0.085 * log + 0.02 * before;
      v = v > most ? most : v < ${logs.SHRINK} ? ${logs.SHRINK} : v;
      most = ${logs.GROW};
      before = log > ${logs.MEMORY} ? log : ${logs.MEMORY};
      v *= 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      size = size > longest ? longest : size;
    } else {
      let v = error > 1 ? ${logs.SAFETY} - 0.085 * log : ${logs.SHRINK};
      v = (v < ${logs.SHRINK} ? ${logs.SHRINK} : v) * 0.25;
      const root = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
      const square = root * root;
      size = h * square * square;
      most = 0;
      if (!(size > s[SHORTEST]!)) {
        status = 2;
        break;
      }
    }
  }
  s[T] = t;
  s[SIZE] = size;
  s[X] = x;
  s[Y] = y;
  s[F] = f;
  s[G] = g;
  s[BEFORE] = before;
  s[MOST] = most;
  s[ACCEPTED] = accepted;
  s[NEXT] = next;
  s[EDGE] = edge;
  s[LEFT] = left;
  return status;
}

function slopes${family.name}(x: number, y: number, k: Float64Array, out: Float64Array): void {
  ${loads(family)}
  ${slopes(family, 1, 'x', 'y')}
  out[0] = f1;
  out[1] = g1;
}
`;
}

/** @returns the whole of `planarKernels.ts`, not yet formatted */
export function planarSource() {
  const names = families.map(({ name }) => name);
  const key = (name) => name[0].toLowerCase() + name.slice(1).replaceAll(/[A-Z]/g, (c) => `-${c.toLowerCase()}`);
  return `/**
 * Planar integrators, one a family of models, with the state, the stages and the tableau in local numbers. Written by
 * \`node scripts/planarKernels.mjs\` from \`scripts/lib/planarTemplate.mjs\`, which is the place to change; a test holds
 * the two together.
 *
 * \`advance\` makes up to \`attempts\` tries of a step and can be called again: the engine keeps optimised code for a short
 * loop that it enters often, not for one long loop, and the caller may stop in between.
 * @source dormandPrince1980, hairer1993 §II.4–6, gustafsson1991
 */

/** 0: more to do; 1: the end was reached; 2: the step became too small. */
export type PlanarStatus = 0 | 1 | 2;

export interface PlanarKernel {
  readonly family: PlanarFamily;
  /**
   * @param s state, PLANAR_STATE long. @param k rates. @param times output times in order, then Infinity.
   * @param out pairs of abundances, those of times[i] at base + 2 i.
   */
  advance(
    s: Float64Array,
    k: Float64Array,
    times: Float64Array,
    out: Float64Array,
    base: number,
    attempts: number
  ): PlanarStatus;
  slopes(x: number, y: number, k: Float64Array, out: Float64Array): void;
}

export type PlanarFamily = ${names.map((name) => `'${key(name)}'`).join(' | ')};

/** Places in the state of an integration. */
export const T = 0;
export const SIZE = 1;
export const X = 2;
export const Y = 3;
export const F = 4;
export const G = 5;
/** Binary logarithm of the last accepted squared error. */
export const BEFORE = 6;
/** Binary logarithm of the largest factor for the next step: 0 right after a rejection. */
export const MOST = 7;
export const ACCEPTED = 8;
/** Index of the next output time. */
export const NEXT = 9;
export const END = 10;
export const RTOL = 11;
export const ATOL = 12;
export const LONGEST = 13;
export const SHORTEST = 14;
/** Squared |h lambda| at the last step of the last call, an estimate. */
export const EDGE = 15;
/** Tries not used by the last call, and one more when it ended. */
export const LEFT = 16;
export const PLANAR_STATE = 17;

/** An error is read from its exponent and mantissa: a logarithm linear between powers of two is near enough for a step size. */
const BITS = new Float64Array(1);
const HALVES = new Int32Array(BITS.buffer);
const HIGH = new Uint8Array(new Uint32Array([1]).buffer)[0] === 1 ? 1 : 0;
/** What a fresh integration starts with in BEFORE and MOST. */
export const LOG_MEMORY = ${logs.MEMORY};
export const LOG_GROW = ${logs.GROW};

${families.map(stateKernel).join('')}

export const PLANAR_KERNELS: Readonly<Record<PlanarFamily, PlanarKernel>> = {
${names.map((name) => `'${key(name)}': { family: '${key(name)}', advance: advance${name}, slopes: slopes${name} }`).join(',\n')}
};
`;
}

/** The formatted file. @param {string} path where it will stand, which decides the formatting @returns {Promise<string>} */
export async function planarFile(path) {
  const { format, resolveConfig } = await import('prettier');
  return format(planarSource(), { ...(await resolveConfig(path)), filepath: path });
}
