/** Zero contours of a function of two variables by marching squares, each crossing placed by bisection. */

type Point = { x: number; y: number };

interface Box {
  xMin: number;
  xMax: number;
  yMin: number;
  yMax: number;
}

interface Segment {
  /** Names of the two grid edges that the contour crosses in one cell. */
  a: string;
  b: string;
}

/** Zero of `value` between two points of opposite sign. */
function crossing(value: (x: number, y: number) => number, p: Point, q: Point): Point {
  let [a, b] = [0, 1];
  const negativeAtStart = value(p.x, p.y) < 0;
  const at = (share: number) => ({ x: p.x + share * (q.x - p.x), y: p.y + share * (q.y - p.y) });
  for (let i = 0; i < 40; i++) {
    const middle = (a + b) / 2;
    const point = at(middle);
    if (value(point.x, point.y) < 0 === negativeAtStart) a = middle;
    else b = middle;
  }
  return at((a + b) / 2);
}

/** Joins segments that share an edge into polylines. */
function join(segments: Segment[], points: Map<string, Point>): Point[][] {
  const at = new Map<string, number[]>();
  segments.forEach(({ a, b }, i) => {
    for (const end of [a, b]) at.set(end, [...(at.get(end) ?? []), i]);
  });
  const used = new Array<boolean>(segments.length).fill(false);
  const follow = (edge: string): string[] => {
    const path: string[] = [];
    let here = edge;
    for (;;) {
      const next = (at.get(here) ?? []).find((i) => !used[i]);
      if (next === undefined) return path;
      used[next] = true;
      const segment = segments[next]!;
      here = segment.a === here ? segment.b : segment.a;
      path.push(here);
    }
  };
  return segments.flatMap((segment, i) => {
    if (used[i]) return [];
    used[i] = true;
    const path = [...follow(segment.a).reverse(), segment.a, segment.b, ...follow(segment.b)];
    return [path.map((edge) => points.get(edge)!)];
  });
}

/**
 * Zero contours of `value` in a box.
 * @param n cells along each side
 * @returns polylines; cells with a corner where the value is not a number are skipped. Never throws.
 */
export function contours(value: (x: number, y: number) => number, box: Box, n: number): Point[][] {
  const { xMin, xMax, yMin, yMax } = box;
  const x = (i: number) => xMin + ((xMax - xMin) * i) / n;
  const y = (j: number) => yMin + ((yMax - yMin) * j) / n;
  const corners = Array.from({ length: (n + 1) ** 2 }, (_, index) =>
    value(x(index % (n + 1)), y(Math.floor(index / (n + 1))))
  );
  const corner = (i: number, j: number) => corners[j * (n + 1) + i]!;
  const points = new Map<string, Point>();
  const edge = (i: number, j: number, k: number, l: number): string => {
    const name = `${i},${j},${k},${l}`;
    if (!points.has(name)) points.set(name, crossing(value, { x: x(i), y: y(j) }, { x: x(k), y: y(l) }));
    return name;
  };
  const segments: Segment[] = [];
  for (let j = 0; j < n; j++) {
    for (let i = 0; i < n; i++) {
      const signs = [corner(i, j), corner(i + 1, j), corner(i + 1, j + 1), corner(i, j + 1)];
      if (signs.some((v) => Number.isNaN(v))) continue;
      const negative = signs.map((v) => v < 0);
      const crossed: string[] = [];
      if (negative[0] !== negative[1]) crossed.push(edge(i, j, i + 1, j));
      if (negative[1] !== negative[2]) crossed.push(edge(i + 1, j, i + 1, j + 1));
      if (negative[2] !== negative[3]) crossed.push(edge(i, j + 1, i + 1, j + 1));
      if (negative[3] !== negative[0]) crossed.push(edge(i, j, i, j + 1));
      if (crossed.length === 2) segments.push({ a: crossed[0]!, b: crossed[1]! });
      else if (crossed.length === 4) {
        // A saddle of the function: its value in the middle says which corners belong together.
        const joined = value((x(i) + x(i + 1)) / 2, (y(j) + y(j + 1)) / 2) < 0 === negative[0];
        segments.push({ a: crossed[0]!, b: crossed[joined ? 1 : 3]! }, { a: crossed[2]!, b: crossed[joined ? 3 : 1]! });
      }
    }
  }
  return join(segments, points);
}
