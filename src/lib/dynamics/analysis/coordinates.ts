/**
 * The coordinates in which a model is integrated. An abundance that can never reach 0 is followed by its logarithm: it
 * stays positive by construction, and a dip to a millionth of an animal keeps its digits. One that a quota can exhaust
 * is followed as it is, and one that is absent, or held at 0 by its quota, stays exactly 0.
 */
import type { ModelSpec, SpeciesKey, System } from '../model/spec';
import type { Rhs } from '../solve/problem';

export type Form = 'log' | 'plain' | 'zero';
export type Forms = readonly [Form, Form];

export interface Coordinates {
  readonly forms: Forms;
  readonly rhs: Rhs;
  readonly jacobian: (t: number, z: Float64Array, out: Float64Array) => void;
  /** Abundances to coordinates, into `z` (length 2 at least). */
  fromPlane(x: number, y: number, z: Float64Array): void;
  /** Abundances (never negative) of a state. */
  x(z: Float64Array): number;
  y(z: Float64Array): number;
  /**
   * Tolerances for each coordinate such that abundances err by at most atol + rtol |n|. A logarithm is held to rtol alone,
   * which is the stricter: near extinction an absolute allowance would let the phase of the next outbreak slip.
   */
  tolerances(rtol: number, atol: number): { rtol: [number, number]; atol: [number, number] };
}

/** Stocking less quota of a species, abundance/time. */
export function netAdditionOf(spec: ModelSpec, species: SpeciesKey): number {
  const managed = spec[species];
  return (managed.stocking ?? 0) - (managed.removal?.quota ?? 0);
}

/**
 * The form that suits one species. @param n abundance >= 0 at the start. @param net stocking less quota.
 * @returns `zero` for an absent species that nothing brings back, which includes one whose quota exceeds its stocking.
 */
export function formFor(n: number, net: number): Form {
  if (n > 0) return net < 0 ? 'plain' : 'log';
  return net > 0 ? 'plain' : 'zero';
}

/**
 * Coordinates of a model in given forms.
 * @param system a compiled model. @param forms one form a species; a `log` species must start above 0.
 * @returns functions that allocate nothing. Never throws.
 */
export function coordinatesFor(system: System, forms: Forms): Coordinates {
  const fixed = coordinatesAt(system, forms);
  const { moveTo } = system;
  // Rates that stand still are not asked for the time: this is the innermost loop.
  if (!moveTo) return fixed;
  return {
    ...fixed,
    rhs(t, z, out) {
      moveTo(t);
      fixed.rhs(t, z, out);
    },
    jacobian(t, z, out) {
      moveTo(t);
      fixed.jacobian(t, z, out);
    }
  };
}

function coordinatesAt(system: System, forms: Forms): Coordinates {
  const n1 = netAdditionOf(system.spec, 'first');
  const n2 = netAdditionOf(system.spec, 'second');
  const [f1, f2] = forms;
  const perHead = new Float64Array(2);
  const slopes = new Float64Array(4);
  const x = (z: Float64Array): number => (f1 === 'log' ? Math.exp(z[0]!) : f1 === 'plain' ? Math.max(0, z[0]!) : 0);
  const y = (z: Float64Array): number => (f2 === 'log' ? Math.exp(z[1]!) : f2 === 'plain' ? Math.max(0, z[1]!) : 0);
  const rate = (form: Form, n: number, growth: number, net: number): number => {
    if (form === 'log') return net === 0 ? growth : growth + net / n;
    if (form === 'plain') return n > 0 ? n * growth + net : net;
    return 0;
  };
  const toForm = (form: Form, n: number): number => (form === 'log' ? Math.log(n) : form === 'plain' ? n : 0);

  return {
    forms,
    rhs(_, z, out) {
      const px = x(z);
      const py = y(z);
      system.perHead(px, py, perHead);
      out[0] = rate(f1, px, perHead[0]!, n1);
      out[1] = rate(f2, py, perHead[1]!, n2);
    },
    jacobian(_, z, out) {
      const px = x(z);
      const py = y(z);
      system.jacobian(px, py, slopes);
      system.perHead(px, py, perHead);
      const byX = f1 === 'log' ? px : f1 === 'plain' ? 1 : 0;
      const byY = f2 === 'log' ? py : f2 === 'plain' ? 1 : 0;
      const perX = f1 === 'log' ? 1 / Math.max(px, Number.MIN_VALUE * 2 ** 52) : f1 === 'plain' ? 1 : 0;
      const perY = f2 === 'log' ? 1 / Math.max(py, Number.MIN_VALUE * 2 ** 52) : f2 === 'plain' ? 1 : 0;
      out[0] = slopes[0]! * byX * perX - (f1 === 'log' ? rate(f1, px, perHead[0]!, n1) : 0);
      out[1] = slopes[1]! * byY * perX;
      out[2] = slopes[2]! * byX * perY;
      out[3] = slopes[3]! * byY * perY - (f2 === 'log' ? rate(f2, py, perHead[1]!, n2) : 0);
    },
    fromPlane(px, py, z) {
      z[0] = toForm(f1, px);
      z[1] = toForm(f2, py);
    },
    x,
    y,
    tolerances(rtol, atol) {
      // A trace that grows with |ln n| lets a species whose fate no longer matters, ln n = -10^6 and falling fast, go.
      const slack = Math.max(rtol * 1e-3, 4 * Number.EPSILON);
      return {
        rtol: [f1 === 'log' ? slack : rtol, f2 === 'log' ? slack : rtol],
        atol: [f1 === 'log' ? rtol : atol, f2 === 'log' ? rtol : atol]
      };
    }
  };
}
