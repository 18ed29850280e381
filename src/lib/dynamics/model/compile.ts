import { REAL } from '../numeric/ring';
import { coefficientsOf, type Coefficients } from './coefficients';
import type { ModelSpec, System } from './spec';

type Kernels = Pick<System, 'rhs' | 'jacobian' | 'perHead'>;

/** No Allee effect on either side: per-head rates are linear, and this is what ensembles call millions of times. */
function linearCompetition(k: Coefficients<number>): Kernels {
  const [p0, p1] = k.p;
  const [q0, q1] = k.q;
  const { c12, c21, s1, s2 } = k;
  return {
    rhs(x, y, out) {
      out[0] = x * (p0 + p1 * x - c12 * y) + s1;
      out[1] = y * (q0 + q1 * y - c21 * x) + s2;
    },
    jacobian(x, y, out) {
      out[0] = p0 + 2 * p1 * x - c12 * y;
      out[1] = -c12 * x;
      out[2] = -c21 * y;
      out[3] = q0 + 2 * q1 * y - c21 * x;
    },
    perHead(x, y, out) {
      out[0] = p0 + p1 * x - c12 * y;
      out[1] = q0 + q1 * y - c21 * x;
    }
  };
}

function cubicCompetition(k: Coefficients<number>): Kernels {
  const [p0, p1, p2] = k.p;
  const [q0, q1, q2] = k.q;
  const { c12, c21, s1, s2 } = k;
  return {
    rhs(x, y, out) {
      out[0] = x * (p0 + (p1 + p2 * x) * x - c12 * y) + s1;
      out[1] = y * (q0 + (q1 + q2 * y) * y - c21 * x) + s2;
    },
    jacobian(x, y, out) {
      out[0] = p0 + (2 * p1 + 3 * p2 * x) * x - c12 * y;
      out[1] = -c12 * x;
      out[2] = -c21 * y;
      out[3] = q0 + (2 * q1 + 3 * q2 * y) * y - c21 * x;
    },
    perHead(x, y, out) {
      out[0] = p0 + (p1 + p2 * x) * x - c12 * y;
      out[1] = q0 + (q1 + q2 * y) * y - c21 * x;
    }
  };
}

function proportionalFeeding(k: Coefficients<number>): Kernels {
  const [p0, p1, p2] = k.p;
  const [q0, q1] = k.q;
  const { a, e, s1, s2 } = k;
  const ea = e * a;
  return {
    rhs(x, y, out) {
      out[0] = x * (p0 + (p1 + p2 * x) * x - a * y) + s1;
      out[1] = y * (q0 + q1 * y + ea * x) + s2;
    },
    jacobian(x, y, out) {
      out[0] = p0 + (2 * p1 + 3 * p2 * x) * x - a * y;
      out[1] = -a * x;
      out[2] = ea * y;
      out[3] = q0 + 2 * q1 * y + ea * x;
    },
    perHead(x, y, out) {
      out[0] = p0 + (p1 + p2 * x) * x - a * y;
      out[1] = q0 + q1 * y + ea * x;
    }
  };
}

/** With u = 1/D: d(phi y/D)/dx = a y (1 + w y) u^2 and d(phi y/D)/dy = phi (1 + h phi) u^2. */
function saturatingFeeding(k: Coefficients<number>): Kernels {
  const [p0, p1, p2] = k.p;
  const [q0, q1] = k.q;
  const { a, h, w, e, s1, s2 } = k;
  const ah = a * h;
  return {
    rhs(x, y, out) {
      const u = a / (1 + ah * x + w * y);
      out[0] = x * (p0 + (p1 + p2 * x) * x - u * y) + s1;
      out[1] = y * (q0 + q1 * y + e * u * x) + s2;
    },
    jacobian(x, y, out) {
      const u = 1 / (1 + ah * x + w * y);
      const byX = a * y * (1 + w * y) * u * u;
      const byY = a * x * (1 + ah * x) * u * u;
      out[0] = p0 + (2 * p1 + 3 * p2 * x) * x - byX;
      out[1] = -byY;
      out[2] = e * byX;
      out[3] = q0 + 2 * q1 * y + e * byY;
    },
    perHead(x, y, out) {
      const u = a / (1 + ah * x + w * y);
      out[0] = p0 + (p1 + p2 * x) * x - u * y;
      out[1] = q0 + q1 * y + e * u * x;
    }
  };
}

