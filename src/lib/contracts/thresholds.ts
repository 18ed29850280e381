import { z } from 'zod';
import { ModelDocument } from './model';

const finite = z.number({ error: 'Give a finite number.' });

export const ThresholdsRequest = z
  .strictObject({
    model: ModelDocument,
    parameter: z
      .string({ error: 'Name the parameter by its path, such as `first.removal.effort`.' })
      .min(1)
      .max(60)
      .describe(
        'Path of a number of the model document. One that may be left out counts as 0; the swept number itself may be left out of `model`.'
      ),
    range: z.tuple([finite, finite], { error: 'Give the first and the last value.' })
  })
  .superRefine(({ range: [first, last] }, ctx) => {
    if (!(last > first)) {
      ctx.addIssue({ code: 'custom', path: ['range', 1], message: 'The range must end above where it starts.' });
    }
  });
export type ThresholdsRequest = z.infer<typeof ThresholdsRequest>;

const column = z.array(z.number());

export const ThresholdsAnswer = z.object({
  parameter: z.string(),
  range: z.tuple([z.number(), z.number()]),
  branches: z
    .array(z.object({ parameter: column, x: column, y: column, stable: z.array(z.boolean()) }))
    .describe('Columns of equal length, one point a row, in order along the branch; not stable at a threshold itself.'),
  thresholds: z
    .array(
      z.object({
        kind: z.enum(['transcritical', 'saddle-node', 'hopf', 'homoclinic-suspected']),
        value: z.number(),
        x: z.number(),
        y: z.number(),
        criticality: z.enum(['supercritical', 'subcritical']).nullable()
      })
    )
    .describe('Strictly inside the range, ascending by value.'),
  complete: z
    .boolean()
    .describe('Every equilibrium at every seeded value is proven known and lies on a branch followed to its ends.'),
  completeness: z.string(),
  engine: z.string()
});
