/**
 * A worker client in which the latest question settles all earlier ones: while one answer is being computed only the newest
 * waiting question is kept, so a slider never builds a queue and the picture is at most one answer behind the hand.
 */
export interface WorkerLike {
  postMessage(message: unknown): void;
  onmessage: ((event: MessageEvent) => void) | null;
  onerror: ((event: ErrorEvent) => void) | null;
  terminate(): void;
}

interface Answer<R> {
  id: number;
  result?: R;
  error?: string;
}

interface Waiting<Q, R> {
  id: number;
  question: Q;
  resolve: (r: R | null) => void;
  reject: (e: Error) => void;
}

export class SolverClient<Q, R> {
  #worker: WorkerLike;
  #running: Waiting<Q, R> | null = null;
  #next: Waiting<Q, R> | null = null;
  #count = 0;

  constructor(worker: WorkerLike) {
    this.#worker = worker;
    worker.onmessage = (event: MessageEvent<Answer<R>>) => this.#answered(event.data);
    worker.onerror = (event) => this.#failed(new Error(event.message || 'The preview could not be computed.'));
  }

  /** Resolves with the answer, or with null when a newer question has replaced this one. Rejects when the worker fails. */
  ask(question: Q): Promise<R | null> {
    return new Promise((resolve, reject) => {
      const waiting = { id: ++this.#count, question, resolve, reject };
      if (this.#running) {
        this.#next?.resolve(null);
        this.#next = waiting;
      } else this.#start(waiting);
    });
  }

  close(): void {
    this.#worker.terminate();
    this.#running?.resolve(null);
    this.#next?.resolve(null);
    this.#running = this.#next = null;
  }

  #start(waiting: Waiting<Q, R>): void {
    this.#running = waiting;
    this.#worker.postMessage({ id: waiting.id, question: waiting.question });
  }

  #answered(answer: Answer<R>): void {
    const done = this.#running;
    if (!done || done.id !== answer.id) return;
    this.#running = null;
    const next = this.#next;
    this.#next = null;
    if (next) this.#start(next);
    if (answer.error !== undefined) done.reject(new Error(answer.error));
    else done.resolve(answer.result ?? null);
  }

  #failed(error: Error): void {
    const done = this.#running;
    this.#running = null;
    const next = this.#next;
    this.#next = null;
    done?.reject(error);
    if (next) this.#start(next);
  }
}
