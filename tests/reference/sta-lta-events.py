"""Events by STA/LTA with onsets by AIC, plain numpy over the whole signal; writes sta-lta-events.json beside it.

Run: python3 tests/reference/sta-lta-events.py
Also the peer of the benchmark: `events(x, rate)` is what a lab's own script does.
"""
import json
import os

import numpy as np

RATE = 192_000
SECONDS = 4


def events(x, rate, short_s=0.0005, long_s=0.02, on=5.0, off=1.5, before_s=0.004, after_s=0.002):
    ns, nl = round(short_s * rate), round(long_s * rate)
    before, after = round(before_s * rate), round(after_s * rate)
    sums = np.concatenate(([0.0], np.cumsum(x.astype(np.float64) ** 2)))
    sta = (sums[nl:] - sums[nl - ns : len(sums) - ns]) / ns
    lta = (sums[nl:] - sums[: len(sums) - nl]) / nl
    ratio = np.zeros(len(x))
    ratio[nl - 1 :] = np.divide(sta, lta, out=np.zeros_like(sta), where=lta > 0)
    above, below = np.flatnonzero(ratio > on), np.flatnonzero(ratio < off)
    found, at = [], 0
    while True:
        k = np.searchsorted(above, at)
        if k == len(above):
            return found
        trigger = int(above[k])
        k = np.searchsorted(below, trigger)
        end = int(below[k]) if k < len(below) else len(x)
        start = max(0, trigger - before)
        found.append((trigger, end, start + aic_pick(x[start : trigger + after].astype(np.float64))))
        at = end


def aic_pick(w):
    n = len(w)
    k = np.arange(2, n - 1)
    sums, squares = np.cumsum(w), np.cumsum(w * w)
    a = squares[k - 1] / k - (sums[k - 1] / k) ** 2
    b = (squares[-1] - squares[k - 1]) / (n - k) - ((sums[-1] - sums[k - 1]) / (n - k)) ** 2
    tiny = 1e-30
    return int(k[np.argmin(k * np.log(np.maximum(a, tiny)) + (n - k - 1) * np.log(np.maximum(b, tiny)))])


def signal():
    """Whole numbers by a linear congruential generator, so that any language makes the same: noise, and 60 bursts that halve."""
    state, count = 12345, RATE * SECONDS
    noise = np.empty(count, np.int64)
    for n in range(count):
        state = (1664525 * state + 1013904223) % 2**32
        noise[n] = (state >> 16) % 201 - 100
    x = noise.copy()
    for burst in range(60):
        state = (1664525 * state + 1013904223) % 2**32
        onset = 5000 + burst * 12_600 + (state >> 16) % 9000
        peak, half = 1000 << burst % 5, 20 << burst % 6
        for n in range(min(14 * half, count - onset)):
            # The sign turns every 3 samples; every second burst dies within a fraction of the window after the trigger.
            x[onset + n] += (peak >> n // half) * (1 if n // 3 % 2 == 0 else -1)
    x[count - 100 :] += np.where(np.arange(100) % 2 == 0, 8000, -8000)
    return x


if __name__ == "__main__":
    x = signal()
    path = os.path.join(os.path.dirname(__file__), "sta-lta-events.json")
    with open(path, "w") as out:
        found = events(x.astype(np.float32), RATE)
        json.dump({"sampleRateHz": RATE, "numpy": np.__version__, "checksum": int(np.abs(x).sum()), "events": found}, out)
        out.write("\n")
    print(len(found), "events")
