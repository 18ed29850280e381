import { z } from 'zod';
import { interactionKinds } from './study';

/**
 * What a study says about its model: the structure (which terms there are), the rates as people typed them, starting states
 * and run settings. Every save makes a new numbered revision that holds all of it; the model document is assembled from it
 * (`$lib/study/assemble`), never stored beside it.
 */

export const ModelStructure = z.strictObject({
  interaction: z.enum(interactionKinds),
  first: z.strictObject({
    growth: z.enum(['exponential', 'logistic', 'allee']),
    effort: z.boolean(),
    quota: z.boolean(),
    stocking: z.boolean()
  }),
  second: z.strictObject({
    /** Competition: exponential, logistic, allee. Consumer: mortality, logistic, leslie. */
    growth: z.enum(['exponential', 'logistic', 'allee', 'mortality', 'leslie']),
    selfLimitation: z.boolean(),
    effort: z.boolean(),
    quota: z.boolean(),
    stocking: z.boolean()
  }),
  competition: z.enum(['coefficients', 'encounters']),
  feeding: z.strictObject({
    response: z.enum(['holling-1', 'holling-2', 'holling-3']),
    interference: z.boolean()
  })
});
export type ModelStructure = z.infer<typeof ModelStructure>;

/** Every place a number can stand in the model document. */
export const ratePaths = [
  'first.growth.r',
  'first.growth.K',
  'first.growth.A',
  'first.removal.effort',
  'first.removal.quota',
  'first.stocking',
  'second.growth.r',
  'second.growth.K',
  'second.growth.A',
  'second.growth.g',
  'second.mortality',
  'second.selfLimitation',
  'second.removal.effort',
  'second.removal.quota',
  'second.stocking',
  'competition.alpha12',
  'competition.alpha21',
  'competition.b12',
  'competition.b21',
  'feeding.a',
  'feeding.h',
  'feeding.e',
  'feeding.interference'
] as const;
export type RatePath = (typeof ratePaths)[number];

export const sourceKinds = ['own survey', 'own trial', 'literature', 'judgement'] as const;

const finite = z.number({ error: 'Give a finite number.' });

/** In the typed unit, except `cv`, which is per cent of the value. `exact` is for a decision, such as a quota. */
export const Uncertainty = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('exact') }),
  z.strictObject({ kind: z.literal('se'), se: finite.nonnegative({ error: 'A standard error is 0 or more.' }) }),
  z.strictObject({
    kind: z.literal('cv'),
    percent: finite
      .nonnegative({ error: 'A CV is 0 % or more.' })
      .max(1000, { error: 'A CV above 1000 % says nothing.' })
  }),
  z.strictObject({ kind: z.literal('range'), low: finite, high: finite })
]);
export type Uncertainty = z.infer<typeof Uncertainty>;

export const RateEntry = z.strictObject({
  path: z.enum(ratePaths),
  /** The number as typed, in `unit`. */
  value: finite,
  /** A unit code that `$lib/study/units` can convert to the study's unit for this path, e.g. `/a`, `%/a` (yearly share), `har/{ind}/a`. */
  unit: z.string().min(1).max(60),
  /** `crowding`: the number is a of a n (K - n); r = a K. Only for the r of a logistic. */
  form: z.enum(['plain', 'crowding']).default('plain'),
  uncertainty: Uncertainty,
  source: z.strictObject({
    kind: z.enum(sourceKinds, { error: 'Choose what kind of source this is.' }),
    text: z
      .string()
      .trim()
      .min(1, { error: 'Name the source: a survey and date, a trial, a citation or a person in their role.' })
      .max(500)
  }),
  note: z.string().trim().max(1000).default(''),
  /** Why a plausibility warning is accepted. */
  overrideReason: z.string().trim().max(500).default('')
});
export type RateEntry = z.infer<typeof RateEntry>;

/** A starting state in the study's abundance units; the first in the list is today's counts. */
export const Start = z.strictObject({
  label: z.string().trim().min(1, { error: 'Name this start.' }).max(60),
  x: finite.nonnegative({ error: 'Must be 0 or more.' }),
  y: finite.nonnegative({ error: 'Must be 0 or more.' }),
  seX: finite.nonnegative().optional(),
  seY: finite.nonnegative().optional(),
  source: z.string().trim().max(300).default('')
});
export type Start = z.infer<typeof Start>;

export const RunSettings = z.strictObject({
  span: finite
    .positive({ error: 'The run must last longer than 0.' })
    .min(1e-6, { error: 'The run is too short.' })
    .max(1e6, { error: 'The run is too long.' }),
  samples: z.number().int().min(2).max(20_001),
  rtol: finite.min(1e-12, { error: 'At least 1e-12.' }).max(1e-2, { error: 'At most 0.01.' }),
  atol: finite.min(0).max(1),
  thresholds: z
    .array(
      z.strictObject({
        species: z.enum(['first', 'second']),
        below: finite.positive({ error: 'Must be above 0.' })
      })
    )
    .max(4)
});
export type RunSettings = z.infer<typeof RunSettings>;

export const Assumption = z.strictObject({
  key: z.string().max(60),
  accepted: z.boolean(),
  comment: z.string().trim().max(500).default('')
});

export const StudyContent = z.strictObject({
  schema: z.literal(1),
  structure: ModelStructure,
  rates: z.array(RateEntry).max(ratePaths.length),
  starts: z.array(Start).max(8),
  run: RunSettings,
  assumptions: z.array(Assumption).max(40).default([])
});
export type StudyContent = z.infer<typeof StudyContent>;
