import { z } from 'zod';
import { ratePaths } from './content';

/** What a comment can hang on, and what it asks for. Shared by forms and the API. */
export const anchorKinds = ['study', 'rate', 'point', 'part'] as const;
export type AnchorKind = (typeof anchorKinds)[number];
export const commentKinds = ['must fix', 'question', 'note'] as const;
export type CommentKind = (typeof commentKinds)[number];
export const partKeys = [
  'surveys',
  'rates',
  'model',
  'equilibria',
  'trajectories',
  'levers',
  'risk',
  'review',
  'report'
] as const;

export const Anchor = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('study') }),
  z.strictObject({ kind: z.literal('rate'), key: z.enum(ratePaths, { error: 'Choose a rate of the model.' }) }),
  z.strictObject({
    kind: z.literal('point'),
    key: z.string().regex(/^[A-Z]$/, { error: 'A point is named by its letter in the table.' })
  }),
  z.strictObject({ kind: z.literal('part'), key: z.enum(partKeys, { error: 'Choose a part of the study.' }) })
]);
export type Anchor = z.infer<typeof Anchor>;

const body = z
  .string({ error: 'Write a comment.' })
  .trim()
  .min(1, { error: 'Write a comment.' })
  .max(4000, { error: 'Keep a comment under 4000 characters.' });
const kind = z.enum(commentKinds, { error: 'Say whether this must be fixed, is a question or is a note.' });

export const NewThread = z.strictObject({ anchor: Anchor, kind, body });
export type NewThread = z.infer<typeof NewThread>;
export const NewReply = z.strictObject({ kind: kind.default('note'), body });
export type NewReply = z.infer<typeof NewReply>;
