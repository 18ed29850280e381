import { describe, expect, it } from 'vitest';
import { logFactorial, randomStream, type RandomStream } from './random';

const take = (n: number, draw: () => number): number[] => Array.from({ length: n }, draw);
const momentsOf = (values: number[]) => {
  const mean = values.reduce((sum, v) => sum + v, 0) / values.length;
  const power = (k: number) => values.reduce((sum, v) => sum + (v - mean) ** k, 0) / values.length;
  return { mean, variance: power(2), third: power(3), fourth: power(4) };
};

/** Pearson's statistic of counts against chances, cells with few expected joined; about (df, sqrt(2 df)). */
function chiSquare(values: number[], chance: (k: number) => number): { statistic: number; df: number } {
  const counts = new Map<number, number>();
  for (const v of values) counts.set(v, (counts.get(v) ?? 0) + 1);
  let statistic = 0;
  let df = -1;
  let expected = 0;
  let seen = 0;
  let rest = values.length;
  let restSeen = values.length;
  for (let k = 0; rest > 20; k++) {
    expected += values.length * chance(k);
    seen += counts.get(k) ?? 0;
    if (expected < 20 || rest - expected < 20) {
      if (rest - expected < 20) break;
      continue;
    }
    statistic += (seen - expected) ** 2 / expected;
    rest -= expected;
    restSeen -= seen;
    df += 1;
    expected = 0;
    seen = 0;
  }
  return { statistic: statistic + (restSeen - rest) ** 2 / rest, df: df + 1 };
}

describe('randomStream', () => {
  it('gives the same numbers for the same name, whatever was drawn elsewhere', () => {
    const a = randomStream(7, 3);
    const parent = randomStream(7);
    take(5, parent.normal);
    const b = parent.split(3);
    expect(take(50, a.bits)).toEqual(take(50, b.bits));
    expect(randomStream(2 ** 40 + 7).bits()).not.toBe(randomStream(7).bits());
    expect(() => randomStream(0.5)).toThrow(RangeError);
    expect(() => randomStream(1, Number.NaN)).toThrow(RangeError);
  });

  it('keeps streams of neighbouring names apart', () => {
    const firsts = new Set<number>();
    for (let seed = 0; seed < 100; seed++) {
      for (let i = 0; i < 100; i++) firsts.add(randomStream(seed, i).bits());
    }
    // Ten thousand of 2^32: 0.012 collisions are to be expected.
    expect(firsts.size).toBeGreaterThan(9998);
    const n = 20_000;
    const across = take(n, () => 0).map((_, i) => randomStream(11, i).uniform());
    const { mean, variance } = momentsOf(across);
    expect(Math.abs(mean - 0.5)).toBeLessThan(4 * Math.sqrt(1 / 12 / n));
    expect(Math.abs(variance - 1 / 12)).toBeLessThan(4 * Math.sqrt(1 / 180 / n));
    const lag = across.slice(1).reduce((sum, v, i) => sum + (v - 0.5) * (across[i]! - 0.5), 0) / n;
    expect(Math.abs(lag)).toBeLessThan(4 / 12 / Math.sqrt(n));
  });

  it('draws every bit as often as not', () => {
    const { bits } = randomStream(5);
    const n = 40_000;
    const ones = new Array<number>(32).fill(0);
    for (let i = 0; i < n; i++) {
      const word = bits();
      for (let b = 0; b < 32; b++) ones[b]! += (word >>> b) & 1;
    }
    for (const count of ones) expect(Math.abs(count - n / 2)).toBeLessThan(5 * Math.sqrt(n / 4));
  });

  it('draws normal and exponential numbers with their moments and tails', () => {
    const n = 400_000;
    const z = take(n, randomStream(1).normal);
    const normal = momentsOf(z);
    expect(Math.abs(normal.mean)).toBeLessThan(4 / Math.sqrt(n));
    expect(Math.abs(normal.variance - 1)).toBeLessThan(4 * Math.sqrt(2 / n));
    expect(Math.abs(normal.third)).toBeLessThan(4 * Math.sqrt(15 / n));
    expect(Math.abs(normal.fourth - 3)).toBeLessThan(4 * Math.sqrt(96 / n));
    // Within the layers, across edges, and beyond the last one.
    for (const [edge, p] of [
      [0.2152418959, 0.1704197],
      [1, 0.3173105],
      [3, 0.0026998],
      [3.6541528853610088, 0.00025804]
    ] as const) {
      const share = z.filter((v) => Math.abs(v) > edge).length / n;
      const expected = edge < 0.5 ? 1 - p : p;
      expect(Math.abs(share - expected)).toBeLessThan(4 * Math.sqrt((p * (1 - p)) / n) + 1e-6);
    }
    const e = take(n, randomStream(2).exponential);
    const exponential = momentsOf(e);
    expect(Math.abs(exponential.mean - 1)).toBeLessThan(4 / Math.sqrt(n));
    expect(Math.abs(exponential.variance - 1)).toBeLessThan(4 * Math.sqrt(8 / n));
    for (const edge of [0.06385, 0.5, 3, 7.69711747]) {
      const p = Math.exp(-edge);
      const share = e.filter((v) => v > edge).length / n;
      expect(Math.abs(share - p)).toBeLessThan(4 * Math.sqrt((p * (1 - p)) / n));
    }
  });

  it.each([0.3, 4, 11.9, 12, 30, 400])('draws Poisson numbers of mean %s', (mean) => {
    const n = 60_000;
    const { poisson } = randomStream(3, Math.round(10 * mean));
    const values = take(n, () => poisson(mean));
    const { statistic, df } = chiSquare(values, (k) => Math.exp(k * Math.log(mean) - mean - logFactorial(k)));
    expect(statistic).toBeLessThan(df + 4 * Math.sqrt(2 * df) + 8);
    expect(Math.abs(momentsOf(values).mean - mean)).toBeLessThan(4 * Math.sqrt(mean / n));
    expect(poisson(0)).toBe(0);
  });

  it.each([
    [10, 0.3],
    [40, 0.9],
    [1000, 0.004],
    [100, 0.4],
    [5000, 0.7]
  ])('draws binomial numbers of %s trials at %s', (trials, p) => {
    const n = 60_000;
    const { binomial } = randomStream(4, trials);
    const values = take(n, () => binomial(trials, p));
    const chance = (k: number): number =>
      k > trials
        ? 0
        : Math.exp(
            logFactorial(trials) -
              logFactorial(k) -
              logFactorial(trials - k) +
              k * Math.log(p) +
              (trials - k) * Math.log(1 - p)
          );
    const { statistic, df } = chiSquare(values, chance);
    expect(statistic).toBeLessThan(df + 4 * Math.sqrt(2 * df) + 8);
    expect([binomial(0, p), binomial(5, 0), binomial(5, 1)]).toEqual([0, 0, 5]);
  });

  it('knows factorials across the end of its table', () => {
    let sum = 0;
    for (let n = 1; n < 200; n++) {
      sum += Math.log(n);
      expect(Math.abs(logFactorial(n) - sum)).toBeLessThan(1e-12 * (1 + sum));
    }
  });

  it('draws lognormal numbers', () => {
    const stream: RandomStream = randomStream(6);
    const logs = take(50_000, () => Math.log(stream.lognormal(1.5, 0.4)));
    const { mean, variance } = momentsOf(logs);
    expect(Math.abs(mean - 1.5)).toBeLessThan((4 * 0.4) / Math.sqrt(50_000));
    expect(Math.abs(variance - 0.16)).toBeLessThan(4 * 0.16 * Math.sqrt(2 / 50_000));
  });
});
