import type { CommentKind } from '$lib/contracts/comment';

/** A thread as a page shows it. */
export interface ThreadShown {
  id: string;
  number: number;
  anchor: {
    kind: string;
    key: string;
    label: string;
    quote: string;
    revision: number;
    changedTo: string | null;
    hasChanged: boolean;
  };
  state: 'open' | 'resolved';
  kind: CommentKind;
  comments: readonly { id: string; author: { name: string }; body: string; at: string }[];
  canReply: boolean;
  canResolve: boolean;
}
