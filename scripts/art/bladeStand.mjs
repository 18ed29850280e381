// Draws the stand of blades beside the sign-in form: `node scripts/art/bladeStand.mjs`. Both files it writes are kept.
// A consumer and a resource whose shared rest point does not hold; every blade follows their flow for a fixed length on
// paper, and the ring is the cycle that all paths settle on. The blades go into a mask, so that the theme colours them.
import { writeFileSync } from 'node:fs';

const rates = { r: 2.2, K: 30, a: 0.266, handling: 0.326, gain: 0.62, loss: 0.7 };
const width = 800;
const height = 900;
const span = { x: [-0.8, 25.5], y: [0.4, 21.2] };

/** Small seeded stream, so that the drawing is the same each time. */
function stream(seed) {
  let s = seed >>> 0;
  return () => {
    s = (s + 0x6d2b79f5) >>> 0;
    let t = Math.imul(s ^ (s >>> 15), s | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

function flow([n, p]) {
  const eaten = (rates.a * n) / (1 + rates.a * rates.handling * n);
  return [rates.r * n * (1 - n / rates.K) - eaten * p, p * (rates.gain * eaten - rates.loss)];
}

function step(state, dt) {
  const shift = (k, h) => state.map((v, i) => v + h * k[i]);
  const k1 = flow(state);
  const k2 = flow(shift(k1, dt / 2));
  const k3 = flow(shift(k2, dt / 2));
  const k4 = flow(shift(k3, dt));
  return state.map((v, i) => v + (dt / 6) * (k1[i] + 2 * k2[i] + 2 * k3[i] + k4[i]));
}

const unitX = width / (span.x[1] - span.x[0]);
const unitY = height / (span.y[1] - span.y[0]);
const paper = ([n, p]) => [(n - span.x[0]) * unitX, height - (p - span.y[0]) * unitY];
const field = ([x, y]) => [span.x[0] + x / unitX, span.y[0] + (height - y) / unitY];
const point = ([x, y]) => `${x.toFixed(0)} ${y.toFixed(0)}`;
const fine = ([x, y]) => `${x.toFixed(1)} ${y.toFixed(1)}`;

/** The path of one blade on paper, from root to tip. */
function spine(start, length, pieces = 8) {
  let state = start;
  const points = [paper(state)];
  for (let i = 0; i < pieces; i++) {
    const [vn, vp] = flow(state);
    const speed = Math.hypot(vn * unitX, vp * unitY);
    if (speed < 1e-9) break;
    state = step(state, length / pieces / speed);
    points.push(paper(state));
  }
  return points;
}

/** Thick near the root, running out to the tip. */
function blade(points, thickness) {
  const last = points.length - 1;
  const sides = points.map((at, i) => {
    const a = points[Math.max(0, i - 1)];
    const b = points[Math.min(last, i + 1)];
    const run = Math.hypot(b[0] - a[0], b[1] - a[1]) || 1;
    const t = i / last;
    const half = (thickness / 2) * (t < 0.14 ? 0.5 + (0.5 * t) / 0.14 : ((1 - t) / 0.86) ** 0.85);
    const dx = (-(b[1] - a[1]) / run) * half;
    const dy = ((b[0] - a[0]) / run) * half;
    return [
      [at[0] + dx, at[1] + dy],
      [at[0] - dx, at[1] - dy]
    ];
  });
  const outline = [...sides.map(([left]) => left), ...sides.map(([, right]) => right).reverse()];
  return `M${outline.map(fine).join('L')}Z`;
}

const random = stream(2026);
const roots = [];
for (let tries = 0; roots.length < 900 && tries < 60_000; tries++) {
  const at = [random() * (width + 60) - 30, random() * (height + 60) - 30];
  const apart = 22 + 7 * random();
  if (roots.every((other) => Math.hypot(other[0] - at[0], other[1] - at[1]) > apart)) roots.push(at);
}
// Five tones, each one path: the file stays small.
const tones = [0.34, 0.48, 0.62, 0.76, 0.9].map((opacity) => ({ opacity, d: '' }));
for (const root of roots.sort((a, b) => a[1] - b[1])) {
  const start = field(root);
  const length = 40 + random() * 34;
  const thickness = 4 + random() * 2.6;
  const tone = tones[Math.floor(random() * tones.length)];
  if (start[0] < 0.03 || start[1] < 0.03) continue;
  const points = spine(start, length);
  if (points.length > 5) tone.d += blade(points, thickness);
}
writeFileSync(
  'static/art/blade-stand.svg',
  `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${width} ${height}" width="${width}" height="${height}">` +
    tones.map(({ opacity, d }) => `<path fill-opacity="${opacity}" d="${d}"/>`).join('') +
    '</svg>\n'
);

const restN = rates.loss / (rates.a * (rates.gain - rates.loss * rates.handling));
const restP = (rates.r * (1 - restN / rates.K) * (1 + rates.a * rates.handling * restN)) / rates.a;
let state = [8, 6];
for (let i = 0; i < 20_000; i++) state = step(state, 0.01);
const ring = [];
for (let i = 0, crossings = 0; crossings < 2 && i < 4000; i++) {
  const next = step(state, 0.01);
  if (state[0] < restN && next[0] >= restN) crossings++;
  if (crossings === 1 && i % 5 === 0) ring.push(paper(next));
  state = next;
}
const marks = [0.08, 0.36, 0.62, 0.86].map((share) => {
  const i = Math.floor(share * ring.length);
  const [a, b] = [ring[i - 1], ring[i + 1]];
  return { at: point(ring[i]), turn: Math.round((Math.atan2(b[1] - a[1], b[0] - a[0]) * 180) / Math.PI) };
});
writeFileSync(
  'src/lib/ui/bladeStand.ts',
  `// Written by scripts/art/bladeStand.mjs.
/** The cycle in the box 0 0 ${width} ${height}, with arrow heads and the rest point that does not hold. */
export const bladeStand = {
  cycle: 'M${ring.map(fine).join('L')}Z',
  marks: ${JSON.stringify(marks)},
  rest: ${JSON.stringify(paper([restN, restP]).map(Math.round))}
} as const;
`
);
