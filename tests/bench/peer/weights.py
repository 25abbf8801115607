"""What each bin adds to a mel band, to a third octave, and to the levels below and above the hearing line."""

import re

import numpy as np

MEL_BANDS = 26
COEFFICIENTS = 13


def mel_bank(grid):
    """Bins by bands, as createMelFilterBank of meyda 5.6.3 (utilities.ts) makes them; for |X|^2."""
    rate_hz = grid.bin_hz * grid.size
    per_band = 1125 * np.log(1 + rate_hz / 2 / 700) / (MEL_BANDS + 1)
    mels = np.float32(np.arange(MEL_BANDS + 2) * per_band).astype(np.float64)
    hz = np.float32(700 * (np.exp(mels / 1125) - 1)).astype(np.float64)
    corners = np.floor((grid.size + 1) * hz / rate_hz).astype(int)
    bank = np.zeros((grid.bins, MEL_BANDS))
    for band in range(MEL_BANDS):
        low, middle, high = corners[band : band + 3]
        bank[low:middle, band] = (np.arange(low, middle) - low) / max(1, middle - low)
        bank[middle:high, band] = (high - np.arange(middle, high)) / max(1, high - middle)
    return bank


def mel_cosines():
    band = np.arange(MEL_BANDS)[:, None]
    return 2 * np.cos(np.pi / MEL_BANDS * (band + 0.5) * np.arange(COEFFICIENTS))


def third_octaves(grid, columns):
    """Bins by the bands that are columns; a line reaches half a bin to both sides, and an edge shares it out by width."""
    indices = [round(10 * np.log10(int(re.search(r"\d+", name).group()) / 1000)) for name in columns]
    line = np.arange(grid.bins)[:, None]
    middles = 1000 * 10 ** (np.array(indices) / 10) / grid.bin_hz
    low, high = middles / 10**0.05, middles * 10**0.05
    return np.clip(np.minimum(line + 0.5, high) - np.maximum(line - 0.5, low), 0, 1) / 3
