/*
 * The workloads in C, as a yardstick: the same methods as the engine's, everything in local doubles.
 *   baseline WORKLOAD DRAWS.bin OUT.bin SECONDS COUNT
 * prints CPU nanoseconds a unit of work (median of the repetitions that fit into SECONDS), and writes what it found.
 */
#define _POSIX_C_SOURCE 199309L
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

#define INLINE static inline __attribute__((always_inline))
typedef void (*Slopes)(const double *k, double x, double y, double *f, double *g);

INLINE void classical(const double *k, double x, double y, double *f, double *g) {
  *f = x * (k[0] - k[1] * y);
  *g = y * (k[2] - k[3] * x);
}
INLINE void competition(const double *k, double x, double y, double *f, double *g) {
  *f = x * (k[0] + k[1] * x - k[2] * y);
  *g = y * (k[3] + k[4] * y - k[5] * x);
}
INLINE void saturating(const double *k, double x, double y, double *f, double *g) {
  double u = k[2] / (1 + k[3] * x);
  *f = x * (k[0] + k[1] * x - u * y);
  *g = y * (k[4] + k[5] * u * x);
}

/* Step control from the exponent of the squared error, as in the engine. */
INLINE double quickLog2(double e) {
  int64_t bits;
  memcpy(&bits, &e, 8);
  return (double)(int32_t)(bits >> 32) * 0x1p-20 - 1023;
}
INLINE double quickExp2(double v) {
  v *= 0.25;
  double r = 1 + v * (0.69314718 + v * (0.2402265 + v * 0.0555041));
  r *= r;
  return r * r;
}

INLINE double firstStep(Slopes slopes, const double *k, double x, double y, double f, double g, double length, double rtol,
                        double atol) {
  double sx = atol + rtol * x, sy = atol + rtol * y;
  double state = sqrt(x / sx * (x / sx) + y / sy * (y / sy)), speed = sqrt(f / sx * (f / sx) + g / sy * (g / sy));
  double h0 = state > 1e-5 && speed > 1e-5 ? 0.01 * state / speed : 1e-6;
  double f2, g2;
  slopes(k, x + h0 * f, y + h0 * g, &f2, &g2);
  double bx = (f2 - f) / sx, by = (g2 - g) / sy;
  double largest = fmax(sqrt(bx * bx + by * by) / h0, speed);
  return fmin(fmin(100 * h0, pow(0.01 / largest, 0.2)), length);
}

