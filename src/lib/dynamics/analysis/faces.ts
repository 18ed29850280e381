/**
 * The equilibria of a model as curves over one parameter, face by face of the quadrant: both present, one alone, neither.
 * On each face what is invariant has been divided out, so that curves of different faces pass through each other without
 * branching: where a species is lost, the curve of the inside runs smoothly on to negative abundances.
 */
import { coefficientsOf, type Coefficients } from '../model/coefficients';
import { compile } from '../model/compile';
import { withParameter } from '../model/parameters';
import type { ModelSpec, System } from '../model/spec';
import { dualRing, type Dual } from '../numeric/dual';
import { REAL } from '../numeric/ring';
import type { CurveEquations } from './continuation';
import { firstAlone, mapCoefficients, reducedEquations, secondAlone } from './elimination';

/** Which species are present. */
export type FaceKey = 'both' | 'first' | 'second' | 'neither';

/** The model at one value of the parameter. */
export interface Member {
  p: number;
  spec: ModelSpec;
  system: System;
}

/** A model as one of its parameters varies over a range. Curves are followed in q: the parameter or its logarithm. */
export interface Family {
  readonly q0: number;
  readonly q1: number;
  /** Parameter value of a q; the ends of the range exactly. */
  value(q: number): number;
  /** The q of a parameter value. */
  q(value: number): number;
  at(q: number): Member;
  /** Coefficients of the model at q; a constant that passes through 0 on its way does not change the equations' form. */
  coefficients(q: number): Coefficients<number>;
  /** Whether x = 0 (y = 0) maps into itself all over the range, and its factor is divided out. */
  readonly firstFree: boolean;
  readonly secondFree: boolean;
}

export interface Face {
  key: FaceKey;
  curve: CurveEquations;
  /** Abundances of a point; exactly 0 for what is absent. */
  plane(z: Float64Array): { x: number; y: number };
  q(z: Float64Array): number;
  /** The unknowns of a state. */
  unknowns(x: number, y: number, q: number): Float64Array;
  /** Determinant of the slopes by the state alone, zero where the curve turns back, with the size of its terms. */
  fold(z: Float64Array): { value: number; size: number };
}

const duals = dualRing(REAL);
/** A range over more than this factor is walked in the logarithm of the parameter. */
const WIDE = 20;

/** A copy of the model of which one number is changed in place: walking a curve asks for very many of them. */
function editable(spec: ModelSpec, path: string, p: number): { working: ModelSpec; set(p: number): void } {
  const working = structuredClone(withParameter(spec, path, p));
  const keys = path.split('.');
  const name = keys.pop() ?? '';
  let holder = working as unknown as Record<string, unknown>;
  for (const key of keys) holder = holder[key] as Record<string, unknown>;
  return {
    working,
    set(value) {
      holder[name] = value;
    }
  };
}

export function familyOf(spec: ModelSpec, path: string, [p0, p1]: readonly [number, number]): Family {
  const logarithmic = p0 > 0 && p1 / p0 > WIDE;
  const [q0, q1] = logarithmic ? [Math.log(p0), Math.log(p1)] : [p0, p1];
  const value = (q: number): number => {
    // The ends are given back as they came.
    if (q === q0) return p0;
    if (q === q1) return p1;
    return logarithmic ? Math.exp(q) : q;
  };
  const varied = (species: 'first' | 'second'): boolean =>
    path === `${species}.stocking` || path === `${species}.removal.quota`;
  const untouched = (species: 'first' | 'second'): boolean => {
    const { stocking = 0, removal } = spec[species];
    return !varied(species) && stocking === (removal?.quota ?? 0);
  };
  let last: Member | null = null;
  const firstFree = untouched('first');
  const secondFree = untouched('second');
  const { working, set } = editable(spec, path, p0);
  return {
    q0,
    q1,
    value,
    q: (p) => (logarithmic ? Math.log(p) : p),
    firstFree,
    secondFree,
    coefficients(q) {
      set(value(q));
      const k = coefficientsOf(REAL, working);
      if (!firstFree && k.s1 === 0) k.s1 = Number.MIN_VALUE;
      if (!secondFree && k.s2 === 0) k.s2 = Number.MIN_VALUE;
      return k;
    },
    at(q) {
      const p = value(q);
      if (last?.p === p) return last;
      const member = withParameter(spec, path, p);
      last = { p, spec: member, system: compile(member) };
      return last;
    }
  };
}

/** Step of the central difference by the parameter: these slopes only steer, values alone decide where a curve lies. */
const STEP = 1e-6;

function stepAt(family: Family, q: number): number {
  return STEP * (Math.abs(q) || Math.abs(family.q1 - family.q0));
}

