import { z } from 'zod';
import { StudyContent } from './content';
import { interactionKinds, StudyQuestion, studyStates } from './study';

/** What the API answers, for its own description and for the tests that hold it to that description. */

const finite = z.number();
const species = z.enum(['first', 'second']);
const State = z.object({ x: finite, y: finite });
const stability = z.enum(['stable', 'unstable', 'neutral', 'undetermined']);

export const EquilibriumAnswer = z.object({
  x: finite,
  y: finite,
  feasible: z.boolean(),
  multiplicity: z.number().int().min(1),
  jacobian: z
    .tuple([z.tuple([finite, finite]), z.tuple([finite, finite])])
    .describe('Row i, column j: slope of equation i against abundance j; 1/time.'),
  trace: finite,
  determinant: finite,
  eigenvalues: z
    .tuple([z.object({ re: finite, im: finite }), z.object({ re: finite, im: finite })])
    .describe('Larger real part first.'),
  class: z.enum([
    'stable node',
    'unstable node',
    'saddle',
    'stable spiral',
    'unstable spiral',
    'centre',
    'stable star',
    'unstable star',
    'stable degenerate node',
    'unstable degenerate node',
    'non-hyperbolic'
  ]),
  stability,
  decidedBy: z.enum([
    'linearisation',
    'conserved quantity',
    'first Lyapunov coefficient',
    'centre manifold',
    'trapping argument',
    'motion along an axis',
    'normal form',
    'continuum',
    'undecided'
  ]),
  borderline: z.boolean(),
  returnTime: finite.nullable(),
  period: finite.nullable(),
  remark: z.string().nullable()
});

export const EquilibriaAnswer = z.object({
  equilibria: z.array(EquilibriumAnswer),
  continua: z.array(
    z.object({ from: State, to: State.nullable(), points: z.array(State), stability, remark: z.string() })
  ),
  absorbing: z.array(z.object({ x: finite, y: finite, held: z.array(species), stability, remark: z.string() })),
  complete: z.boolean().describe('True only when the search provably found every feasible equilibrium.'),
  completeness: z.string(),
  engine: z.string()
});

export const TrajectoryEventAnswer = z.object({
  t: finite,
  species,
  kind: z.enum(['fell below', 'rose above', 'ran out']),
  value: finite
});

export const CrossCheckAnswer = z.object({
  method: z.literal('odex'),
  largestRelativeDifference: finite.nullable(),
  reason: z.string().nullable()
});

export const TrajectoryAnswer = z.object({
  t: z.array(finite),
  x: z.array(finite),
  y: z.array(finite),
  events: z.array(TrajectoryEventAnswer),
  steps: z.object({ accepted: z.number().int(), rejected: z.number().int(), evaluations: z.number().int() }),
  crossCheck: CrossCheckAnswer,
  remark: z.string().nullable(),
  engine: z.string()
});

const Instant = z.string().describe('An instant in UTC, ISO 8601.');
const Person = z.object({ id: z.uuid(), name: z.string() });
const Names = z.object({ common: z.string(), scientific: z.string() });
const Verdict = z.object({ kind: z.string(), consequence: z.string(), sentence: z.string() });

export const StudyListAnswer = z.object({
  studies: z.array(
    z.object({
      id: z.uuid(),
      title: z.string(),
      place: z.string(),
      kind: z.enum(interactionKinds),
      species: z.object({ first: Names, second: Names }),
      state: z.enum(studyStates),
      verdict: Verdict,
      owner: Person,
      revision: z.number().int(),
      openThreads: z.number().int(),
      createdAt: Instant,
      changedAt: Instant,
      abilities: z.array(z.string())
    })
  ),
  total: z.number().int(),
  page: z.number().int(),
  pages: z.number().int(),
  pageSize: z.number().int()
});

export const StudyAnswer = z.object({
  id: z.uuid(),
  state: z.enum(studyStates),
  owner: Person,
  revision: z.object({
    number: z.number().int(),
    fingerprint: z.string(),
    savedAt: Instant,
    author: Person,
    summary: z.string()
  }),
  question: StudyQuestion,
  content: StudyContent,
  verdict: Verdict,
  abilities: z.array(z.string())
});

export const StudyPathsAnswer = z.object({
  studyId: z.uuid(),
  revision: z.number().int(),
  units: z.object({ time: z.string(), first: z.string(), second: z.string() }).describe('UCUM codes.'),
  paths: z.array(TrajectoryAnswer.extend({ label: z.string(), start: State }))
});

export const SavedAnswer = z.object({
  studyId: z.uuid(),
  revision: z.number().int(),
  fingerprint: z.string(),
  summary: z.string(),
  changed: z.array(
    z.object({ path: z.string(), label: z.string(), before: z.string().nullable(), after: z.string().nullable() })
  )
});

export const CommentAnswer = z.object({ threadId: z.uuid(), number: z.number().int() });
