import { coefficientsOf, type Coefficients } from '../model/coefficients';
import type { ModelSpec } from '../model/spec';
import { FRACTION, type Fraction } from '../numeric/fraction';
import {
  contains,
  divide,
  distanceToZero,
  INTERVAL,
  interval,
  middle,
  signOf,
  ZERO,
  type Interval
} from '../numeric/interval';
import type { Polynomial } from '../numeric/polynomial';
import { rangeOf, type RootPlace } from '../numeric/realRoots';
import { certifyBox, polish, tidy, type CertifiedBox, type Lifted } from './certify';
import { alongside, eliminate, firstAlone, secondAlone, type Elimination } from './elimination';
import { rootsOf, type PinnedPlace, type SignedRoots } from './rootPlaces';

/** An equilibrium before it is classified. */
export interface FoundPoint {
  x: number;
  y: number;
  multiplicity: number;
  /** Encloses the point for every model within rounding; null when that could not be shown. */
  box: CertifiedBox | null;
}

/** A curve of equilibria in the plane, u = top(t)/bottom(t), or a straight line where one abundance is fixed. */
export interface FoundCurve {
  along: 'first' | 'second';
  at: (t: number) => number;
  /** Where the curve may start, end or leave the quadrant, ascending. */
  cuts: number[];
}

export interface Search {
  points: FoundPoint[];
  curves: FoundCurve[];
  /** Reasons why the list may not be complete; empty when it is proven. */
  doubts: string[];
  /** Places where the number of roots rests on rounding but every one is listed. */
  merged: boolean;
}

const real = (a: Polynomial<Interval>, t: number) => {
  let value = 0;
  for (let i = a.length - 1; i >= 0; i--) value = value * t + middle(a[i]!);
  return value;
};

/**
 * Replaces coefficients that are 0 within rounding by exact zeros where the decimal numbers of the document make them so.
 */
function settle(approximate: Polynomial<Interval>, exact: () => Polynomial<Fraction>): Polynomial<Interval> {
  if (!approximate.some((c) => signOf(c) === null)) return approximate;
  const coefficients = exact();
  return approximate.map((c, i) => {
    const known = coefficients[i];
    return signOf(c) === null && (known === undefined || FRACTION.isZero(known)) ? ZERO : c;
  });
}

const FAR_AWAY = 'an equilibrium at abundances beyond the precision of the rates cannot be excluded';

interface Solved {
  elimination: Elimination<Interval>;
  roots: SignedRoots;
  crowd: number;
}

/** Collects everything about one model. */
class Collector implements Search {
  points: FoundPoint[] = [];
  curves: FoundCurve[] = [];
  doubts: string[] = [];
  merged = false;

  constructor(
    private readonly lifted: Lifted,
    private readonly exact: () => Coefficients<Fraction>,
    private readonly includeInfeasible: boolean
  ) {}

  private get k(): Coefficients<Interval> {
    return this.lifted.interval;
  }

  private get takesFirstByHead() {
    return INTERVAL.isZero(this.k.s1);
  }

  private get takesSecondByHead() {
    return INTERVAL.isZero(this.k.s2);
  }

  private get undefinedAtZero() {
    return !INTERVAL.isZero(this.k.leslie);
  }

  run(): void {
    const { takesFirstByHead, takesSecondByHead, undefinedAtZero } = this;
    if (takesFirstByHead && takesSecondByHead && !undefinedAtZero) {
      this.points.push({ x: 0, y: 0, multiplicity: 1, box: { x: ZERO, y: ZERO } });
    }
    if (takesSecondByHead) {
      const own = settle(firstAlone(INTERVAL, this.k), () => firstAlone(FRACTION, this.exact()));
      this.alone('first', own);
    }
    if (takesFirstByHead && !undefinedAtZero) {
      const own = settle(secondAlone(INTERVAL, this.k), () => secondAlone(FRACTION, this.exact()));
      this.alone('second', own);
    }
    this.together();
  }

