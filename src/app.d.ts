import type { Actor } from '$lib/server/context';

declare global {
  namespace App {
    interface Locals {
      requestId: string;
      actor: Actor | null;
      /** The signed-in browser's session; `id` is the secret of the cookie and never leaves the server. */
      session: { id: string; expiresAt: Date } | null;
      theme: 'light' | 'dark' | 'system';
      /** Set when the database went away while the page was made. */
      databaseAway: boolean;
    }
    interface Error {
      message: string;
      code?: string;
      requestId?: string;
    }
    namespace Superforms {
      interface Message {
        tone: 'error' | 'done';
        text: string;
      }
    }
  }
}

export {};
