/**
 * Populations of whole individuals with known chances. Closed forms (linear birth and death: kendall1948; pure death and
 * stocking: elementary) or exact recursions for first passages (logistic birth and death: nasell2001), worked out with 60
 * digits and checked by the master equation; two competitors by a linear solve on states 1 to 78 squared.
 */
import type { ModelSpec } from '$lib/dynamics';
import type { Turnover } from '$lib/dynamics/ensemble/eventRates';

/** A second species that is not there: its start is 0. */
const absent = { growth: { kind: 'exponential', r: 0.1 } } as const;
const apart = { form: 'encounters', b12: 0, b21: 0 } as const;
const alone = (first: Extract<ModelSpec, { interaction: 'competition' }>['first']): ModelSpec => ({
  interaction: 'competition',
  first,
  second: absent,
  competition: apart
});

/** Births at 0.6 n, deaths at 0.4 n, from 3. */
export const linear = {
  id: 'S-STO-01',
  spec: alone({ growth: { kind: 'exponential', r: 0.6 - 0.4 } }),
  turnover: { first: 0.4 } satisfies Turnover,
  start: 3,
  at: [
    { t: 1, extinct: 0.018837186456971154, mean: 3.6642082744805093, variance: 4.056329092216507 },
    { t: 5, extinct: 0.1740691124419404, mean: 8.154845485377136, variance: 70.06161405707408 },
    { t: 10, extinct: 0.2543696683602733, mean: 22.16716829679195, variance: 708.1364090132039 },
    { t: 20, extinct: 0.2908362433228882, mean: 163.7944500994327, variance: 43895.39755512876 }
  ]
};

/** Deaths at 0.3 n, from 20. */
export const pureDeath = {
  id: 'S-STO-02',
  spec: alone({ growth: { kind: 'exponential', r: -0.3 } }),
  start: 20,
  meanTime: 11.992465523812273,
  sdTime: 4.211311809233454,
  by: [
    { t: 5, extinct: 0.006411582372634588 },
    { t: 10, extinct: 0.36009635921773175 },
    { t: 15, extinct: 0.7997762760472047 },
    { t: 25, extinct: 0.988996241614151 }
  ]
};

/** Births at n, deaths at 0.6 n + 0.4 n^2 / 12. */
export const logistic = {
  id: 'S-STO-03',
  spec: alone({ growth: { kind: 'logistic', r: 1 - 0.6, K: 12 } }),
  turnover: { first: 0.6 } satisfies Turnover,
  cases: [
    {
      start: 1,
      meanTime: 19.766818891538502,
      sdTime: 38.46084715837317,
      by: [
        { t: 5, extinct: 0.616787147505559, mean: 2.640774162848214 },
        { t: 20, extinct: 0.747181351586663, mean: 2.478341771389503 },
        { t: 60, extinct: 0.8870496562878671, mean: 1.1095287557866809 }
      ]
    },
    {
      start: 6,
      meanTime: 48.59465108292585,
      sdTime: 49.45454300442217,
      by: [
        { t: 5, extinct: 0.09935783684936225, mean: 8.17290324211482 },
        { t: 20, extinct: 0.34915564632943424, mean: 6.39032643398782 },
        { t: 60, extinct: 0.7090734472025995, mean: 2.8578166846249076 }
      ]
    },
    {
      start: 12,
      meanTime: 54.1371655930704,
      sdTime: 49.76623236929277,
      by: [
        { t: 5, extinct: 0.02734396854855628, mean: 10.076258102702598 },
        { t: 20, extinct: 0.26757848578278337, mean: 7.197063146970498 },
        { t: 60, extinct: 0.672522307743981, mean: 3.216864204076405 }
      ]
    }
  ]
};

/** Arrivals at 4, deaths at 0.5 n, from 0: Poisson at every time. */
export const stocked = {
  id: 'S-STO-04',
  spec: alone({ growth: { kind: 'exponential', r: -0.5 }, stocking: 4 }),
  at: [
    { t: 1, mean: 3.1477547222989326, zero: 0.04294844988743708 },
    { t: 3, mean: 6.214958718812562, zero: 0.0019992988821395524 },
    { t: 10, mean: 7.946096424007316, zero: 0.00035404149860360966 }
  ]
};

/** Births at 1.0 and 0.9 a head, deaths at 0.5 and crowding; from 8 and 8 until one is lost. */
export const competitors = {
  id: 'S-STO-05',
  spec: {
    interaction: 'competition',
    first: { growth: { kind: 'logistic', r: 1 - 0.5, K: 15 } },
    second: { growth: { kind: 'logistic', r: 0.9 - 0.5, K: 14 } },
    competition: { form: 'coefficients', alpha12: 1.1, alpha21: 0.9 }
  } satisfies ModelSpec,
  turnover: { first: 0.5, second: 0.5 } satisfies Turnover,
  start: 8,
  firstLostFirst: 0.5434877287688176,
  meanTime: 8.185652409587544,
  sdTime: 6.0182488797526945
};
