import type { StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import type { PersonName } from '$lib/contracts/views';
import type { ModelSpec } from '$lib/dynamics';
import type { Issue, PartStatus, RateNeed } from '$lib/study';
import type { Context } from '../context';
import { Comment } from '../db/models/Comment';
import { StudyShare } from '../db/models/StudyShare';
import { Thread } from '../db/models/Thread';
import type { StudyAct } from '../policies/ability';
import { openStudy, readRevision } from '../studies/access';
import { assess, type StudyVerdict } from '../studies/assess';
import { readingOf, type ReadingView } from '../studies/readingOf';
import { surroundingsOf } from '../studies/surroundings';
import { peopleByName } from './peopleByName';
import { originOf } from './studyHistory';

export interface StudyOverviewView {
  id: string;
  state: 'open' | 'archived';
  question: StudyQuestion;
  content: StudyContent;
  /** Number of the latest revision: what a form sends back with a change. */
  revision: number;
  fingerprint: string;
  /** When and by whom that revision was saved, and what it changed. */
  savedAt: string;
  savedBy: PersonName;
  summary: string;
  /** When a person last changed anything, archiving included. */
  changedAt: string;
  createdAt: string;
  owner: PersonName;
  /** The study this is a copy of, for those who may read that too. */
  origin: { id: string; title: string } | null;
  abilities: StudyAct[];
  /** The nine parts of the rail. */
  parts: PartStatus[];
  verdict: StudyVerdict;
  model: ModelSpec | null;
  missing: RateNeed[];
  issues: Issue[];
  readings: { equilibria: ReadingView | null; trajectories: ReadingView | null };
  /** How many people have a share. */
  shares: number;
  threads: { open: number; mustFix: number };
}

/** Everything that the frame of a study needs, and its overview page. */
export async function studyOverview(context: Context, studyId: string): Promise<StudyOverviewView> {
  const { study, abilities } = await openStudy(context, studyId, 'study.read');
  const revision = await readRevision(study);
  const { question, content } = revision;
  const [around, shares, mustFix, person, origin, equilibria, trajectories] = await Promise.all([
    surroundingsOf(study.id),
    StudyShare.count({ where: { studyId: study.id } }),
    Comment.count({
      where: { kind: 'must fix' },
      include: [{ model: Thread, as: 'thread', where: { studyId: study.id, state: 'open' }, required: true }],
      distinct: true,
      col: 'thread_id'
    }),
    peopleByName([study.ownerId, revision.authorId]),
    originOf(context, study),
    readingOf(study.id, 'equilibria', question, content),
    readingOf(study.id, 'trajectories', question, content)
  ]);
  const { assembled, parts, verdict } = assess(question, content, around);
  const { model, missing, issues } = assembled;
  return {
    id: study.id,
    state: study.state,
    question,
    content,
    revision: revision.number,
    fingerprint: revision.fingerprint,
    savedAt: revision.createdAt.toISOString(),
    savedBy: person(revision.authorId),
    summary: revision.summary,
    changedAt: study.changedAt.toISOString(),
    createdAt: study.createdAt.toISOString(),
    owner: person(study.ownerId),
    origin,
    abilities,
    parts,
    verdict,
    model,
    missing,
    issues,
    readings: { equilibria, trajectories },
    shares,
    threads: { open: around.comments.open, mustFix }
  };
}
