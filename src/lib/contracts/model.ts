import { z } from 'zod';
import type { ModelSpec } from '$lib/dynamics';

/**
 * The model document as it arrives on the wire. Shape and single-field ranges are checked here; rules that tie fields
 * together (A below K, alpha form needs logistic growth, …) are `checkModel` of the engine, so that they hold for every door.
 * Unknown fields are refused: nothing is guessed.
 */
const finite = z.number({ error: 'Give a finite number.' });
const positive = finite.positive({ error: 'Must be above 0.' });
const atLeastZero = finite.nonnegative({ error: 'Must be 0 or more.' });

const Exponential = z.strictObject({ kind: z.literal('exponential'), r: finite });
const Logistic = z.strictObject({ kind: z.literal('logistic'), r: positive, K: positive });
const Allee = z.strictObject({ kind: z.literal('allee'), r: positive, K: positive, A: positive });
const Leslie = z.strictObject({ kind: z.literal('leslie'), r: positive, g: positive });

export const Growth = z.discriminatedUnion('kind', [Exponential, Logistic, Allee]);
export const ConsumerGrowth = z.discriminatedUnion('kind', [Logistic, Leslie]);
export const Removal = z.strictObject({ effort: atLeastZero.optional(), quota: atLeastZero.optional() });
const managed = { removal: Removal.optional(), stocking: atLeastZero.optional() };

export const Species = z.strictObject({ growth: Growth, ...managed });
export const Consumer = z.strictObject({
  mortality: atLeastZero.optional(),
  growth: ConsumerGrowth.optional(),
  selfLimitation: atLeastZero.optional(),
  ...managed
});
export const Competition = z.discriminatedUnion('form', [
  z.strictObject({ form: z.literal('coefficients'), alpha12: atLeastZero, alpha21: atLeastZero }),
  z.strictObject({ form: z.literal('encounters'), b12: atLeastZero, b21: atLeastZero })
]);
export const Feeding = z.strictObject({
  response: z.enum(['holling-1', 'holling-2', 'holling-3']),
  a: positive,
  h: atLeastZero.optional(),
  e: atLeastZero,
  interference: atLeastZero.optional()
});

export const ModelDocument = z.discriminatedUnion('interaction', [
  z.strictObject({
    interaction: z.literal('competition'),
    first: Species,
    second: Species,
    competition: Competition
  }),
  z.strictObject({ interaction: z.literal('consumer-resource'), first: Species, second: Consumer, feeding: Feeding })
]) satisfies z.ZodType<ModelSpec>;