/* Output at i * spacing for i < count. @returns tries of a step, negative when it failed */
INLINE long integrate(Slopes slopes, const double *k, double x, double y, double end, double spacing, long count, double rtol,
                      double atol, double *out) {
  const double safety = log2(0.9), shrink = log2(0.2), grow = log2(10);
  double t = 0, f, g, before = log2(1e-8), most = grow;
  slopes(k, x, y, &f, &g);
  double size = firstStep(slopes, k, x, y, f, g, end, rtol, atol);
  long next = 1, tries = 0;
  out[0] = x;
  out[1] = y;
  double due = spacing;
  for (;;) {
    int last = t + 1.01 * size >= end;
    double h = last ? end - t : size;
    double f2, g2, f3, g3, f4, g4, f5, g5, f6, g6, f7, g7;
    tries++;
    slopes(k, x + h * (0.2 * f), y + h * (0.2 * g), &f2, &g2);
    slopes(k, x + h * (0.075 * f + 0.225 * f2), y + h * (0.075 * g + 0.225 * g2), &f3, &g3);
    slopes(k, x + h * (44. / 45 * f - 56. / 15 * f2 + 32. / 9 * f3), y + h * (44. / 45 * g - 56. / 15 * g2 + 32. / 9 * g3), &f4,
           &g4);
    slopes(k, x + h * (19372. / 6561 * f - 25360. / 2187 * f2 + 64448. / 6561 * f3 - 212. / 729 * f4),
           y + h * (19372. / 6561 * g - 25360. / 2187 * g2 + 64448. / 6561 * g3 - 212. / 729 * g4), &f5, &g5);
    slopes(k, x + h * (9017. / 3168 * f - 355. / 33 * f2 + 46732. / 5247 * f3 + 49. / 176 * f4 - 5103. / 18656 * f5),
           y + h * (9017. / 3168 * g - 355. / 33 * g2 + 46732. / 5247 * g3 + 49. / 176 * g4 - 5103. / 18656 * g5), &f6, &g6);
    double x1 = x + h * (35. / 384 * f + 500. / 1113 * f3 + 125. / 192 * f4 - 2187. / 6784 * f5 + 11. / 84 * f6);
    double y1 = y + h * (35. / 384 * g + 500. / 1113 * g3 + 125. / 192 * g4 - 2187. / 6784 * g5 + 11. / 84 * g6);
    slopes(k, x1, y1, &f7, &g7);
    double ex = h * (71. / 57600 * f - 71. / 16695 * f3 + 71. / 1920 * f4 - 17253. / 339200 * f5 + 22. / 525 * f6 - f7 / 40) /
                (atol + rtol * (x1 > x ? x1 : x));
    double ey = h * (71. / 57600 * g - 71. / 16695 * g3 + 71. / 1920 * g4 - 17253. / 339200 * g5 + 22. / 525 * g6 - g7 / 40) /
                (atol + rtol * (y1 > y ? y1 : y));
    double error = 0.5 * (ex * ex + ey * ey);
    double lg = quickLog2(error > 1e-24 ? error : 1e-24);
    if (error <= 1 && x1 >= 0 && y1 >= 0) {
      double tNext = last ? end : t + h;
      if (due <= tNext) {
        double rx = x1 - x, ry = y1 - y, bx = h * f - rx, by = h * g - ry, cx = rx - h * f7 - bx, cy = ry - h * g7 - by;
        double qx = h * (-12715105075. / 11282082432 * f + 87487479700. / 32700410799 * f3 - 10690763975. / 1880347072 * f4 +
                         701980252875. / 199316789632 * f5 - 1453857185. / 822651844 * f6 + 69997945. / 29380423 * f7);
        double qy = h * (-12715105075. / 11282082432 * g + 87487479700. / 32700410799 * g3 - 10690763975. / 1880347072 * g4 +
                         701980252875. / 199316789632 * g5 - 1453857185. / 822651844 * g6 + 69997945. / 29380423 * g7);
        double perH = 1 / h;
        do {
          double p = (due - t) * perH, q = 1 - p;
          out[2 * next] = x + p * (rx + q * (bx + p * (cx + q * qx)));
          out[2 * next + 1] = y + p * (ry + q * (by + p * (cy + q * qy)));
          next++;
          due = next >= count ? INFINITY : next == count - 1 ? end : next * spacing;
        } while (due <= tNext);
      }
      t = tNext;
      x = x1;
      y = y1;
      f = f7;
      g = g7;
      if (last) return tries;
      double v = safety - 0.085 * lg + 0.02 * before;
      v = v > most ? most : v < shrink ? shrink : v;
      most = grow;
      before = lg > -26.575424759098897 ? lg : -26.575424759098897;
      size = h * quickExp2(v);
    } else {
      double v = error > 1 ? safety - 0.085 * lg : shrink;
      size = h * quickExp2(v < shrink ? shrink : v);
      most = 0;
      if (!(size > 1e-14 * end)) return -tries;
    }
  }
}

/* Rows of the draws: r1 K1 alpha12 r2 K2 alpha21 x0 y0, or r K a h e m x0 y0. */
INLINE void competitionRates(const double *d, double *k) {
  k[0] = d[0];
  k[1] = -d[0] / d[1];
  k[2] = d[0] * d[2] / d[1];
  k[3] = d[3];
  k[4] = -d[3] / d[4];
  k[5] = d[3] * d[5] / d[4];
}
INLINE void saturatingRates(const double *d, double *k) {
  k[0] = d[0];
  k[1] = -d[0] / d[1];
  k[2] = d[2];
  k[3] = d[2] * d[3];
  k[4] = -d[5];
  k[5] = d[4];
}
__attribute__((noinline)) static long oneClassical(const double *d, double *out) {
  double k[4] = {d[0], d[1], -d[3], -d[2]};
  return integrate(classical, k, d[4], d[5], 200, 0.1, 2001, 1e-8, 1e-10, out);
}
__attribute__((noinline)) static long oneCompetition(const double *d, double *out) {
  double k[6];
  competitionRates(d, k);
  return integrate(competition, k, d[6], d[7], 100, 0.5, 201, 1e-6, 1e-9, out);
}
__attribute__((noinline)) static long oneSaturating(const double *d, double *out) {
  double k[6];
  saturatingRates(d, k);
  return integrate(saturating, k, d[6], d[7], 200, 0.5, 401, 1e-6, 1e-9, out);
}

