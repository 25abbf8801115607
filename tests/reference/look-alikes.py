"""Robust scales and groups by average linkage, by numpy and scipy; writes look-alikes.json beside it.

Run: python3 tests/reference/look-alikes.py
"""
import json
import os

import numpy as np
import scipy
from scipy.cluster.hierarchy import fcluster, linkage
from scipy.special import comb
from scipy.stats import median_abs_deviation

FEATURES = 8
ROWS = 72
CUT = 0.9 * np.sqrt(FEATURES)


def numbers(seed):
    """The generator of Numerical Recipes, upper 24 bits, 0 to 1."""
    state = seed
    while True:
        state = (1664525 * state + 1013904223) % 2**32
        yield (state >> 8) / 2**24


def planted(spread):
    """Rows about five middles, in turn."""
    draw = numbers(2026)
    middles = [[6 * next(draw) for _ in range(FEATURES)] for _ in range(5)]
    rows = [[m + spread * (next(draw) - 0.5) for m in middles[n % 5]] for n in range(ROWS)]
    return np.array(rows)


def adjusted_rand(a, b):
    """Hubert and Arabie (1985), eq. 5."""
    table = np.array([[np.sum((a == i) & (b == j)) for j in np.unique(b)] for i in np.unique(a)])
    both, rows, columns = comb(table, 2).sum(), comb(table.sum(1), 2).sum(), comb(table.sum(0), 2).sum()
    chance = rows * columns / comb(len(a), 2)
    return (both - chance) / ((rows + columns) / 2 - chance)


def main():
    cases = []
    for spread in (1.0, 2.2, 3.2, 5.0):
        rows = planted(spread)
        labels = fcluster(linkage(rows, "average"), CUT, "distance")
        cases.append(
            {"spread": spread, "labels": labels.tolist(), "randToPlanted": adjusted_rand(labels, np.arange(ROWS) % 5)}
        )
    draw = numbers(7)
    snr = np.array([10 + 8 * next(draw) for _ in range(41)])
    out = {
        "made": f"numpy {np.__version__}, scipy {scipy.__version__}",
        "cases": cases,
        "snrMedian": float(np.median(snr)),
        "snrSigma": float(1.4826 * median_abs_deviation(snr)),
    }
    path = os.path.join(os.path.dirname(os.path.abspath(__file__)), "look-alikes.json")
    with open(path, "w", encoding="utf-8") as file:
        json.dump(out, file)
        file.write("\n")


if __name__ == "__main__":
    main()
