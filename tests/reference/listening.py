"""Reference values for what is made for the ear: the upper sideband of a carrier, and a spectral gate, in float64.

Run: python3 tests/reference/listening.py > tests/reference/listening.json
Needs numpy and scipy; the tests read the JSON and need neither.
"""

import json

import numpy as np
import scipy
from scipy import ndimage, signal

RATE_HZ = 96_000
CARRIER_HZ = 40_000
PERIOD = 9600


def noise(count, seed):
    """The linear congruential generator of Numerical Recipes, upper 24 bits, -0.5 to 0.5."""
    state = seed
    out = np.empty(count)
    for i in range(count):
        state = (1664525 * state + 1013904223) % 2**32
        out[i] = (state >> 8) / 2**24 - 0.5
    return out


def make_lines():
    """Periodic in PERIOD samples: lines every 50 Hz on both sides of the carrier."""
    above = np.arange(40_500, 45_000, 50)
    below = np.arange(35_000, 39_500, 50)
    frequencies = np.concatenate([above, below])
    phases = 2 * np.pi * noise(frequencies.size, 7)
    n = np.arange(PERIOD)
    return 0.01 * np.sum(np.cos(2 * np.pi * frequencies[:, None] * n / RATE_HZ + phases[:, None]), axis=0)


def upper_sideband(x):
    """Analytic signal, moved down, what is below the carrier left out, every second sample."""
    n = np.arange(x.size)
    z = signal.hilbert(x) * np.exp(-2j * np.pi * CARRIER_HZ * n / RATE_HZ)
    spectrum = np.fft.fft(z)
    spectrum[np.fft.fftfreq(x.size) < 0] = 0
    return np.real(np.fft.ifft(spectrum))[::2]


SIZE = 1024
GATE_FRAMES = 24_000
QUIET = 8000


def make_hum():
    n = np.arange(GATE_FRAMES)
    x = 0.05 * noise(GATE_FRAMES, 12345) + 0.2 * np.sin(2 * np.pi * 1000 * n / RATE_HZ)
    burst = np.maximum(0, n - 16_000)
    x += np.where(n >= 16_000, 0.8 * np.exp(-burst / 40) * np.sin(2 * np.pi * 31_000 * burst / RATE_HZ), 0)
    return x.astype(np.float32).astype(np.float64)


def smooth(power):
    weights = np.array([1, 2, 3, 2, 1])
    padded = np.convolve(power, weights)[2:-2]
    return padded / np.convolve(np.ones(power.size), weights)[2:-2]


def gate(x):
    window = signal.get_window("hann", SIZE, fftbins=True)
    starts = np.arange(0, QUIET - SIZE + 1, SIZE // 2)
    frames = np.array([np.abs(np.fft.rfft(x[s : s + SIZE] * window)) ** 2 for s in starts])
    profile = smooth(np.median(frames, axis=0) / np.log(2))
    _, _, z = signal.stft(x, window=window, nperseg=SIZE, noverlap=3 * SIZE // 4)
    power = np.abs(z * window.sum()) ** 2
    ratio = np.array([smooth(column) for column in power.T]).T / profile[:, None]
    share = np.clip((10 * np.log10(ratio) - 6) / 6, 0, 1)
    opened = -20 * (1 - share**2 * (3 - 2 * share))
    around = ndimage.maximum_filter1d(opened, 3, axis=1, mode="nearest")
    gain = np.empty_like(around)
    last = np.full(around.shape[0], -20.0)
    for t in range(around.shape[1]):
        last = np.maximum(around[:, t], last - 4)
        gain[:, t] = last
    _, y = signal.istft(z * 10 ** (gain / 20), window=window, nperseg=SIZE, noverlap=3 * SIZE // 4)
    return profile, y[: x.size]


profile, gated = gate(make_hum())
print(
    json.dumps(
        {
            "source": f"numpy {np.__version__}, scipy {scipy.__version__}",
            "sideband": [round(float(v), 6) for v in upper_sideband(make_lines())[::16]],
            "profile": [float(f"{v:.6g}") for v in profile[::16]],
            "gated": [round(float(v), 7) for v in gated[::48]],
            "gatedBurst": [round(float(v), 6) for v in gated[15_990:16_060]],
        }
    )
)
