#!/usr/bin/python3
# SPDX-License-Identifier: Apache-2.0
"""The same leave-one-out by scikit-learn, compared with what bandwright_bench left in a directory.

One fit a fold with all factors; the held-out values for 1 .. a factors follow from the scores, so the peer does
no work twice. Exits with 1 if the held-out values differ.
"""

import os
import statistics
import sys
import time

os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")  # its best setting: the folds are small

import numpy as np
import sklearn
from joblib import Parallel, delayed
from sklearn.cross_decomposition import PLSRegression
from sklearn.model_selection import LeaveOneOut

AGREEMENT = 1e-8  # relative to the spread of the reference values; two algorithms, room for the last factors
RUNS = {"a": 7, "b": 3}
FACTORS = {"a": 10, "b": 20}


def fold(x, y, train, test, factors):
    pls = PLSRegression(n_components=factors, scale=False, tol=1e-28).fit(x[train], y[train])
    scores = pls.transform(x[test])
    return y[train].mean() + np.cumsum(scores * pls.y_loadings_.ravel(), axis=1)[0]


def leave_one_out(x, y, factors, jobs):
    splits = LeaveOneOut().split(x)
    if jobs == 1:
        return np.array([fold(x, y, train, test, factors) for train, test in splits])
    return np.array(Parallel(n_jobs=jobs)(delayed(fold)(x, y, train, test, factors) for train, test in splits))


def median_times(path):
    times = {}
    for line in open(path, encoding="ascii"):
        workers, seconds = line.split()
        times.setdefault(int(workers), []).append(float(seconds))
    return {workers: statistics.median(values) for workers, values in times.items()}


def main(directory, names):
    print(f"scikit-learn {sklearn.__version__}, numpy {np.__version__}")
    print("| job | peer, s (processes) | ours, s: 1 worker | 2 workers | peer / ours, 1 worker | 2 workers | largest difference |")
    print("|---|---|---|---|---|---|---|")
    failed = False
    for name in names:
        stem = os.path.join(directory, name)
        y = np.fromfile(stem + ".reference")
        x = np.fromfile(stem + ".spectra").reshape(len(y), -1)
        ours = np.fromfile(stem + ".held_out").reshape(len(y), -1)
        best = None
        for jobs in (1, 2):
            leave_one_out(x[:20], y[:20], 2, jobs)  # starts the processes
            seconds = []
            for _ in range(RUNS[name]):
                start = time.perf_counter()
                peer = leave_one_out(x, y, FACTORS[name], jobs)
                seconds.append(time.perf_counter() - start)
            if best is None or statistics.median(seconds) < best[0]:
                best = statistics.median(seconds), jobs
        difference = np.abs(peer - ours).max() / y.std(ddof=1) if peer.shape == ours.shape else float("inf")
        failed = failed or not difference <= AGREEMENT
        mine = median_times(stem + ".times")
        print(f"| {name} | {best[0]:.3g} ({best[1]}) | {mine[1]:.3g} | {mine[2]:.3g} | {best[0] / mine[1]:.3g} "
              f"| {best[0] / mine[2]:.3g} | {difference:.1e} |")
    if failed:
        print(f"held-out values differ by more than {AGREEMENT}", file=sys.stderr)
    return 1 if failed else 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1], sys.argv[2:] or ["a", "b"]))
