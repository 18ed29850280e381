import { afterEach, beforeEach, expect, it, vi } from 'vitest';
import { Toasts } from './toasts.svelte';

beforeEach(() => vi.useFakeTimers());
afterEach(() => vi.useRealTimers());

it('lets a toast go after six seconds', () => {
  const toasts = new Toasts();
  toasts.show('Rates signed off.');
  vi.advanceTimersByTime(5999);
  expect(toasts.list).toHaveLength(1);
  vi.advanceTimersByTime(1);
  expect(toasts.list).toHaveLength(0);
});

it('keeps a toast while it is held', () => {
  const toasts = new Toasts();
  toasts.show('Study deleted.', () => {});
  const id = toasts.list[0]!.id;
  toasts.hold(id);
  vi.advanceTimersByTime(60_000);
  expect(toasts.list).toHaveLength(1);
  toasts.release(id);
  vi.advanceTimersByTime(6000);
  expect(toasts.list).toHaveLength(0);
});

it('undoes once and goes', async () => {
  const toasts = new Toasts();
  const undo = vi.fn();
  toasts.show('Study deleted.', undo);
  await toasts.undo(toasts.list[0]!);
  vi.advanceTimersByTime(6000);
  expect(undo).toHaveBeenCalledTimes(1);
  expect(toasts.list).toHaveLength(0);
});
