import { compile } from '../model/compile';
import { coefficientsOf, type Coefficients } from '../model/coefficients';
import type { ModelSpec, SpeciesKey, System } from '../model/spec';
import { contours } from '../numeric/contour';
import { INTERVAL } from '../numeric/interval';
import { positiveRoots } from '../numeric/realRoots';
import { REAL } from '../numeric/ring';
import { firstAlone, secondAlone } from './elimination';
import type { PlaneRectangle } from './vectorField';

/** A curve on which one species does not change. */
export interface Isocline {
  species: SpeciesKey;
  points: { x: number; y: number }[];
  /** The axis on which the species is absent. */
  trivial: boolean;
}

export interface IsoclineOptions {
  /** Points along a curve across the window, default 241. */
  resolution?: number;
}

interface Frame {
  xMin: number;
  xMax: number;
  yMin: number;
  yMax: number;
}
type Point = { x: number; y: number };

const quadratic = (c: readonly number[], n: number) => c[0]! + (c[1]! + c[2]! * n) * n;

/** y on the first isocline as a function of x, where there is such a function. */
function firstAsFunctionOfX(k: Coefficients<number>): ((x: number) => number) | null {
  const gain = (x: number) => (k.s1 === 0 ? quadratic(k.p, x) : quadratic(k.p, x) + k.s1 / x);
  if (k.interaction === 'competition') return k.c12 > 0 ? (x) => gain(x) / k.c12 : null;
  return (x) => {
    const psi = k.power === 2 ? k.a * x : k.a;
    return (gain(x) * (1 + k.h * psi * x)) / (psi - k.w * gain(x));
  };
}

/** x on the second isocline as a function of y, where there is such a function. */
function secondAsFunctionOfY(k: Coefficients<number>): ((y: number) => number) | null {
  const gain = (y: number) => (k.s2 === 0 ? quadratic(k.q, y) : quadratic(k.q, y) + k.s2 / y);
  if (k.interaction === 'competition') return k.c21 > 0 ? (y) => gain(y) / k.c21 : null;
  if (k.leslie > 0 || k.e === 0) return null;
  // phi/D = -gain/e with D = 1 + h phi + w y, solved for phi and then for x.
  return (y) => {
    const share = -gain(y) / k.e;
    const phi = (share * (1 + k.w * y)) / (1 - k.h * share);
    if (!(phi >= 0)) return Number.NaN;
    return k.power === 2 ? Math.sqrt(phi / k.a) : phi / k.a;
  };
}

/** The parts of a curve inside the frame, each end placed on the edge by bisection, sampled evenly in t. */
function clip(curve: (t: number) => Point, from: number, to: number, frame: Frame, n: number): Point[][] {
  const isInside = (t: number) => {
    const { x, y } = curve(t);
    return x >= frame.xMin && x <= frame.xMax && y >= frame.yMin && y <= frame.yMax;
  };
  const edge = (inside: number, outside: number) => {
    let [a, b] = [inside, outside];
    for (let i = 0; i < 50; i++) {
      const middle = (a + b) / 2;
      if (isInside(middle)) a = middle;
      else b = middle;
    }
    return a;
  };
  const ranges: [number, number][] = [];
  let start: number | null = null;
  let before = from;
  for (let i = 0; i <= n; i++) {
    const t = from + ((to - from) * i) / n;
    if (isInside(t)) start ??= i === 0 ? t : edge(t, before);
    else if (start !== null) {
      ranges.push([start, edge(before, t)]);
      start = null;
    }
    before = t;
  }
  if (start !== null && to > start) ranges.push([start, to]);
  return ranges.map(([first, last]) => {
    // A short range can hold a long, steep curve.
    const pieces = Math.ceil(n * Math.max(0.4, (last - first) / (to - from)));
    return Array.from({ length: pieces + 1 }, (_, i) => curve(first + ((last - first) * i) / pieces));
  });
}

/** A gap between neighbours that spans much of the frame is a pole crossed, not a curve. */
function splitAtPoles(piece: Point[], frame: Frame, residual: (point: Point) => number): Point[][] {
  const pieces: Point[][] = [];
  let current: Point[] = [];
  for (const point of piece) {
    const last = current[current.length - 1];
    const jump =
      last &&
      Math.abs(point.y - last.y) +
        Math.abs(point.x - last.x) * ((frame.yMax - frame.yMin) / (frame.xMax - frame.xMin)) >
        0.3 * (frame.yMax - frame.yMin);
    if (jump && last && residual({ x: (point.x + last.x) / 2, y: (point.y + last.y) / 2 }) > 0.2) {
      pieces.push(current);
      current = [];
    }
    current.push(point);
  }
  pieces.push(current);
  return pieces.filter((points) => points.length > 1);
}

/**
 * y on the second isocline under leslie growth, as a function of x: growth per head falls with y, so that there is one zero
 * at most. Null under a quota, which makes it rise again.
 */
