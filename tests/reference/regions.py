"""Levels and spectra of spans by scipy, in float64: one long enough for Welch's mean, one that is a single frame.

Run: python3 tests/reference/regions.py > tests/reference/regions.json
Needs numpy and scipy; the tests read the JSON and need neither. The signal is that of spectra.py.
"""

import json

import numpy as np
import scipy
from scipy import signal

RATE_HZ = 192_000
SPANS = {"long": (1_000, 31_000), "short": (40_100, 40_700)}


def noise(count, seed):
    """The linear congruential generator of Numerical Recipes, upper 24 bits, -0.5 to 0.5."""
    state = seed
    out = np.empty(count)
    for i in range(count):
        state = (1664525 * state + 1013904223) % 2**32
        out[i] = (state >> 8) / 2**24 - 0.5
    return out


def make_signal(count):
    n = np.arange(count)
    tone = 0.25 * np.sin(2 * np.pi * 61_234.5 * n / RATE_HZ)
    hum = 0.5 * np.sin(2 * np.pi * 150.0 * n / RATE_HZ)
    return (0.02 * noise(count, 12345) + tone + hum + 0.05).astype(np.float32).astype(np.float64)


def density_of(x, kind):
    if kind == "long":
        return signal.welch(x, RATE_HZ, window="hann", nperseg=4096, noverlap=2048, detrend="constant")
    return signal.periodogram(x, RATE_HZ, window="hann", nfft=1024, detrend="constant")


def describe(x, kind):
    frequencies, density = density_of(x, kind)
    # Neither 0 Hz nor half the rate.
    f, d = frequencies[1:-1], density[1:-1]
    rms = np.sqrt(np.mean((x - x.mean()) ** 2))
    peak = np.abs(x).max()
    return {
        "rmsDb": float(20 * np.log10(rms * np.sqrt(2))),
        "peakDb": float(20 * np.log10(peak)),
        "crestDb": float(20 * np.log10(peak / rms)),
        "shareAbove20kHz": float(d[f >= 20_000].sum() / d.sum()),
        "peakFrequencyHz": float(f[np.argmax(d)]),
        "centroidHz": float((f * d).sum() / d.sum()),
        "binHz": float(f[0]),
        "lines": len(d),
        "densityDbPerHz": {str(k): float(10 * np.log10(d[k])) for k in (0, 2, 50, 200, 326, 400, 500)},
    }


def main():
    x = make_signal(65_536)
    made = {"made": f"numpy {np.__version__}, scipy {scipy.__version__}"}
    spans = {
        kind: {"startSample": start, "endSample": end, **describe(x[start:end], kind)}
        for kind, (start, end) in SPANS.items()
    }
    print(json.dumps({**made, **spans}, indent=2))


main()