/* Equilibria: points of ten numbers (x, y, Jacobian, eigenvalues) and a class each. */
typedef struct {
  int count;
  double points[16 * 10];
  uint8_t classes[16];
} Table;

INLINE void put(Table *table, double x, double y, double a, double b, double c, double d) {
  double *p = table->points + 10 * table->count;
  double trace = a + d, coupling = b * c, det = a * d - coupling, disc = (a - d) * (a - d) + 4 * coupling;
  double scale = fabs(a) + fabs(d), s2 = scale * scale + fabs(coupling);
  int code;
  p[0] = x, p[1] = y, p[2] = a, p[3] = b, p[4] = c, p[5] = d;
  if (disc < 0 && -disc > 1e-13 * s2) {
    p[7] = 0.5 * sqrt(-disc);
    p[9] = -p[7];
    p[6] = p[8] = 0.5 * trace;
    code = trace * trace <= 1e-26 * s2 ? 9 : trace < 0 ? 1 : 6;
  } else {
    double root = disc > 0 ? 0.5 * sqrt(disc) : 0, strong = 0.5 * trace + (trace < 0 ? -root : root);
    double weak = strong == 0 ? 0 : det / strong;
    p[6] = strong > weak ? strong : weak;
    p[8] = strong > weak ? weak : strong;
    p[7] = p[9] = 0;
    int nil = coupling == 0 ? a == 0 || d == 0 : fabs(det) <= 1e-13 * s2;
    code = nil ? 9 : det < 0 ? 4 : trace < 0 ? 0 : 5;
    if ((code == 0 || code == 5) && fabs(disc) <= 1e-13 * s2) code += b == 0 && c == 0 ? 2 : 3;
  }
  table->classes[table->count++] = code;
}

static double rootBetween(const double *c, int n, double lo, double hi, int falls) {
  double x = 0.5 * (lo + hi);
  for (int i = 0; i < 200; i++) {
    double value = c[n], slope = 0;
    for (int j = n - 1; j >= 0; j--) slope = slope * x + value, value = value * x + c[j];
    if (value == 0) return x;
    if ((value > 0) == falls) lo = x;
    else hi = x;
    double next = x - value / slope;
    if (!(next > lo && next < hi)) next = lo > 0 && hi > 4 * lo ? sqrt(lo * hi) : lo == 0 ? hi * 0.125 : 0.5 * (lo + hi);
    double moved = fabs(next - x);
    x = next;
    if (moved <= 2.3e-16 * x || hi - lo <= 2.3e-16 * hi) return x;
  }
  return x;
}
INLINE double at(const double *c, int n, double x) {
  double value = c[n];
  for (int j = n - 1; j >= 0; j--) value = value * x + c[j];
  return value;
}
static int quadratic(const double *c, double *roots) {
  double a = c[2], half = 0.5 * c[1], b = c[0], inside = half * half - a * b;
  if (!(inside > 0)) return 0;
  double far = -(half + (half < 0 ? -sqrt(inside) : sqrt(inside)));
  double x1 = far / a, x2 = b / far, low = x1 < x2 ? x1 : x2, high = x1 < x2 ? x2 : x1;
  int n = 0;
  if (low > 0) roots[n++] = low;
  if (high > 0) roots[n++] = high;
  return n;
}
static int positiveRoots(const double *c, int n, double *roots) {
  int changes = 0;
  double last = 0;
  for (int j = 0; j <= n; j++) {
    if (c[j] == 0) continue;
    if (last != 0 && (c[j] > 0) != (last > 0)) changes++;
    last = c[j];
  }
  if (changes == 0) return 0;
  double largest = 0;
  for (int j = 0; j < n; j++) {
    double ratio = -c[j] / c[n];
    if (ratio > 0) {
      double s = j == n - 1 ? ratio : j == n - 2 ? sqrt(ratio) : pow(ratio, 1. / (n - j));
      if (s > largest) largest = s;
    }
  }
  double bound = 2 * largest;
  if (changes == 1) {
    roots[0] = rootBetween(c, n, 0, bound, c[0] > 0);
    return 1;
  }
  double d[8][8];
  for (int j = 0; j <= n; j++) d[n][j] = c[j];
  for (int k = n - 1; k >= 2; k--)
    for (int j = 0; j <= k; j++) d[k][j] = d[k + 1][j + 1] * (j + 1);
  double a[8], b[8], *turning = a, *found = b;
  int nTurning = quadratic(d[2], turning);
  for (int k = 3; k <= n; k++) {
    double *target = k == n ? roots : found, lo = 0, atLo = d[k][0];
    int nFound = 0;
    for (int i = 0; i <= nTurning && lo < bound; i++) {
      double hi = i < nTurning && turning[i] < bound ? turning[i] : bound, atHi = at(d[k], k, hi);
      if ((atLo > 0) != (atHi > 0)) target[nFound++] = rootBetween(d[k], k, lo, hi, atLo > 0);
      lo = hi;
      atLo = atHi;
    }
    double *spare = turning;
    turning = found, found = spare;
    nTurning = nFound;
    if (k == n) return nFound;
  }
  return 0;
}

