"""One contender of SciPy's or NumPy's on one workload, or plain Python: arguments and output as for the C program."""
import json
import os
import sys
import time

# A pool of threads for small matrices burns time on a busy machine, and the comparison would flatter us.
os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")
import random

import numpy as np
from scipy.integrate import odeint, solve_ivp

name, work, draws_file, out_file, seconds, count = sys.argv[1:7]
seconds, count = float(seconds), int(count)
draws = np.fromfile(draws_file)
paths = {"W1": (200, 2001, 1e-8, 1e-10, 1), "W2": (100, 201, 1e-6, 1e-9, 40), "W3": (200, 401, 1e-6, 1e-9, 40)}


def slopes_of(d):
    if work == "W1":
        r, a, ea, m = (float(v) for v in d[:4])
        return lambda t, y: (y[0] * (r - a * y[1]), y[1] * (ea * y[0] - m))
    if work == "W2":
        r1, k1, a12, r2, k2, a21 = d[:6] if d.ndim > 1 else [float(v) for v in d[:6]]
        return lambda t, y: (
            r1 * y[0] * (1 - (y[0] + a12 * y[1]) / k1),
            r2 * y[1] * (1 - (y[1] + a21 * y[0]) / k2),
        )
    r, k, a, h, e, m = d[:6] if d.ndim > 1 else [float(v) for v in d[:6]]

    def slopes(t, y):
        eaten = a * y[0] / (1 + a * h * y[0])
        return r * y[0] * (1 - y[0] / k) - eaten * y[1], y[1] * (e * eaten - m)

    return slopes


def follow():
    end, samples, rtol, atol, kept = paths[work]
    times = np.linspace(0, end, samples)
    rows = draws.reshape(1, -1) if work == "W1" else draws.reshape(-1, 8)[:count]
    starts = rows[:, 4:6] if work == "W1" else rows[:, 6:8]
    if name == "scipy-vectorised":
        slopes = slopes_of(rows.T.copy())

        def system(t, y):
            f, g = slopes(t, y.reshape(2, -1))
            return np.concatenate((f, g))

        def run():
            y = solve_ivp(system, (0, end), starts.T.ravel(), "RK45", times, rtol=rtol, atol=atol).y
            return y.reshape(2, -1, samples).transpose(1, 2, 0)[:kept]

    elif name == "scipy-odeint":

        def run():
            return np.array(
                [odeint(slopes_of(d), s, times, rtol=rtol, atol=atol, tfirst=True) for d, s in zip(rows, starts)]
            )[:kept]

    else:

        def run():
            return np.array(
                [solve_ivp(slopes_of(d), (0, end), s, "RK45", times, rtol=rtol, atol=atol).y.T for d, s in zip(rows, starts)]
            )[:kept]

    return run, count


def classify(j, totals, present):
    """Eigenvalues and classes of a stack of Jacobians."""
    trace = j[:, 0, 0] + j[:, 1, 1]
    det = j[:, 0, 0] * j[:, 1, 1] - j[:, 0, 1] * j[:, 1, 0]
    np.linalg.eigvals(j)
    disc = (j[:, 0, 0] - j[:, 1, 1]) ** 2 + 4 * j[:, 0, 1] * j[:, 1, 0]
    code = np.where(det < 0, 4, np.where(disc < 0, np.where(trace < 0, 1, 6), np.where(trace < 0, 0, 5)))
    totals += np.bincount(code[present], minlength=12)[:12]


def stack(a, b, c, d):
    return np.stack((a + 0 * d, b + 0 * d, c + 0 * d, d + 0 * a), -1).reshape(-1, 2, 2)