  /** Equilibria on one axis. */
  private alone(along: 'first' | 'second', polynomial: Polynomial<Interval>): void {
    const roots = rootsOf(polynomial, this.includeInfeasible);
    if (roots.vanishes) {
      this.curves.push({ along, at: () => 0, cuts: [] });
      return;
    }
    for (const place of roots.places) {
      const value = tidy(place.value, interval(place.lo, place.hi));
      const range = interval(place.lo, place.hi);
      const [x, y] = along === 'first' ? [value, 0] : [0, value];
      const box = along === 'first' ? { x: range, y: ZERO } : { x: ZERO, y: range };
      this.points.push({ x, y, multiplicity: place.atMost, box });
      if (!place.single) this.merged = true;
    }
    if (roots.atZero > 0) this.mergeInto(0, 0, roots.atZero);
    if (roots.atInfinity > 0) this.doubts.push(FAR_AWAY);
  }

  /** Counts roots that coincide with a point already listed. */
  private mergeInto(x: number, y: number, count: number): void {
    const near = (p: number, q: number) => Math.abs(p - q) <= 1e-6 * Math.max(Math.abs(p), Math.abs(q));
    const host = this.points.find((point) => near(point.x, x) && near(point.y, y));
    if (host) {
      host.multiplicity += count;
      this.merged = true;
    } else if (!(x === 0 && this.undefinedAtZero)) {
      const onCurve = this.curves.length > 0;
      if (!onCurve) this.doubts.push('a merged equilibrium on an axis could not be placed');
    }
  }

  /** Equilibria off the invariant axes. */
  private together(): void {
    if (this.k.interaction === 'competition') {
      const [untouchedFirst, untouchedSecond] = [INTERVAL.isZero(this.k.c12), INTERVAL.isZero(this.k.c21)];
      if (untouchedFirst !== untouchedSecond && this.oneByOne(untouchedFirst ? 'first' : 'second')) return;
    }
    const elimination = eliminate(INTERVAL, this.k);
    if (elimination === null) return;
    if (elimination.along === 'both') {
      this.uncoupled(elimination.first, elimination.second);
      return;
    }
    const attempt = this.solve(elimination);
    const other = attempt.crowd > 0 ? eliminate(INTERVAL, this.k, 'second') : null;
    if (other && other.along === 'second' && elimination.along === 'first') {
      const second = this.solve(other);
      this.eliminated(second.crowd < attempt.crowd ? second : attempt);
    } else this.eliminated(attempt);
  }

  /** Roots of the resultant; `crowd` counts those that could not be told apart. */
  private solve(elimination: Elimination<Interval>): Solved {
    const resultant = settle(elimination.resultant, () => {
      const exact = eliminate(FRACTION, this.exact(), elimination.along);
      return exact && exact.along !== 'both' ? exact.resultant : [];
    });
    const roots = rootsOf(resultant, this.includeInfeasible);
    const crowd = roots.places.reduce((sum, place) => sum + (place.single ? 0 : place.atMost), 0);
    return { elimination: { ...elimination, resultant }, roots, crowd };
  }

