import { createContext } from 'svelte';

/** Something that went well, said once; errors never come this way. */
export interface Toast {
  id: number;
  message: string;
  undo?: () => void | Promise<void>;
}

/** How long a toast stays unless it is held. */
const staysMs = 6000;

/** The toasts of one page tree. One is made in the root layout and handed down by context. */
export class Toasts {
  list = $state<Toast[]>([]);
  #next = 1;
  // Nothing is drawn from the timers, so they need no reactivity.
  // eslint-disable-next-line svelte/prefer-svelte-reactivity
  #timers = new Map<number, ReturnType<typeof setTimeout>>();

  /** Shows a message, with a way back where there is one. */
  show(message: string, undo?: Toast['undo']): void {
    const toast = { id: this.#next++, message, undo };
    this.list.push(toast);
    this.release(toast.id);
  }

  /** Keeps a toast while it is pointed at or has focus. */
  hold(id: number): void {
    clearTimeout(this.#timers.get(id));
  }

  release(id: number): void {
    this.hold(id);
    this.#timers.set(
      id,
      setTimeout(() => this.dismiss(id), staysMs)
    );
  }

  dismiss(id: number): void {
    this.hold(id);
    this.#timers.delete(id);
    this.list = this.list.filter((toast) => toast.id !== id);
  }

  async undo(toast: Toast): Promise<void> {
    this.dismiss(toast.id);
    await toast.undo?.();
  }
}

const [getToasts, setToasts] = createContext<Toasts>();

/** Called once, in the root layout. */
export function provideToasts(): Toasts {
  return setToasts(new Toasts());
}

/** The toasts of this page tree. Throws outside the root layout. Call while a component initialises. */
export const useToasts = getToasts;
