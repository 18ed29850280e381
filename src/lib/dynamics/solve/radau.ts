/** Implicit steps for stiff problems: Radau IIA with five stages, simplified Newton iterations, collocation as dense output. */
import { errorNorm, type Tolerances } from './control';
import { factorise, substitute } from './linear';
import type { Problem } from './problem';
import { GAMMA, RADAU_ERROR, RADAU_INVERSE, RADAU_NODES, RADAU_POLYNOMIAL, STAGES } from './radauTableau';
import type { StepMethod } from './step';

const MOST_ITERATIONS = 12;
/** Newton stops when its next correction would be this small a part of the tolerance. */
const NEWTON_SHARE = 0.01;
/** Error reported for an iteration that does not converge: halves the step. */
const NOT_CONVERGED = 32;

/**
 * @param problem right-hand side and, if it has one, its Jacobian. @param n number of components.
 * @returns a method of order 9 whose error estimate and dense output have order 5; nothing is allocated in a step.
 * @source hairer1996 §IV.8
 */
export function makeRadau(problem: Problem, n: number, tolerances: Tolerances): StepMethod {
  const { rhs } = problem;
  const s = STAGES;
  const size = s * n;
  const slope = new Float64Array(n);
  const y1 = new Float64Array(n);
  const jacobian = new Float64Array(n * n);
  const big = new Float64Array(size * size);
  const bigPivots = new Int32Array(size);
  const small = new Float64Array(n * n);
  const smallPivots = new Int32Array(n);
  const z = new Float64Array(size);
  const delta = new Float64Array(size);
  const stage = new Float64Array(n);
  const stageSlope = new Float64Array(n);
  const error = new Float64Array(n);
  const polynomial = new Float64Array(size);
  const origin = new Float64Array(n);
  let lastStep = 0;
  let hasJacobian = false;
  let afterTrouble = true;
  let evaluations = 0;

  const fillJacobian = (t: number, y: Float64Array): void => {
    if (problem.jacobian) {
      problem.jacobian(t, y, jacobian);
      return;
    }
    for (let i = 0; i < n; i++) stage[i] = y[i]!;
    for (let j = 0; j < n; j++) {
      const width = Math.sqrt(Number.EPSILON) * Math.max(1e-5, Math.abs(y[j]!));
      stage[j] = y[j]! + width;
      rhs(t, stage, stageSlope);
      stage[j] = y[j]!;
      for (let i = 0; i < n; i++) jacobian[i * n + j] = (stageSlope[i]! - slope[i]!) / width;
    }
    evaluations += n;
  };

  const collocation = (c: Float64Array, from: Float64Array, theta: number, out: Float64Array): void => {
    for (let i = 0; i < n; i++) {
      let sum = 0;
      for (let m = s - 1; m >= 0; m--) sum = sum * theta + c[m * n + i]!;
      out[i] = from[i]! + theta * sum;
    }
  };

  const fillPolynomial = (y: Float64Array): void => {
    for (let i = 0; i < n; i++) origin[i] = y[i]!;
    for (let m = 0; m < s; m++) {
      for (let i = 0; i < n; i++) {
        let sum = 0;
        for (let j = 0; j < s; j++) sum += (RADAU_POLYNOMIAL[m * s + j]! * z[j * n + i]!) / RADAU_NODES[j]!;
        polynomial[m * n + i] = sum;
      }
    }
  };

  /** Stage increments by simplified Newton; a status rather than an exception. */
  const solveStages = (t: number, y: Float64Array, h: number): 'converged' | 'slow' | 'notFinite' => {
    for (let a = 0; a < s; a++) {
      for (let b = 0; b < s; b++) {
        const w = RADAU_INVERSE[a * s + b]! / h;
        for (let i = 0; i < n; i++) {
          for (let j = 0; j < n; j++) {
            big[(a * n + i) * size + b * n + j] = (i === j ? w : 0) - (a === b ? jacobian[i * n + j]! : 0);
          }
        }
      }
    }
    if (!factorise(big, size, bigPivots)) return 'slow';
    let before = 0;
    for (let iteration = 0; iteration < MOST_ITERATIONS; iteration++) {
      for (let a = 0; a < s; a++) {
        for (let i = 0; i < n; i++) stage[i] = y[i]! + z[a * n + i]!;
        rhs(t + RADAU_NODES[a]! * h, stage, stageSlope);
        for (let i = 0; i < n; i++) {
          let sum = 0;
          for (let b = 0; b < s; b++) sum += RADAU_INVERSE[a * s + b]! * z[b * n + i]!;
          delta[a * n + i] = stageSlope[i]! - sum / h;
        }
      }
      evaluations += s;
      substitute(big, size, bigPivots, delta);
      let sum = 0;
      for (let k = 0; k < size; k++) {
        z[k]! += delta[k]!;
        const i = k % n;
        const scale = tolerances.atol[i]! + tolerances.rtol[i]! * Math.abs(y[i]!);
        sum += scale > 0 ? (delta[k]! / scale) ** 2 : 0;
      }
      const norm = Math.sqrt(sum / size);
      if (!Number.isFinite(norm)) return 'notFinite';
      const rate = iteration > 0 ? norm / before : 0.5;
      // Corrections that no longer shrink but are already small have reached rounding.
      if (norm <= NEWTON_SHARE || (rate < 1 && (rate / (1 - rate)) * norm <= NEWTON_SHARE)) return 'converged';
      if (rate >= 1) return norm < 0.2 ? 'converged' : 'slow';
      before = norm;
    }
    return 'slow';
  };

  return {
    order: 5,
    y1,
    slope,
    get evaluations() {
      return evaluations;
    },
    begin(t, y) {
      rhs(t, y, slope);
      evaluations += 1;
      lastStep = 0;
      hasJacobian = false;
      afterTrouble = true;
    },
    attempt(t, y, h) {
      if (!hasJacobian) fillJacobian(t, y);
      hasJacobian = true;
      for (let a = 0; a < s; a++) {
        // The last collocation polynomial, carried on, is the first guess.
        if (lastStep !== 0) collocation(polynomial, origin, 1 + (RADAU_NODES[a]! * h) / lastStep, stage);
        for (let i = 0; i < n; i++) {
          const guess = lastStep === 0 ? 0 : stage[i]! - y[i]!;
          z[a * n + i] = Number.isFinite(guess) ? guess : 0;
        }
      }
      const status = solveStages(t, y, h);
      if (status !== 'converged') {
        lastStep = 0;
        afterTrouble = true;
        return status === 'slow' ? NOT_CONVERGED : NaN;
      }
      for (let i = 0; i < n; i++) y1[i] = y[i]! + z[(s - 1) * n + i]!;

      for (let i = 0; i < n; i++) {
        for (let j = 0; j < n; j++) small[i * n + j] = (i === j ? 1 : 0) - h * GAMMA * jacobian[i * n + j]!;
      }
      if (!factorise(small, n, smallPivots)) return NOT_CONVERGED;
      const estimate = (from: Float64Array): number => {
        for (let i = 0; i < n; i++) {
          let sum = h * GAMMA * from[i]!;
          for (let a = 0; a < s; a++) sum += RADAU_ERROR[a]! * z[a * n + i]!;
          error[i] = sum;
        }
        substitute(small, n, smallPivots, error);
        return errorNorm(error, y, y1, tolerances);
      };
      let norm = estimate(slope);
      if (norm > 1 && afterTrouble) {
        // Filters the stiff part out of the estimate once more, so that a fast transient does not hold the step down.
        for (let i = 0; i < n; i++) stage[i] = y[i]! + error[i]!;
        rhs(t, stage, stageSlope);
        evaluations += 1;
        norm = estimate(stageSlope);
      }
      afterTrouble = norm > 1;
      return norm;
    },
    prepare(y) {
      fillPolynomial(y);
    },
    interpolate(theta, out) {
      collocation(polynomial, origin, theta, out);
    },
    keep() {
      const c = polynomial.slice();
      const from = origin.slice();
      return (theta, out) => collocation(c, from, theta, out);
    },
    accept(tNext, y, h) {
      fillPolynomial(y);
      lastStep = h;
      rhs(tNext, y1, slope);
      evaluations += 1;
      hasJacobian = false;
    },
    stiffness() {
      return 0;
    }
  };
}