function ceilingAsFunctionOfX(k: Coefficients<number>): ((x: number) => number) | null {
  if (k.leslie === 0 || k.s2 < 0) return null;
  return (x) => {
    const phi = k.power === 2 ? k.a * x * x : k.a * x;
    const crowding = k.leslie / x - k.q[1];
    const perHead = (y: number) => k.q[0] + (k.e * phi) / (1 + k.h * phi + k.w * y) - crowding * y + k.s2 / y;
    const gain = Math.max(0, k.q[0]) + (k.e * phi) / (1 + k.h * phi);
    let low = 0;
    let high = gain / crowding + Math.sqrt(k.s2 / crowding);
    if (!(high > 0) || !(perHead(high * 1e-12) > 0)) return Number.NaN;
    for (let i = 0; i < 60 && high - low > 1e-15 * high; i++) {
      const middle = (low + high) / 2;
      if (perHead(middle) > 0) low = middle;
      else high = middle;
    }
    return (low + high) / 2;
  };
}

/** Where the other species has no say an isocline is a set of straight lines at the rest points of the one alone. */
function linesAcross(spec: ModelSpec, k: Coefficients<number>, species: SpeciesKey, frame: Frame): Point[][] | null {
  const alone =
    k.interaction === 'competition' ? (species === 'first' ? k.c12 : k.c21) === 0 : species === 'second' && k.e === 0;
  if (!alone || k.leslie > 0) return null;
  const exact = coefficientsOf(INTERVAL, spec);
  const { places } = positiveRoots(species === 'first' ? firstAlone(INTERVAL, exact) : secondAlone(INTERVAL, exact));
  const [low, high] = species === 'first' ? [frame.xMin, frame.xMax] : [frame.yMin, frame.yMax];
  return places
    .filter(({ value }) => value >= low && value <= high)
    .map(({ value }) =>
      species === 'first'
        ? [
            { x: value, y: frame.yMin },
            { x: value, y: frame.yMax }
          ]
        : [
            { x: frame.xMin, y: value },
            { x: frame.xMax, y: value }
          ]
    );
}

function traced(system: System, species: SpeciesKey, frame: Frame, n: number): Point[][] {
  const rate = new Float64Array(2);
  const which = species === 'first' ? 0 : 1;
  const free = species === 'first' ? system.firstAxisInvariant : system.secondAxisInvariant;
  const value = (x: number, y: number) => {
    // Per head where the axis is invariant, or the axis itself would be traced.
    if (free) system.perHead(x, y, rate);
    else system.rhs(x, y, rate);
    return rate[which]!;
  };
  return contours(value, frame, Math.max(40, Math.round(n / 3)));
}

function curvesOf(system: System, k: Coefficients<number>, species: SpeciesKey, frame: Frame, n: number): Point[][] {
  const lines = linesAcross(system.spec, k, species, frame);
  if (lines) return lines;
  const ofX = species === 'first' ? firstAsFunctionOfX(k) : ceilingAsFunctionOfX(k);
  const ofY = species === 'second' ? secondAsFunctionOfY(k) : null;
  if (!ofX && !ofY) return traced(system, species, frame, n);
  const curve = (t: number): Point => (ofX ? { x: t, y: ofX(t) } : { x: ofY ? ofY(t) : Number.NaN, y: t });
  const [from, to] = ofX ? [frame.xMin, frame.xMax] : [frame.yMin, frame.yMax];
  const rate = new Float64Array(2);
  const size = new Float64Array(2);
  const which = species === 'first' ? 0 : 1;
  const residual = ({ x, y }: Point) => {
    system.rhs(x, y, rate);
    system.magnitude(x, y, size);
    return Math.abs(rate[which]!) / size[which]!;
  };
  return clip(curve, from, to, frame, n).flatMap((piece) => splitAtPoles(piece, frame, residual));
}

/**
 * Zero-growth curves of both species inside a window.
 * @param spec a model without issues
 * @param window part of the plane, abundances
 * @returns curves in pieces, first species first, axes marked `trivial`; exact where y(x) or x(y) has a closed form, else
 *   traced cell by cell with each point placed by bisection. Never throws.
 */
export function isoclines(spec: ModelSpec, window: PlaneRectangle, options: IsoclineOptions = {}): Isocline[] {
  const { xMax, yMax, xMin = 0, yMin = 0 } = window;
  const frame = { xMin, xMax, yMin, yMax };
  const n = options.resolution ?? 241;
  const system = compile(spec);
  const k = coefficientsOf(REAL, spec);
  const found: Isocline[] = [];
  for (const species of ['first', 'second'] as const) {
    const free = species === 'first' ? system.firstAxisInvariant : system.secondAxisInvariant;
    const visible = species === 'first' ? xMin <= 0 : yMin <= 0;
    if (free && visible) {
      const points =
        species === 'first'
          ? [
              { x: 0, y: Math.max(0, yMin) },
              { x: 0, y: yMax }
            ]
          : [
              { x: Math.max(0, xMin), y: 0 },
              { x: xMax, y: 0 }
            ];
      found.push({ species, points, trivial: true });
    }
    for (const points of curvesOf(system, k, species, frame, n)) found.push({ species, points, trivial: false });
  }
  return found;
}
