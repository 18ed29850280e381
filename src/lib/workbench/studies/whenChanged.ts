/**
 * An instant as a list shows it: "today, 14:32", "yesterday", "9 March", "9 March 2025".
 * @param iso ISO instant. @param now the reader's clock. Times are in the reader's own zone.
 */
export function whenChanged(iso: string, now = new Date()): string {
  const then = new Date(iso);
  const day = (d: Date) => new Date(d.getFullYear(), d.getMonth(), d.getDate()).getTime();
  const daysAgo = Math.round((day(now) - day(then)) / 86_400_000);
  const time = then.toLocaleTimeString('en-GB', { hour: '2-digit', minute: '2-digit' });
  if (daysAgo === 0) return `today, ${time}`;
  if (daysAgo === 1) return 'yesterday';
  const withYear = then.getFullYear() === now.getFullYear() ? {} : { year: 'numeric' as const };
  return then.toLocaleDateString('en-GB', { day: 'numeric', month: 'long', ...withYear });
}