  /**
   * A rival that the other does not touch rests by itself, and the other rests alongside: two short polynomials in place of a
   * long one whose roots crowd. False where the first of them vanishes.
   */
  private oneByOne(free: 'first' | 'second'): boolean {
    const bound = free === 'first' ? 'second' : 'first';
    const alone = free === 'first' ? firstAlone<Interval> : secondAlone<Interval>;
    const exactly = free === 'first' ? firstAlone<Fraction> : secondAlone<Fraction>;
    const own = settle(alone(INTERVAL, this.k), () => exactly(FRACTION, this.exact()));
    const roots = rootsOf(own, this.includeInfeasible);
    if (roots.vanishes) return false;
    for (const root of roots.places) {
      const beside = rootsOf(alongside(INTERVAL, this.k, bound, interval(root.lo, root.hi)), this.includeInfeasible);
      const at = tidy(root.value, interval(root.lo, root.hi));
      if (beside.vanishes) {
        this.curves.push({ along: bound, at: () => at, cuts: [] });
        continue;
      }
      for (const other of beside.places) {
        const multiplicity = root.atMost * other.atMost;
        if (multiplicity > 1) this.merged = true;
        this.settleAt(this.place(free, root.value, other.value), this.place(free, root, other), multiplicity);
      }
      if (beside.atZero > 0) this.mergeInto(...this.place(free, at, 0), beside.atZero * root.atMost);
      if (beside.atInfinity > 0) this.doubts.push(FAR_AWAY);
    }
    if (roots.atZero > 0) {
      const beside = rootsOf(alongside(INTERVAL, this.k, bound, ZERO), this.includeInfeasible);
      beside.places.forEach((other) => this.mergeInto(...this.place(free, 0, other.value), roots.atZero));
      if (beside.atZero > 0) this.mergeInto(0, 0, roots.atZero * beside.atZero);
    }
    if (roots.atInfinity > 0) this.doubts.push(FAR_AWAY);
    return true;
  }

  /** A point between two places, more closely where the test in the plane succeeds. */
  private settleAt([x, y]: [number, number], [px, py]: [RootPlace, RootPlace], multiplicity: number): void {
    const polished = multiplicity === 1 ? polish(this.lifted, x, y) : null;
    const box = polished && certifyBox(this.lifted, polished.x, polished.y);
    const meets = box && box.x.lo <= px.hi && box.x.hi >= px.lo && box.y.lo <= py.hi && box.y.hi >= py.lo;
    if (polished && box && meets) this.accept(polished.x, polished.y, 1, box);
    else this.accept(x, y, multiplicity, { x: interval(px.lo, px.hi), y: interval(py.lo, py.hi) });
  }

  private uncoupled(first: Polynomial<Interval>, second: Polynomial<Interval>): void {
    const xs = rootsOf(first, this.includeInfeasible);
    const ys = rootsOf(second, this.includeInfeasible);
    if (xs.vanishes && ys.vanishes) {
      this.curves = [];
      this.points = [];
      this.doubts.push('nothing changes at any state, so that every one of them is at rest and no list can hold them');
      return;
    }
    if (xs.vanishes || ys.vanishes) {
      // One species rests anywhere: a line for each state of the other.
      if (xs.vanishes)
        ys.places.forEach((place) => this.curves.push({ along: 'first', at: () => place.value, cuts: [] }));
      if (ys.vanishes)
        xs.places.forEach((place) => this.curves.push({ along: 'second', at: () => place.value, cuts: [] }));
      return;
    }
    for (const px of xs.places) {
      for (const py of ys.places) {
        const box = { x: interval(px.lo, px.hi), y: interval(py.lo, py.hi) };
        const [x, y] = [tidy(px.value, box.x), tidy(py.value, box.y)];
        this.points.push({ x, y, multiplicity: px.atMost * py.atMost, box });
      }
    }
    if (xs.atZero > 0) ys.places.forEach((py) => this.mergeInto(0, py.value, xs.atZero));
    if (ys.atZero > 0) xs.places.forEach((px) => this.mergeInto(px.value, 0, ys.atZero));
    if (xs.atZero > 0 && ys.atZero > 0) this.mergeInto(0, 0, xs.atZero * ys.atZero);
  }

  private eliminated({ elimination, roots }: Solved): void {
    const { along, top, bottom } = elimination;
    if (roots.vanishes) {
      // The rival's absence all along is its axis, which is on the list where nothing is added to it or taken.
      if (top.length === 0 && this.curves.some((curve) => curve.along === along)) return;
      const cuts = [...rootsOf(top, false).places, ...rootsOf(bottom, false).places].map((place) => place.value);
      this.curves.push({ along, at: (t) => real(top, t) / real(bottom, t), cuts: cuts.sort((p, q) => p - q) });
      return;
    }
    for (const place of roots.places) {
      if (place.single) this.singleRoot(elimination, place);
      else this.knot(elimination, place);
    }
    if (roots.atZero > 0) this.rootAtZero(elimination, roots.atZero);
    if (roots.atInfinity > 0) this.rootAtInfinity(elimination, roots.atInfinity);
  }