function sigmoidFeeding(k: Coefficients<number>): Kernels {
  const [p0, p1, p2] = k.p;
  const [q0, q1] = k.q;
  const { a, h, w, e, s1, s2 } = k;
  const ah = a * h;
  return {
    rhs(x, y, out) {
      const u = (a * x) / (1 + ah * x * x + w * y);
      out[0] = x * (p0 + (p1 + p2 * x) * x - u * y) + s1;
      out[1] = y * (q0 + q1 * y + e * u * x) + s2;
    },
    jacobian(x, y, out) {
      const u = 1 / (1 + ah * x * x + w * y);
      const byX = 2 * a * x * y * (1 + w * y) * u * u;
      const byY = a * x * x * (1 + ah * x * x) * u * u;
      out[0] = p0 + (2 * p1 + 3 * p2 * x) * x - byX;
      out[1] = -byY;
      out[2] = e * byX;
      out[3] = q0 + 2 * q1 * y + e * byY;
    },
    perHead(x, y, out) {
      const u = (a * x) / (1 + ah * x * x + w * y);
      out[0] = p0 + (p1 + p2 * x) * x - u * y;
      out[1] = q0 + q1 * y + e * u * x;
    }
  };
}

/**
 * Adds -l y^2/x to the consumer. On y = 0 the term is nothing at any x; at x = 0 with y > 0 the ceiling is nil and the rate
 * is minus infinity, which the integrator reports rather than hides.
 */
function withLeslie(base: Kernels, leslie: number): Kernels {
  const { rhs, jacobian, perHead } = base;
  return {
    rhs(x, y, out) {
      rhs(x, y, out);
      if (y !== 0) out[1] = out[1]! - (leslie * y * y) / x;
    },
    jacobian(x, y, out) {
      jacobian(x, y, out);
      if (y === 0) return;
      const ratio = y / x;
      out[2] = out[2]! + leslie * ratio * ratio;
      out[3] = out[3]! - 2 * leslie * ratio;
    },
    perHead(x, y, out) {
      perHead(x, y, out);
      if (y !== 0) out[1] = out[1]! - (leslie * y) / x;
    }
  };
}

function kernelsOf(k: Coefficients<number>): Kernels {
  if (k.interaction === 'competition') {
    return k.p[2] === 0 && k.q[2] === 0 ? linearCompetition(k) : cubicCompetition(k);
  }
  const base =
    k.power === 2 ? sigmoidFeeding(k) : k.h === 0 && k.w === 0 ? proportionalFeeding(k) : saturatingFeeding(k);
  return k.leslie === 0 ? base : withLeslie(base, k.leslie);
}

/** Sum of absolute terms: the same coefficients with every sign made positive, gains and losses of r and effort apart. */
function magnitudeOf(spec: ModelSpec, k: Coefficients<number>): System['magnitude'] {
  const effort1 = spec.first.removal?.effort ?? 0;
  const effort2 = spec.second.removal?.effort ?? 0;
  const constant1 = (spec.first.stocking ?? 0) + (spec.first.removal?.quota ?? 0);
  const constant2 = (spec.second.stocking ?? 0) + (spec.second.removal?.quota ?? 0);
  const own2 = spec.second.growth ? spec.second.growth.r : ((spec.second as { mortality?: number }).mortality ?? 0);
  const p0 = Math.abs(spec.first.growth.r) + effort1;
  const q0 = Math.abs(own2) + effort2;
  const p1 = Math.abs(k.p[1]);
  const p2 = Math.abs(k.p[2]);
  const q1 = Math.abs(k.q[1]);
  const q2 = Math.abs(k.q[2]);
  const { a, h, w, e, c12, c21, leslie, power } = k;
  return (x, y, out) => {
    const phi = power === 2 ? a * x * x : a * x;
    const eaten = Math.abs((phi * y) / (1 + h * phi + w * y));
    const ax = Math.abs(x);
    const ay = Math.abs(y);
    const ceiling = leslie === 0 || y === 0 ? 0 : Math.abs((leslie * y * y) / x);
    out[0] = ax * (p0 + ax * (p1 + p2 * ax) + c12 * ay) + eaten + constant1;
    out[1] = ay * (q0 + ay * (q1 + q2 * ay) + c21 * ax) + e * eaten + ceiling + constant2;
  };
}

/**
 * Compiles a model document into functions that allocate nothing.
 * @param spec a model without issues (see checkModel); abundances and rates in the study's units
 * @returns the system; its functions never throw, and return non-finite numbers only outside the closed quadrant or at
 *   x = 0 under leslie growth
 */
export function compile(spec: ModelSpec): System {
  const k = coefficientsOf(REAL, spec);
  const kernels = kernelsOf(k);
  const untouched = (species: ModelSpec['first'] | ModelSpec['second']) =>
    (species.stocking ?? 0) === 0 && (species.removal?.quota ?? 0) === 0;
  return {
    spec,
    ...kernels,
    magnitude: magnitudeOf(spec, k),
    firstAxisInvariant: untouched(spec.first),
    secondAxisInvariant: untouched(spec.second)
  };
}
