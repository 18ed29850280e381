/** Where on a section the closed orbits are. */
import { bracketedRoot } from '../solve/bracket';
import type { Section } from './sectionThrough';

/** Smallest deviation from the equilibrium looked at, in the logarithm of the resource. */
const INNERMOST = 1e-3;
const GRID = 32;
/** Turns followed in the hope that they settle at once, before the grid is used. */
const ITERATES = 12;
/** The search begins further in when a cycle is found to be smaller than `INNERMOST`, down to this. */
const SMALLEST = 1e-6;
/** Returns closer to the start than this, relative, on each of three turns mean that all orbits are closed. */
const CLOSED = 1e-6;

/** A closed orbit by its place on the section. */
export interface FixedPoint {
  s: number;
  time: number;
}

/** ln(return/start) at scanning accuracy; NaN where the path does not come back. */
function gainAt(section: Section, s: number): number {
  const back = section.turn(s, section.accuracy.scan);
  return back === null || !(back.s > 0) ? NaN : Math.log(back.s / s);
}

/** A stretch of the section on whose ends the return map moves different ways, and where within it the cycle may well be. */
interface Bracket {
  low: number;
  high: number;
  guess: number | null;
}

/**
 * Paths cannot cross, so the return map increases and its iterates are monotone: from the outermost start they fall to the
 * largest fixed point, from the innermost they rise to the smallest. When both arrive at one place there is exactly one
 * cycle; when the outermost falls to the equilibrium there is none.
 * @returns the brackets that prove it, or null when the iterates are too slow to tell.
 */
function bracketsByIteration(section: Section, from: number): Bracket[] | null {
  let outer = section.sMax;
  let settled = false;
  for (let i = 0; i < ITERATES && !settled; i++) {
    const next = section.turn(outer, section.accuracy.scan)?.s ?? NaN;
    // A strong pull arrives at once, and then returns differ by rounding alone, up or down.
    settled = Math.abs(outer - next) < 1e-6 * outer;
    if (!settled && !(next < outer)) return null;
    if (next < from) return [];
    outer = next;
  }
  if (!settled) return null;
  // The limit lies below the last iterate by about as much again; the inner ones need only come this near.
  let inner = from;
  for (let i = 0; i < ITERATES; i++) {
    const next = section.turn(inner, section.accuracy.scan)?.s ?? NaN;
    if (!(next > inner)) return null;
    inner = next;
    if (inner > outer * (1 - 1e-3)) {
      return [{ low: Math.min(inner, outer * (1 - 1e-3)), high: outer * (1 + 1e-3), guess: outer }];
    }
  }
  return null;
}

/** Sign changes of the gain on a grid, and hidden pairs of them. */
function bracketsOnGrid(section: Section, from: number, to: number): Bracket[] {
  const gain = (s: number): number => gainAt(section, s);
  const s = Array.from({ length: GRID + 1 }, (_, i) => from * Math.pow(to / from, i / GRID));
  if ([0.6, 0.7, 0.8].every((part) => Math.abs(gain(s[Math.round(part * GRID)]!)) < CLOSED)) return [];
  const g = s.map(gain);
  const brackets: Bracket[] = [];
  const note = (low: number, high: number) => brackets.push({ low, high, guess: null });
  for (let i = 1; i <= GRID; i++) {
    if (g[i - 1]! * g[i]! < 0) note(s[i - 1]!, s[i]!);
    if (i < 2) continue;
    const [left, middle, right] = [g[i - 2]!, g[i - 1]!, g[i]!];
    const sign = Math.sign(middle);
    if (!(sign * left > sign * middle && sign * right > sign * middle && sign * middle > 0)) continue;
    // The gain comes nearest to zero here: two orbits may hide between the points of the grid.
    let low = s[i - 2]!;
    let high = s[i]!;
    for (let j = 0; j < 24; j++) {
      const a = low + 0.382 * (high - low);
      const b = low + 0.618 * (high - low);
      const ga = gain(a);
      const gb = gain(b);
      const through = sign * ga < 0 ? a : sign * gb < 0 ? b : null;
      if (through !== null) {
        note(s[i - 2]!, through);
        note(through, s[i]!);
        break;
      }
      if (sign * ga < sign * gb) high = b;
      else low = a;
    }
  }
  return brackets.sort((p, q) => p.low - q.low);
}

/** The fixed point of the return map in a bracket: by secants from a guess where there is one, else within the bracket. */
function placeIn(section: Section, { low, high, guess }: Bracket): FixedPoint | null {
  const { fine, place: wanted } = section.accuracy;
  if (guess !== null) {
    let last = guess;
    let turn = section.turn(last, fine);
    let missed = turn ? turn.s - last : Number.NaN;
    let s = turn?.s ?? Number.NaN;
    for (let i = 0; i < 5 && s > low && s < high; i++) {
      turn = section.turn(s, fine);
      if (turn === null) break;
      const miss = turn.s - s;
      if (Math.abs(miss) <= wanted * Math.max(1, s)) return { s, time: turn.time };
      const next = s - (miss * (s - last)) / (miss - missed);
      [last, missed, s] = [s, miss, next];
    }
  }
  const miss = (s: number): number => (section.turn(s, fine)?.s ?? Number.NaN) - s;
  const [atLow, atHigh] = [miss(low), miss(high)];
  if (!(atLow * atHigh <= 0)) return null;
  const s = bracketedRoot(miss, low, high, atLow, atHigh, wanted);
  const turn = section.turn(s, fine);
  return turn !== null && Math.abs(turn.s - s) < 1e-6 * s ? { s, time: turn.time } : null;
}

/**
 * Fixed points of the return map, from the innermost outwards.
 * @param trace of the Jacobian at the equilibrium: which way the smallest turns move
 * @returns places and times of turn; see limitCycles for what can be missed. Never throws.
 */
export function fixedPoints(section: Section, trace: number): FixedPoint[] {
  if (!(section.sMax > 2 * INNERMOST)) return [];
  let from = INNERMOST;
  while (from > SMALLEST && trace * gainAt(section, from) < 0) from /= 10;
  const brackets = bracketsByIteration(section, from) ?? bracketsOnGrid(section, from, section.sMax);
  return brackets.flatMap((bracket) => placeIn(section, bracket) ?? []);
}