  private place<T>(along: 'first' | 'second', t: T, u: T): [T, T] {
    return along === 'first' ? [t, u] : [u, t];
  }

  private certified(elimination: Elimination<Interval>, t: number): { x: number; y: number; box: CertifiedBox } | null {
    const u = real(elimination.top, t) / real(elimination.bottom, t);
    if (!Number.isFinite(u)) return null;
    const polished = polish(this.lifted, ...this.place(elimination.along, t, u));
    const box = polished && certifyBox(this.lifted, polished.x, polished.y);
    return polished && box ? { ...polished, box } : null;
  }

  private singleRoot(elimination: Elimination<Interval>, place: RootPlace): void {
    const { along, top, bottom } = elimination;
    const found = this.certified(elimination, place.value);
    const range = found && (along === 'first' ? found.box.x : found.box.y);
    if (found && range && range.lo <= place.hi && range.hi >= place.lo && !this.isListed(found.box)) {
      this.accept(found.x, found.y, 1, found.box);
      return;
    }
    // The box test can fail next to a fold; the one-dimensional proof still holds.
    const t = interval(place.lo, place.hi);
    const u = divide(rangeOf(top, t.lo, t.hi), rangeOf(bottom, t.lo, t.hi));
    const box = along === 'first' ? { x: t, y: u } : { x: u, y: t };
    const guess = real(top, place.value) / real(bottom, place.value);
    const [x, y] = this.place(along, place.value, guess);
    if (signOf(u) === null && !(u.hi - u.lo < 1e-9 * Math.max(Math.abs(x), Math.abs(y)))) {
      this.doubts.push('the side of an axis on which one equilibrium lies is below rounding');
    }
    this.accept(x, y, 1, Number.isFinite(u.lo) && Number.isFinite(u.hi) ? box : null);
  }

  /** Boxes that meet hold the same root: two starts have led to one. */
  private isListed(box: CertifiedBox): boolean {
    return this.points.some((other) => other.box && other.x !== 0 && other.y !== 0 && !disjoint(other.box, box));
  }

  /** A point off the axes in the algebra; it may still lie on one, or beyond. */
  private accept(x: number, y: number, multiplicity: number, box: CertifiedBox | null): void {
    if (box) {
      if (this.isListed(box)) {
        this.doubts.push('two places led to one equilibrium');
        return;
      }
      const onFirstAxis = contains(box.y, 0) && this.takesSecondByHead;
      const onSecondAxis = contains(box.x, 0) && this.takesFirstByHead;
      if (onFirstAxis || onSecondAxis) {
        this.mergeInto(onSecondAxis ? 0 : x, onFirstAxis ? 0 : y, multiplicity);
        return;
      }
    }
    const feasible = box ? box.x.hi >= 0 && box.y.hi >= 0 : x >= 0 && y >= 0;
    if (!feasible && !this.includeInfeasible) return;
    this.points.push({
      x: box ? tidy(x, box.x) : x,
      y: box ? tidy(y, box.y) : y,
      multiplicity,
      box
    });
  }