__attribute__((noinline)) static void competitionEquilibria(const double *d, Table *t) {
  double k[6];
  competitionRates(d, k);
  double p0 = k[0], p1 = k[1], c = k[2], q0 = k[3], q1 = k[4], e = k[5];
  t->count = 0;
  put(t, 0, 0, p0, 0, 0, q0);
  double x = -p0 / p1, y = -q0 / q1;
  if (x > 0 && x < INFINITY) put(t, x, 0, -p0, -c * x, 0, q0 - e * x);
  if (y > 0 && y < INFINITY) put(t, 0, y, p0 - c * y, 0, -e * y, -q0);
  double det = p1 * q1 - c * e;
  x = -(p0 * q1 + c * q0) / det;
  y = -(p1 * q0 + e * p0) / det;
  if (x > 0 && y > 0) put(t, x, y, p1 * x, -c * x, -e * y, q1 * y);
}
INLINE void sigmoidPoint(Table *t, double p0, double p1, double q0, double q1, double a, double ah, double e, double x, double y) {
  double load = ah * x * x, u = 1 / (1 + load), byX = 2 * a * x * y * u * u, byY = a * x * x * (1 + load) * u * u;
  put(t, x, y, p0 + 2 * p1 * x - byX, -byY, e * byX, q0 + 2 * q1 * y + e * byY);
}
/* Rows: r K a h e m d. */
__attribute__((noinline)) static void sigmoidEquilibria(const double *v, Table *t) {
  double p0 = v[0], p1 = -v[0] / v[1], a = v[2], ah = v[2] * v[3], e = v[4], q0 = -v[5], q1 = -v[6];
  t->count = 0;
  sigmoidPoint(t, p0, p1, q0, q1, a, ah, e, 0, 0);
  double K = -p0 / p1;
  if (K > 0) sigmoidPoint(t, p0, p1, q0, q1, a, ah, e, K, 0);
  double roots[8];
  int n;
  if (q1 == 0) {
    double level = -q0 / (e * a + q0 * ah);
    if (!(level > 0 && level < INFINITY)) return;
    roots[0] = sqrt(level);
    n = 1;
  } else {
    /* (q0 H + e a x^2) a x + q1 (p0 + p1 x) H^2 with H = 1 + ah x^2 */
    double c[6] = {q1 * p0,
                   q0 * a + q1 * p1,
                   2 * ah * q1 * p0,
                   (q0 * ah + e * a) * a + 2 * ah * q1 * p1,
                   ah * ah * q1 * p0,
                   ah * ah * q1 * p1};
    n = positiveRoots(c, 5, roots);
  }
  for (int i = 0; i < n; i++) {
    double x = roots[i], y = (p0 + p1 * x) * (1 + ah * x * x) / (a * x);
    if (y > 0 && y < INFINITY) sigmoidPoint(t, p0, p1, q0, q1, a, ah, e, x, y);
  }
}