function bothPresent(family: Family, sizeX: number, sizeY: number): Face {
  const values = (k: Coefficients<number>, x: number, y: number) => reducedEquations(REAL, k, x, y);
  const dualsAt = (z: Float64Array): [Dual<number>, Dual<number>] => {
    const k = mapCoefficients(family.coefficients(z[2]!), duals.lift);
    return reducedEquations(duals, k, { v: z[0]!, dx: 1, dy: 0 }, { v: z[1]!, dx: 0, dy: 1 });
  };
  const range = Math.abs(family.q1 - family.q0);
  return {
    key: 'both',
    plane: (z) => ({ x: z[0]!, y: z[1]! }),
    q: (z) => z[2]!,
    unknowns: (x, y, q) => Float64Array.of(x, y, q),
    curve: {
      n: 2,
      evaluate(z, out, slopes) {
        const [g1, g2] = dualsAt(z);
        const h = stepAt(family, z[2]!);
        const ahead = values(family.coefficients(z[2]! + h), z[0]!, z[1]!);
        const behind = values(family.coefficients(z[2]! - h), z[0]!, z[1]!);
        out[0] = g1.v;
        out[1] = g2.v;
        slopes.set([g1.dx, g1.dy, (ahead[0] - behind[0]) / (2 * h), g2.dx, g2.dy, (ahead[1] - behind[1]) / (2 * h)]);
      },
      scale(z, out) {
        out[0] = Math.max(sizeX, Math.abs(z[0]!));
        out[1] = Math.max(sizeY, Math.abs(z[1]!));
        out[2] = range;
      }
    },
    fold(z) {
      const [g1, g2] = dualsAt(z);
      const [a, b] = [g1.dx * g2.dy, g1.dy * g2.dx];
      return { value: a - b, size: Math.abs(a) + Math.abs(b) };
    }
  };
}

function oneAlone(family: Family, key: 'first' | 'second', size: number): Face {
  const equation = key === 'first' ? firstAlone : secondAlone;
  const at = (q: number, n: number): { value: number; slope: number; size: number } => {
    const c = equation(REAL, family.coefficients(q));
    let value = 0;
    let slope = 0;
    let terms = 0;
    for (let i = c.length - 1; i >= 0; i--) {
      slope = slope * n + value;
      value = value * n + c[i]!;
      if (i > 0) terms += Math.abs(i * c[i]! * n ** (i - 1));
    }
    return { value, slope, size: terms };
  };
  const range = Math.abs(family.q1 - family.q0);
  return {
    key,
    plane: (z) => (key === 'first' ? { x: z[0]!, y: 0 } : { x: 0, y: z[0]! }),
    q: (z) => z[1]!,
    unknowns: (x, y, q) => Float64Array.of(key === 'first' ? x : y, q),
    curve: {
      n: 1,
      evaluate(z, out, slopes) {
        const here = at(z[1]!, z[0]!);
        const h = stepAt(family, z[1]!);
        out[0] = here.value;
        slopes[0] = here.slope;
        slopes[1] = (at(z[1]! + h, z[0]!).value - at(z[1]! - h, z[0]!).value) / (2 * h);
      },
      scale(z, out) {
        out[0] = Math.max(size, Math.abs(z[0]!));
        out[1] = range;
      }
    },
    fold(z) {
      const { slope, size: terms } = at(z[1]!, z[0]!);
      return { value: slope, size: terms };
    }
  };
}

/** Both absent: no unknown but the parameter, written as the curve n = 0 so that it is walked like the others. */
function neitherPresent(family: Family): Face {
  const range = Math.abs(family.q1 - family.q0);
  return {
    key: 'neither',
    plane: () => ({ x: 0, y: 0 }),
    q: (z) => z[1]!,
    unknowns: (_, __, q) => Float64Array.of(0, q),
    curve: {
      n: 1,
      evaluate(z, out, slopes) {
        out[0] = z[0]!;
        slopes.set([1, 0]);
      },
      scale(_, out) {
        out[0] = 1;
        out[1] = range;
      }
    },
    fold: () => ({ value: 1, size: 1 })
  };
}

/**
 * A face of a family.
 * @param sizeX, sizeY abundances that count as large, positive
 * @returns the curve of its equilibria over q, not confined to the quadrant. Never throws.
 */
export function faceOf(family: Family, key: FaceKey, sizeX: number, sizeY: number): Face {
  switch (key) {
    case 'both':
      return bothPresent(family, sizeX, sizeY);
    case 'first':
      return oneAlone(family, 'first', sizeX);
    case 'second':
      return oneAlone(family, 'second', sizeY);
    case 'neither':
      return neitherPresent(family);
  }
}

/** The face on which an equilibrium lies; one at 0 that nothing keeps there belongs to the equations of the inside. */
export function faceKeyOf(family: Family, x: number, y: number): FaceKey {
  const firstAbsent = family.firstFree && x === 0;
  const secondAbsent = family.secondFree && y === 0;
  if (firstAbsent && secondAbsent) return 'neither';
  if (firstAbsent) return 'second';
  return secondAbsent ? 'first' : 'both';
}