  /** Several roots within rounding: told apart in the plane where possible, else listed once. */
  private knot(elimination: Elimination<Interval>, place: PinnedPlace): void {
    const { along, top, bottom } = elimination;
    const spread = Math.max((place.to - place.from) / Math.abs(place.value), 2 ** -24);
    const apart: { x: number; y: number; box: CertifiedBox }[] = [];
    for (const step of [-4, -1, -0.4, -0.1, 0.1, 0.4, 1, 4]) {
      const found = this.certified(elimination, place.value * (1 + step * spread));
      if (!found) continue;
      const t = along === 'first' ? found.x : found.y;
      const air = 2 ** -40 * Math.abs(t);
      if (t < place.from - air || t > place.to + air) continue;
      const isNew = apart.every((other) => disjoint(other.box, found.box));
      if (isNew) apart.push(found);
    }
    if (apart.length > 1) {
      apart.filter(({ box }) => !this.isListed(box)).forEach((found) => this.accept(found.x, found.y, 1, found.box));
      if (apart.length < place.atMost) this.doubts.push('more equilibria may be merged in one place');
      return;
    }
    const t = interval(Math.min(place.lo, place.hi), Math.max(place.lo, place.hi));
    const u = divide(rangeOf(top, t.lo, t.hi), rangeOf(bottom, t.lo, t.hi));
    const [x, y] = this.place(along, place.value, real(top, place.value) / real(bottom, place.value));
    const box = along === 'first' ? { x: t, y: u } : { x: u, y: t };
    this.merged = true;
    this.accept(x, y, place.atMost, Number.isFinite(u.lo) ? box : null);
  }

  /**
   * The highest coefficient is 0 within rounding but not exactly: a root lies far out, at t or at -t. Exact arithmetic says
   * on which side, and the elimination whether the other abundance is feasible there.
   */
  private rootAtInfinity(elimination: Elimination<Interval>, count: number): void {
    const { top, bottom, resultant } = elimination;
    const lead = (a: Polynomial<Interval>) => signOf(a[a.length - 1] ?? ZERO);
    const [head, foot] = [lead(top), lead(bottom)];
    if (head !== null && foot !== null && head * foot < 0) return;
    const exact = eliminate(FRACTION, this.exact(), elimination.along);
    if (count === 1 && exact && exact.along !== 'both') {
      const far = exact.resultant[resultant.length - 1]?.n ?? 0n;
      const near = signOf(resultant[resultant.length - 2] ?? ZERO);
      if (near !== null && (far > 0n ? 1 : -1) === near) return;
    }
    this.doubts.push(FAR_AWAY);
  }

  /** A root t = 0 of the resultant is a point of the other axis counted again. */
  private rootAtZero(elimination: Elimination<Interval>, count: number): void {
    const { along, top, bottom } = elimination;
    const invariant = along === 'first' ? this.takesFirstByHead : this.takesSecondByHead;
    const [head, foot] = [top[0] ?? ZERO, bottom[0] ?? ZERO];
    const added = along === 'first' ? this.k.s1 : this.k.s2;
    if (!invariant && contains(added, 0))
      this.doubts.push('an equilibrium within rounding of an axis may lie beyond it');
    if (!invariant || distanceToZero(foot) === 0) return;
    const u = divide(head, foot);
    if (u.hi < 0) return;
    this.mergeInto(...this.place(along, 0, contains(u, 0) ? 0 : middle(u)), count);
  }
}

function disjoint(a: CertifiedBox, b: CertifiedBox): boolean {
  return a.x.hi < b.x.lo || b.x.hi < a.x.lo || a.y.hi < b.y.lo || b.y.hi < a.y.lo;
}

/**
 * Every equilibrium of a model, with a proof or the reasons why there is none.
 * @param spec a sound model
 * @param lifted coefficients of the model in the rings needed (see lift)
 * @param includeInfeasible also real solutions with a negative abundance
 * @returns points, curves and doubts. Never throws. Cost well under a millisecond, more next to folds.
 */
export function searchEquilibria(spec: ModelSpec, lifted: Lifted, includeInfeasible: boolean): Search {
  const collector = new Collector(lifted, () => coefficientsOf(FRACTION, spec), includeInfeasible);
  collector.run();
  const { points, curves, doubts, merged } = collector;
  return { points, curves, doubts: [...new Set(doubts)], merged };
}