/* Chance: three words of chaotic state and a counter; exponentials by a ziggurat of 256 layers. */
typedef struct {
  uint32_t a, b, c, n;
} Rng;
INLINE uint32_t bits(Rng *r) {
  uint32_t sum = r->a + r->b + r->n++;
  r->a = r->b ^ (r->b >> 9);
  r->b = r->c + (r->c << 3);
  r->c = ((r->c << 21) | (r->c >> 11)) + sum;
  return sum;
}
INLINE double uniform(Rng *r) {
  uint32_t high = bits(r) >> 5, low = bits(r) >> 6;
  return (high * 67108864. + low) / 9007199254740992.;
}
static double zx[257], zf[257], logFactorial[128];
static void tables(void) {
  const double edge = 7.69711747013105, area = 0.003949659822581557;
  zx[0] = area / exp(-edge);
  zx[1] = edge;
  for (int i = 2; i < 256; i++) zx[i] = -log(exp(-zx[i - 1]) + area / zx[i - 1]);
  zx[256] = 0;
  for (int i = 0; i <= 256; i++) zf[i] = exp(-zx[i]);
  for (int i = 2; i < 128; i++) logFactorial[i] = logFactorial[i - 1] + log(i);
}
INLINE double exponential(Rng *r) {
  double before = 0;
  for (;;) {
    uint32_t one = bits(r), two = bits(r);
    int layer = one & 255;
    double z = ((one >> 8) * 4294967296. + two) * 0x1p-56 * zx[layer];
    if (z < zx[layer + 1]) return before + z;
    if (layer == 0) before += 7.69711747013105;
    else if (zf[layer] + bits(r) * 0x1p-32 * (zf[layer + 1] - zf[layer]) < exp(-z)) return before + z;
  }
}
INLINE double lnFactorial(double n) {
  if (n < 128) return logFactorial[(int)n];
  double x = n + 1, q = 1 / (x * x);
  return (x - 0.5) * log(x) - x + 0.9189385332046728 + (1. / 12 - q * (1. / 360 - q * (1. / 1260 - q / 1680))) / x;
}
static double poisson(Rng *r, double mean) {
  if (!(mean > 0)) return 0;
  if (mean < 12) {
    double u = uniform(r), p = exp(-mean);
    int k = 0;
    while (u >= p && k < 200) u -= p, k++, p *= mean / k;
    return k;
  }
  double root = sqrt(mean), b = 0.931 + 2.53 * root, a = -0.059 + 0.02483 * b, inverse = 1.1239 + 1.1328 / (b - 3.4),
         squeeze = 0.9277 - 3.6224 / (b - 2), logMean = log(mean);
  for (;;) {
    double u = uniform(r) - 0.5, v = 1 - uniform(r), us = 0.5 - fabs(u), k = floor((2 * a / us + b) * u + mean + 0.43);
    if (us >= 0.07 && v <= squeeze) return k;
    if (k < 0 || (us < 0.013 && v > us)) continue;
    if (log(v * inverse / (a / (us * us) + b)) <= k * logMean - mean - lnFactorial(k)) return k;
  }
}
/* r K a e m n0 m0 T; births r n, crowding r n^2/K, meals a n m of which a share e breeds, deaths m */
__attribute__((noinline)) static long exactRun(const double *v, Rng *rng, double *last) {
  double r = v[0], crowd = v[0] / v[1], a = v[2], e = v[3], death = v[4], n = v[5], m = v[6], end = v[7], t = 0;
  long events = 0;
  for (;;) {
    double born = r * n, died = crowd * n * n, meals = a * n * m, lost = death * m, total = born + died + meals + lost;
    if (!(total > 0)) break;
    t += exponential(rng) / total;
    if (t >= end) break;
    double u = bits(rng) * 0x1p-32 * total;
    if (u < born) n++;
    else if (u < born + died) n--;
    else if (u < born + died + meals) {
      n--;
      if (u - born - died < e * meals) m++;
    } else m--;
    events++;
  }
  last[0] = n;
  last[1] = m;
  return events;
}
__attribute__((noinline)) static long leapRun(const double *v, Rng *rng, double *last) {
  double r = v[0], crowd = v[0] / v[1], a = v[2], e = v[3], death = v[4], n = v[5], m = v[6], end = v[7], tau = 0.02;
  long leaps = 0;
  for (double t = 0; t < end - 1e-9; t += tau, leaps++) {
    double meals = a * n * m * tau;
    double born = poisson(rng, r * n * tau), died = poisson(rng, crowd * n * n * tau), fed = poisson(rng, e * meals),
           unfed = poisson(rng, (1 - e) * meals), lost = poisson(rng, death * m * tau);
    n += born - died - fed - unfed;
    m += fed - lost;
    if (n < 0) n = 0;
    if (m < 0) m = 0;
  }
  last[0] = n;
  last[1] = m;
  return leaps;
}

