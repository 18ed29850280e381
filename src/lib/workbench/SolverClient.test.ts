import { describe, expect, it } from 'vitest';
import { SolverClient, type WorkerLike } from './SolverClient';

function fakeWorker() {
  const asked: { id: number; question: number }[] = [];
  const worker: WorkerLike = {
    postMessage: (m) => void asked.push(m as { id: number; question: number }),
    onmessage: null,
    onerror: null,
    terminate: () => undefined
  };
  const answer = (id: number, body: object) => worker.onmessage?.({ data: { id, ...body } } as MessageEvent);
  return { worker, asked, answer };
}

describe('SolverClient', () => {
  it('answers a question', async () => {
    const { worker, answer } = fakeWorker();
    const client = new SolverClient<number, number>(worker);
    const pending = client.ask(3);
    answer(1, { result: 9 });
    expect(await pending).toBe(9);
  });

  it('keeps only the newest question while one is being computed', async () => {
    const { worker, asked, answer } = fakeWorker();
    const client = new SolverClient<number, number>(worker);
    const first = client.ask(1);
    const second = client.ask(2);
    const third = client.ask(3);
    expect(await second).toBeNull();
    answer(1, { result: 10 });
    expect(await first).toBe(10);
    expect(asked.map((a) => a.question)).toEqual([1, 3]);
    answer(3, { result: 30 });
    expect(await third).toBe(30);
  });

  it('passes an error on and goes on with the next question', async () => {
    const { worker, answer } = fakeWorker();
    const client = new SolverClient<number, number>(worker);
    const first = client.ask(1);
    const second = client.ask(2);
    answer(1, { error: 'no such model' });
    await expect(first).rejects.toThrow('no such model');
    answer(2, { result: 4 });
    expect(await second).toBe(4);
  });

  it('settles everything when closed', async () => {
    const { worker } = fakeWorker();
    const client = new SolverClient<number, number>(worker);
    const first = client.ask(1);
    const second = client.ask(2);
    client.close();
    expect(await first).toBeNull();
    expect(await second).toBeNull();
  });
});
