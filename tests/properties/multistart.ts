import type { System } from '$lib/dynamics';

export interface Root {
  x: number;
  y: number;
  /** |det J| / s^2, s as in the class rule: how far from merging. */
  strength: number;
}

/**
 * Newton's method from a dense grid of starts, knowing nothing of how the engine searches.
 * @returns distinct feasible solutions of the rates, to 1e-12 of the magnitude of their terms
 */
export function multistart(system: System, reachX: number, reachY: number, n: number): Root[] {
  const f = new Float64Array(2);
  const j = new Float64Array(4);
  const size = new Float64Array(2);
  const roots: Root[] = [];
  for (let i = 0; i < n * n; i++) {
    // Denser towards the axes, where small equilibria are.
    let x = reachX * ((i % n) / (n - 1)) ** 2;
    let y = reachY * (Math.floor(i / n) / (n - 1)) ** 2;
    for (let step = 0; step < 40; step++) {
      system.rhs(x, y, f);
      system.jacobian(x, y, j);
      const determinant = j[0]! * j[3]! - j[1]! * j[2]!;
      const dx = (j[3]! * f[0]! - j[1]! * f[1]!) / determinant;
      const dy = (j[0]! * f[1]! - j[2]! * f[0]!) / determinant;
      if (!Number.isFinite(dx) || !Number.isFinite(dy)) break;
      x -= dx;
      y -= dy;
      if (Math.abs(dx) < 1e-15 * reachX && Math.abs(dy) < 1e-15 * reachY) break;
    }
    if (!Number.isFinite(x) || !Number.isFinite(y) || x < -1e-15 * reachX || y < -1e-15 * reachY) continue;
    if (x > 1e3 * reachX || y > 1e3 * reachY) continue;
    system.rhs(x, y, f);
    system.magnitude(x, y, size);
    if (!(Math.abs(f[0]!) <= 1e-12 * size[0]! + 1e-300) || !(Math.abs(f[1]!) <= 1e-12 * size[1]! + 1e-300)) continue;
    system.jacobian(x, y, j);
    const s = Math.abs(j[0]!) + Math.abs(j[3]!) + Math.sqrt(Math.abs(j[1]! * j[2]!));
    const strength = Math.abs(j[0]! * j[3]! - j[1]! * j[2]!) / s ** 2;
    const known = roots.some((r) => Math.abs(r.x - x) < 1e-6 * reachX && Math.abs(r.y - y) < 1e-6 * reachY);
    if (!known) roots.push({ x, y, strength });
  }
  return roots;
}
