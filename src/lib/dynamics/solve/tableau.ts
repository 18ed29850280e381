/**
 * Coefficients of the explicit pair of orders 5 and 4 with seven stages, the last of which is the first of the next step.
 * @source dormandPrince1980 (the pair); hairer1993 §II.5 table 5.2 and §II.6 (6.12) for the dense output; shampine1986.
 */

/** Nodes c, length 7: stage i is evaluated at t + c_i h. */
export const NODES = [0, 1 / 5, 3 / 10, 4 / 5, 8 / 9, 1, 1] as const;

export const A21 = 1 / 5;
export const A31 = 3 / 40;
export const A32 = 9 / 40;
export const A41 = 44 / 45;
export const A42 = -56 / 15;
export const A43 = 32 / 9;
export const A51 = 19372 / 6561;
export const A52 = -25360 / 2187;
export const A53 = 64448 / 6561;
export const A54 = -212 / 729;
export const A61 = 9017 / 3168;
export const A62 = -355 / 33;
export const A63 = 46732 / 5247;
export const A64 = 49 / 176;
export const A65 = -5103 / 18656;

/** Weights of order 5, also row 7 of the matrix (the second is 0). */
export const B1 = 35 / 384;
export const B3 = 500 / 1113;
export const B4 = 125 / 192;
export const B5 = -2187 / 6784;
export const B6 = 11 / 84;

/** Weights of order 5 less those of order 4: the error estimate. */
export const E1 = 71 / 57600;
export const E3 = -71 / 16695;
export const E4 = 71 / 1920;
export const E5 = -17253 / 339200;
export const E6 = 22 / 525;
export const E7 = -1 / 40;

/** Weights of the quartic correction of the dense output, which is of order 4 throughout the step. */
export const D1 = -12715105075 / 11282082432;
export const D3 = 87487479700 / 32700410799;
export const D4 = -10690763975 / 1880347072;
export const D5 = 701980252875 / 199316789632;
export const D6 = -1453857185 / 822651844;
export const D7 = 69997945 / 29380423;

/** Rows of the matrix, for the tests of the order conditions; the stepper uses the names above. */
export const MATRIX: readonly (readonly number[])[] = [
  [],
  [A21],
  [A31, A32],
  [A41, A42, A43],
  [A51, A52, A53, A54],
  [A61, A62, A63, A64, A65],
  [B1, 0, B3, B4, B5, B6]
];
export const WEIGHTS = [B1, 0, B3, B4, B5, B6, 0] as const;
export const ERROR_WEIGHTS = [E1, 0, E3, E4, E5, E6, E7] as const;