static double cpu(void) {
  struct timespec now;
  clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &now);
  return now.tv_sec * 1e9 + now.tv_nsec;
}
static int ascending(const void *a, const void *b) {
  double d = *(const double *)a - *(const double *)b;
  return d < 0 ? -1 : d > 0;
}

int main(int argc, char **argv) {
  if (argc < 6) return 2;
  const char *work = argv[1];
  FILE *in = fopen(argv[2], "rb");
  if (!in) return 2;
  fseek(in, 0, SEEK_END);
  long size = ftell(in) / 8;
  rewind(in);
  double *draws = malloc(size * 8);
  if (fread(draws, 8, size, in) != (size_t)size) return 2;
  double seconds = atof(argv[4]);
  long count = atol(argv[5]), width = 0, keep = 0, steps = 0;
  int isEquilibria = !strncmp(work, "W4", 2), isChance = !strncmp(work, "W5", 2);
  if (!strcmp(work, "W1")) width = 4002, keep = 1;
  else if (!strcmp(work, "W2")) width = 402, keep = 40;
  else if (!strcmp(work, "W3")) width = 802, keep = 40;
  double *out = calloc(width ? count * width : 4096, 8), *kept = calloc(256, 8), times[4096];
  long classes[16] = {0}, found = 0;
  double checksum = 0;
  tables();
  int n = 0;
  double begin = cpu();
  Rng rng = {1, 2, 3, 4};
  double sum = 0, square = 0;
  long runs = 0, units = 0;
  while (n < 4000 && (n < 3 || cpu() - begin < seconds * 1e9)) {
    double from = cpu();
    units = 0;
    steps = 0;
    if (isEquilibria) {
      memset(classes, 0, sizeof classes);
      found = 0;
      checksum = 0;
      Table table;
      for (long i = 0; i < count; i++) {
        if (work[2] == 'a') competitionEquilibria(draws + 8 * i, &table);
        else sigmoidEquilibria(draws + 8 * i, &table);
        for (int j = 0; j < table.count; j++) {
          classes[table.classes[j]]++;
          checksum += table.points[10 * j + 6] + table.points[10 * j + 1];
        }
        found += table.count;
      }
      units = count;
    } else if (isChance) {
      for (long i = 0; i < count; i++) {
        double last[2];
        units += work[2] == 's' ? exactRun(draws, &rng, last) : leapRun(draws, &rng, last);
        sum += last[0];
        square += last[0] * last[0];
        runs++;
      }
    } else {
      for (long i = 0; i < count; i++) {
        double *to = out + width * i;
        steps += work[1] == '1'   ? oneClassical(draws, to)
                 : work[1] == '2' ? oneCompetition(draws + 8 * i, to)
                                  : oneSaturating(draws + 8 * i, to);
      }
      units = count;
    }
    times[n++] = (cpu() - from) / units;
  }
  qsort(times, n, 8, ascending);
  FILE *file = fopen(argv[3], "wb");
  if (!file) return 2;
  if (isEquilibria) {
    for (int i = 0; i < 10; i++) kept[i] = classes[i];
    kept[10] = found;
    kept[11] = checksum;
    fwrite(kept, 8, 12, file);
  } else if (isChance) {
    kept[0] = sum / runs;
    kept[1] = sqrt(square / runs - kept[0] * kept[0]);
    kept[2] = runs;
    fwrite(kept, 8, 3, file);
  } else fwrite(out, 8, width * (count < keep ? count : keep), file);
  fclose(file);
  printf("{\"ns\":%.6g,\"steps\":%.6g,\"repetitions\":%d}\n", times[n / 2], (double)steps / (units ? units : 1), n);
  return 0;
}
