/**
 * The shortest word that tells the two species apart: "goat" and "broom", or "noble" and "signal" where both end alike.
 * Falls back to the whole name.
 */
export function shortNames(species: { first: { common: string }; second: { common: string } }): {
  first: string;
  second: string;
} {
  const words = (name: string) => name.trim().split(/\s+/);
  const first = words(species.first.common);
  const second = words(species.second.common);
  const pick = (a: string | undefined, b: string | undefined) =>
    a && b && a.toLowerCase() !== b.toLowerCase() ? { first: a, second: b } : null;
  return (
    pick(first.at(-1), second.at(-1)) ??
    pick(first[0], second[0]) ?? { first: species.first.common, second: species.second.common }
  );
}
