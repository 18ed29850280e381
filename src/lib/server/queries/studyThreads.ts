import type { AnchorKind, CommentKind } from '$lib/contracts/comment';
import type { PersonName } from '$lib/contracts/views';
import type { Context } from '../context';
import { Comment } from '../db/models/Comment';
import { Thread } from '../db/models/Thread';
import { can } from '../policies/ability';
import { openStudy, readRevision } from '../studies/access';
import { anchorReader } from '../studies/quoteAnchor';
import { peopleByName } from './peopleByName';

export interface CommentView {
  id: string;
  author: PersonName;
  kind: CommentKind;
  body: string;
  /** The revision its author was looking at. */
  revision: number;
  at: string;
}
export interface ThreadView {
  id: string;
  /** The number in the margin. */
  number: number;
  anchor: {
    kind: AnchorKind;
    key: string;
    /** What it hangs on, in words. */
    label: string;
    /** What that read when the thread was opened, and at which revision. */
    quote: string;
    revision: number;
    /** What it reads now, where that differs; null where the thing is gone. */
    changedTo: string | null;
    hasChanged: boolean;
  };
  state: 'open' | 'resolved';
  /** The gravest kind among its comments. */
  kind: CommentKind;
  opener: PersonName;
  openedAt: string;
  resolvedBy: PersonName | null;
  resolvedAt: string | null;
  comments: CommentView[];
  canReply: boolean;
  canResolve: boolean;
}

const GRAVITY: readonly CommentKind[] = ['must fix', 'question', 'note'];

/** Every thread of a study, open ones first, each with its comments in order. */
export async function studyThreads(context: Context, studyId: string): Promise<ThreadView[]> {
  const { study, actor, subject } = await openStudy(context, studyId, 'study.read');
  const threads = await Thread.findAll({ where: { studyId: study.id }, order: [['number', 'ASC']] });
  if (threads.length === 0) return [];
  const [revision, comments] = await Promise.all([
    readRevision(study),
    Comment.findAll({ where: { threadId: threads.map(({ id }) => id) }, order: [['createdAt', 'ASC']] })
  ]);
  const person = await peopleByName([
    ...threads.flatMap(({ openerId, resolvedById }) => (resolvedById ? [openerId, resolvedById] : [openerId])),
    ...comments.map(({ authorId }) => authorId)
  ]);
  const read = anchorReader(revision.question, revision.content);
  const isOpen = study.state === 'open';
  const views = threads.map((thread): ThreadView => {
    const own = comments.filter(({ threadId }) => threadId === thread.id);
    const now = read(thread.anchorKind, thread.anchorKey);
    return {
      id: thread.id,
      number: thread.number,
      anchor: {
        kind: thread.anchorKind,
        key: thread.anchorKey,
        label: now.label,
        quote: thread.anchorQuote,
        revision: thread.anchorRevision,
        changedTo: now.reads,
        hasChanged: now.reads !== thread.anchorQuote
      },
      state: thread.state,
      kind: GRAVITY.find((kind) => own.some((comment) => comment.kind === kind)) ?? 'note',
      opener: person(thread.openerId),
      openedAt: thread.createdAt.toISOString(),
      resolvedBy: thread.resolvedById ? person(thread.resolvedById) : null,
      resolvedAt: thread.resolvedAt?.toISOString() ?? null,
      comments: own.map(({ id, authorId, kind, body, revision: number, createdAt }) => ({
        id,
        author: person(authorId),
        kind,
        body,
        revision: number,
        at: createdAt.toISOString()
      })),
      canReply: isOpen && thread.state === 'open' && can(actor, 'study.comment', subject),
      canResolve: isOpen && can(actor, 'study.resolve', { ...subject, openerId: thread.openerId })
    };
  });
  return views.sort((a, b) => Number(a.state === 'resolved') - Number(b.state === 'resolved') || a.number - b.number);
}
