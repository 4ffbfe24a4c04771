"""The references of npm run bench in numpy and scipy, one thread, CPU time. Usage: reference.py TASK FOLDER.

Inputs are files of little-endian doubles in FOLDER, the answer is JSON on standard output with cpu_ms = the middle of rounds.
"""
import json
import os
import sys
import time

for name in ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS"):
    os.environ.setdefault(name, "1")

import numpy as np
from scipy.signal import savgol_filter


def cpu_ms(work, rounds=11, least_s=0.02):
    """Middle of rounds of the CPU milliseconds of one call, each round as many calls as fill `least_s`."""
    work()
    times = []
    for _ in range(rounds):
        calls, start = 0, time.process_time()
        while True:
            work()
            calls += 1
            spent = time.process_time() - start
            if spent >= least_s:
                break
        times.append(1000 * spent / calls)
    return sorted(times)[rounds // 2]


def smoothing(load):
    """First derivative by Savitzky-Golay (21 points, cubic, polynomial ends), means in 120 bins, quadratic over all samples."""
    y, x, bins = load("y"), load("x"), load("bins").astype(np.intp)
    step = load("step")[0]

    def work():
        slope = savgol_filter(y, 21, 3, deriv=1, delta=step)
        means = np.bincount(bins, weights=slope, minlength=120) / np.bincount(bins, minlength=120)
        return slope, means, np.polyfit(x, slope, 2)[::-1]

    slope, means, fit = work()
    return {"cpu_ms": [cpu_ms(work)], "slope": list(slope), "means": list(means), "fit": list(fit)}


def band(load):
    """The simultaneous band of a linear model by permuting residual rows, all resamples at once in matrix products.

    Per column: least squares on the design; per resample: projections on the orthonormal design (the mean's never changes),
    residual variance pooled with triangular weights, largest |t| of the side (last column of the design).
    """
    design, values, permutations = load("design"), load("values"), load("permutations")
    runs, columns, pool, level = load("shape")[:4]
    runs, columns, pool = int(runs), int(columns), int(pool)
    design = design.reshape(runs, -1)
    values = values.reshape(runs, columns)
    given = permutations.reshape(-1, runs).astype(np.intp)
    distance = np.abs(np.subtract.outer(np.arange(columns), np.arange(columns)))
    kernel = np.clip(1 - distance / (pool + 1), 0, None)
    random = np.random.default_rng(1)
    rows = np.arange(len(given))[:, None]
    # Room that every call uses again: fresh pages would cost more than the products.
    back, weights = np.empty_like(given), np.empty(given.shape)
    side, left, variance = (np.empty((len(given), columns)) for _ in range(3))

    def critical(order):
        basis = np.linalg.qr(design)[0]
        residuals = values - basis @ (basis.T @ values)
        whole = np.einsum("rk,rk->k", residuals, residuals)
        back[rows, order] = np.arange(runs)
        left[:] = whole
        for direction in basis.T[1:]:
            np.take(direction, back, out=weights, mode="clip")
            np.matmul(weights, residuals, out=side)
            np.square(side, out=side)
            np.subtract(left, side, out=left)
        np.matmul(left, kernel, out=variance)
        np.divide(variance, kernel.sum(axis=0) * (runs - design.shape[1]), out=variance)
        np.divide(side, variance, out=side)
        largest = np.sort(side.max(axis=1))
        return np.sqrt(largest[int(np.ceil((len(order) + 1) * level)) - 1])

    def work():
        critical(random.permuted(np.tile(np.arange(runs), (len(given), 1)), axis=1))

    return {"cpu_ms": [cpu_ms(work)], "critical": [critical(given)]}


TASKS = {"smoothing": smoothing, "band": band}

if __name__ == "__main__":
    task, folder = sys.argv[1:]
    answer = TASKS[task](lambda name: np.fromfile(os.path.join(folder, name + ".f64"), dtype="<f8"))
    json.dump({key: [float(value) for value in values] for key, values in answer.items()}, sys.stdout)
