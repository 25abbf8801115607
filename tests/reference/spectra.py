"""Reference values for frame spectra, descriptors and long-term densities, in float64.

Run: python3 tests/reference/spectra.py > tests/reference/spectra.json
Needs numpy and scipy; the tests read the JSON and need neither.
"""

import json

import numpy as np
import scipy
from scipy import signal

RATE_HZ = 192_000
SIZE = 2048


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


def describe(x):
    x = x - x.mean()
    window = signal.get_window("hann", SIZE, fftbins=True)
    amplitude = 2 * np.abs(np.fft.rfft(x * window))[: SIZE // 2] / window.sum()
    power = amplitude**2
    k = np.arange(SIZE // 2)
    total = amplitude.sum()
    centroid = (k * amplitude).sum() / total
    spread = np.sqrt((k**2 * amplitude).sum() / total - centroid**2)
    flatness = np.exp(np.log(amplitude).mean()) / amplitude.mean()
    # Subtracting from the top while the rest exceeds 99 %: the first bin not taken away, plus one.
    rest = total
    n = SIZE // 2 - 1
    while rest > 0.99 * total and n >= 0:
        rest -= amplitude[n]
        n -= 1
    bin_hz = RATE_HZ / SIZE
    above = power[k * bin_hz >= 20_000].sum()
    signs = x < 0
    crossings = int(np.count_nonzero(signs[1:] != signs[:-1]))
    return {
        "meanSquare": float((x**2).mean()),
        "totalPower": float(power.sum()),
        "powerAtBins": {str(b): float(power[b]) for b in (1, 2, 3, 100, 652, 653, 654, 900, 1023)},
        "centroidHz": float(centroid * bin_hz),
        "spreadHz": float(spread * bin_hz),
        "flatness": float(flatness),
        "rolloff99AmplitudeHz": float((n + 1) * bin_hz),
        "ultrasonicShare": float(above / power[1:].sum()),
        "zeroCrossingRateHz": crossings * RATE_HZ / SIZE,
    }


def main():
    x = make_signal(65_536)
    frequencies, density = signal.welch(
        x, RATE_HZ, window="hann", nperseg=SIZE, noverlap=SIZE // 2, detrend="constant", scaling="density"
    )
    print(
        json.dumps(
            {
                "made": f"numpy {np.__version__}, scipy {scipy.__version__}",
                "firstFrame": describe(x[:SIZE]),
                "welchDbPerHz": {
                    str(b): float(10 * np.log10(density[b])) for b in (1, 2, 50, 300, 652, 653, 654, 800, 1000)
                },
                "welchHz": {str(b): float(frequencies[b]) for b in (1, 653, 1000)},
            },
            indent=2,
        )
    )


main()