def equilibria():
    rows = draws.reshape(-1, 8)[:count]

    def competition():
        totals = np.zeros(12)
        r1, k1, a12, r2, k2, a21 = rows[:, :6].T
        p1, c, q1, d = -r1 / k1, r1 * a12 / k1, -r2 / k2, r2 * a21 / k2
        zero, everywhere = 0 * r1, np.ones(len(r1), bool)
        classify(stack(r1, zero, zero, r2), totals, everywhere)
        classify(stack(-r1, -c * k1, zero, r2 - d * k1), totals, everywhere)
        classify(stack(r1 - c * k2, zero, -d * k2, -r2), totals, everywhere)
        det = p1 * q1 - c * d
        x, y = -(r1 * q1 + c * r2) / det, -(p1 * r2 + d * r1) / det
        classify(stack(p1 * x, -c * x, -d * y, q1 * y), totals, (x > 0) & (y > 0))
        totals[10] = totals[:10].sum()
        return totals

    def point(x, y, p, totals, present):
        p0, p1, q0, q1, a, ah, e = p
        load = ah * x * x
        u = 1 / (1 + load)
        by_x, by_y = 2 * a * x * y * u * u, a * x * x * (1 + load) * u * u
        classify(stack(p0 + 2 * p1 * x - by_x, -by_y, e * by_x, q0 + 2 * q1 * y + e * by_y), totals, present)

    def sigmoid():
        totals = np.zeros(12)
        r, k, a, h, e, m, d = rows[:, :7].T
        if work == "W4b":
            d = 0 * d
        p = p0, p1, q0, q1, a, ah, e = r, -r / k, -m, -d, a, a * h, e
        everywhere = np.ones(len(r), bool)
        point(0 * r, 0 * r, p, totals, everywhere)
        point(k, 0 * r, p, totals, everywhere)
        if work == "W4b":
            level = m / (e * a - m * ah)
            x = np.sqrt(np.where(level > 0, level, 1))[:, None]
            real = (level > 0)[:, None]
        else:
            c = np.stack(
                (
                    q1 * p0,
                    q0 * a + q1 * p1,
                    2 * ah * q1 * p0,
                    (q0 * ah + e * a) * a + 2 * ah * q1 * p1,
                    ah * ah * q1 * p0,
                    ah * ah * q1 * p1,
                ),
                -1,
            )
            if name == "numpy-roots":
                roots = np.array([np.roots(one[::-1]) for one in c])
            else:
                companion = np.zeros((len(r), 5, 5))
                companion[:, 0, :] = -c[:, 4::-1] / c[:, 5:6]
                for i in range(4):
                    companion[:, i + 1, i] = 1
                roots = np.linalg.eigvals(companion)
            real = (np.abs(roots.imag) < 1e-9 * np.abs(roots)) & (roots.real > 0)
            x = np.where(real, roots.real, 1.0)
        for i in range(x.shape[1]):
            xi = x[:, i]
            y = (p0 + p1 * xi) * (1 + ah * xi * xi) / (a * xi)
            point(xi, y, p, totals, real[:, i] & (y > 0))
        totals[10] = totals[:10].sum()
        return totals

    return (competition if work == "W4a" else sigmoid), count


def chance():
    r, k, a, e, m, n0, m0, end = (float(v) for v in draws)
    ends = []
    if work == "W5s":

        def run():
            # A tenth of the time: the same events, fewer of them.
            t, n, p, events = 0.0, n0, m0, 0
            while True:
                born, died, meals, lost = r * n, r / k * n * n, a * n * p, m * p
                total = born + died + meals + lost
                t += random.expovariate(total)
                if t >= end / 10:
                    break
                u = random.random() * total
                if u < born:
                    n += 1
                elif u < born + died:
                    n -= 1
                elif u < born + died + meals:
                    n -= 1
                    if u - born - died < e * meals:
                        p += 1
                else:
                    p -= 1
                events += 1
            ends.append(n)
            run.units = events
            return np.array([np.mean(ends), np.std(ends), len(ends)])

        return run, None
    rng = np.random.default_rng(1)

    def run():
        n, p, tau = np.full(1000, n0), np.full(1000, m0), 0.02
        leaps = 250
        for _ in range(leaps):
            meals = a * n * p * tau
            fed = rng.poisson(e * meals)
            n = n + rng.poisson(r * n * tau) - rng.poisson(r / k * n * n * tau) - fed - rng.poisson((1 - e) * meals)
            p = p + fed - rng.poisson(m * p * tau)
            n, p = np.maximum(n, 0), np.maximum(p, 0)
        run.units = 1000 * leaps
        return np.array([np.mean(n), np.std(n), 1000])

    return run, None


run, units = follow() if work in paths else equilibria() if work.startswith("W4") else chance()
times, begin = [], time.process_time()
while len(times) < 1 or (time.process_time() - begin < seconds and len(times) < 2000):
    start = time.process_time()
    found = run()
    times.append((time.process_time() - start) / (units or run.units))
np.ascontiguousarray(found, float).tofile(out_file)
print(json.dumps({"ns": 1e9 * sorted(times)[len(times) // 2], "steps": 0, "repetitions": len(times)}))
