import { expect, it } from 'vitest';
import { whenChanged } from './whenChanged';

const now = new Date(2026, 2, 10, 9, 0);

it('names today with its time, yesterday by name, other days by date', () => {
  expect(whenChanged(new Date(2026, 2, 10, 8, 5).toISOString(), now)).toBe('today, 08:05');
  expect(whenChanged(new Date(2026, 2, 9, 23, 59).toISOString(), now)).toBe('yesterday');
  expect(whenChanged(new Date(2026, 0, 2).toISOString(), now)).toBe('2 January');
  expect(whenChanged(new Date(2025, 11, 31).toISOString(), now)).toBe('31 December 2025');
});
