import { z } from 'zod';
import { ModelDocument } from './model';

const finite = z.number({ error: 'Give a finite number.' });
const abundance = finite.nonnegative({ error: 'Must be 0 or more.' });

export const EquilibriaRequest = z.strictObject({ model: ModelDocument, includeInfeasible: z.boolean().optional() });

export const Threshold = z
  .strictObject({
    species: z.enum(['first', 'second']),
    below: finite.positive().optional(),
    above: finite.positive().optional()
  })
  .refine((t) => (t.below === undefined) !== (t.above === undefined), { error: 'Give either `below` or `above`.' });

export const TrajectoryRequest = z
  .strictObject({
    model: ModelDocument,
    start: z.strictObject({ x: abundance, y: abundance }),
    span: z.tuple([finite, finite]),
    samples: z.number().int().min(2).max(20_001).optional(),
    times: z.array(finite).min(1).max(20_001).optional(),
    rtol: finite.min(1e-13).max(1e-2).default(1e-8),
    atol: finite.min(0).max(1e6).default(1e-10),
    thresholds: z.array(Threshold).max(8).default([])
  })
  .superRefine((r, ctx) => {
    if (!(r.span[1] > r.span[0]))
      ctx.addIssue({ code: 'custom', path: ['span', 1], message: 'The span must end after it starts.' });
    if (r.samples !== undefined && r.times !== undefined)
      ctx.addIssue({ code: 'custom', path: ['times'], message: 'Give either `samples` or `times`, not both.' });
    if (r.samples === undefined && r.times === undefined)
      ctx.addIssue({ code: 'custom', path: ['samples'], message: 'Give `samples` or `times`.' });
    const [from, to] = r.span;
    const length = to - from;
    if (!Number.isFinite(length))
      ctx.addIssue({ code: 'custom', path: ['span', 1], message: 'The span is longer than a number can say.' });
    // Neighbouring times must differ, or the same one would be asked for twice.
    else if (r.samples !== undefined && length > 0) {
      const finest = Math.max(Math.max(Math.abs(from), Math.abs(to)) * 4 * Number.EPSILON, Number.MIN_VALUE * 2 ** 52);
      if (length / (r.samples - 1) < finest)
        ctx.addIssue({ code: 'custom', path: ['samples'], message: 'So many times do not fit into so short a span.' });
    }
    r.times?.forEach((t, i) => {
      if (t < r.span[0] || t > r.span[1] || (i > 0 && t <= (r.times?.[i - 1] ?? -Infinity)))
        ctx.addIssue({ code: 'custom', path: ['times', i], message: 'Times must rise and lie inside the span.' });
    });
  });
export type TrajectoryRequest = z.infer<typeof TrajectoryRequest>;
