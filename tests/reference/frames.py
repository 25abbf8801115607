"""Reference values for rows of features and powers of long frames, in float64.

Run: python3 tests/reference/frames.py > tests/reference/frames.json
Needs numpy; the tests read the JSON and need none. The mel bank follows the code of meyda 5.6.3 (utilities.ts).
"""

import json

import numpy as np

SAMPLES = 6 * 1024
CASES = [(48_000, 512), (192_000, 2048), (1_000_000, 4096)]


def noise(count, seed):
    """The linear congruential generator of Numerical Recipes, upper 24 bits, -0.5 to 0.5."""
    state = seed
    out = np.empty(count)
    for i in range(count):
        state = (1664525 * state + 1013904223) % 2**32
        out[i] = (state >> 8) / 2**24 - 0.5
    return out


def signals(count):
    n = np.arange(count)
    return {
        "mixture": 0.02 * noise(count, 12345) + 0.25 * np.sin(2 * np.pi * 0.3189 * n) + 0.5 * np.sin(0.005 * n) + 0.05,
        "noise": 0.5 * noise(count, 99),
        "tone": 0.9 * np.sin(2 * np.pi * 0.1234 * n) + 1e-7 * noise(count, 7),
        "offset": 0.2 + 1e-6 * noise(count, 8),
    }


def mel_bank(size, rate_hz):
    per_band = 1125 * np.log(1 + rate_hz / 2 / 700) / 27
    mels = np.float32(np.arange(28) * per_band).astype(np.float64)
    hz = np.float32(700 * (np.exp(mels / 1125) - 1)).astype(np.float64)
    corners = np.floor((size + 1) * hz / rate_hz).astype(int)
    bank = np.zeros((26, size // 2))
    for band in range(26):
        low, middle, high = corners[band : band + 3]
        for k in range(low, middle):
            bank[band, k] = (k - low) / (middle - low)
        for k in range(middle, high):
            bank[band, k] = (high - k) / (high - middle)
    return bank


def third_octaves(rate_hz):
    """IEC 61260-1, base 10: mid-bands 1000 * 10^(x / 10) Hz from 1 kHz up, those whole below Nyquist."""
    half = 10 ** (1 / 20)
    middles = 1000 * 10 ** (np.arange(60) / 10)
    return [(m / half, m * half) for m in middles if m * half <= rate_hz / 2]


def band_mean_square(power, low_line, high_line):
    """Lines reach half a bin to both sides; one that an edge cuts is shared out by width."""
    k = np.arange(power.size)
    share = np.clip(np.minimum(k + 0.5, high_line) - np.maximum(k - 0.5, low_line), 0, 1)
    return float((share * power).sum() / 3)


def describe(x, size, rate_hz):
    mean = x.mean()
    centred = x - mean
    window = 0.5 - 0.5 * np.cos(2 * np.pi * np.arange(size) / size)
    spectrum = np.fft.rfft(centred * window)[: size // 2]
    amplitude = 2 * np.abs(spectrum) / window.sum()
    power = amplitude**2
    k = np.arange(size // 2)
    bin_hz = rate_hz / size
    total = amplitude.sum()
    centroid = (k * amplitude).sum() / total
    spread = np.sqrt((k**2 * amplitude).sum() / total - centroid**2)
    rest = total
    n = size // 2 - 1
    while rest > 0.99 * total and n >= 0:
        rest -= amplitude[n]
        n -= 1
    signs = centred < 0
    logs = np.log(1 + mel_bank(size, rate_hz) @ np.abs(spectrum) ** 2)
    band = np.arange(26)
    cepstral = [float((2 * logs * np.cos(np.pi / 26 * (band + 0.5) * c)).sum()) for c in range(13)]
    octaves = [band_mean_square(power, low / bin_hz, high / bin_hz) for low, high in third_octaves(rate_hz)]
    features = [
        float(mean),
        float((centred**2).mean()),
        float(np.abs(x).max()),
        int(np.count_nonzero(signs[1:] != signs[:-1])),
        float(centroid * bin_hz),
        float(spread * bin_hz),
        float(np.exp(np.log(amplitude).mean()) / amplitude.mean()),
        float((n + 1) * bin_hz),
        float(power[k * bin_hz >= 20_000].sum() / 3),
        float(power[1:].sum() / 3),
        *cepstral,
        *octaves,
    ]
    return {"features": [float(f"{value:.10g}") for value in features], "power": power}


def main():
    cases = []
    for name, signal in signals(SAMPLES * 2).items():
        x = signal.astype(np.float32).astype(np.float64)
        for rate_hz, size in CASES:
            frames = 6 * size // 2
            hop = size // 2
            starts = [max(0, min(i * hop - hop // 2, frames - size)) for i in range(6)]
            rows = [describe(x[:frames][s : s + size], size, rate_hz) for s in starts]
            cases.append(
                {
                    "signal": name,
                    "sampleRateHz": rate_hz,
                    "size": size,
                    "frames": frames,
                    "features": [row["features"] for row in rows],
                    "totalPowers": [float(row["power"].sum()) for row in rows],
                    # Every 37th bin of each frame.
                    "powers": [[float(f"{p:.8g}") for p in row["power"][::37]] for row in rows],
                }
            )
    print(json.dumps({"made": f"numpy {np.__version__}", "cases": cases}))


main()
