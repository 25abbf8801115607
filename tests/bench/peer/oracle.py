"""What a measurement should write, in float64 by the plainest formulas: the measure of how exact ours is.

Run: python3 oracle.py recording.wav OUT_FOLDER column,column,...

Writes frames.f64 (the columns asked for), audible.u8 and ultrasonic.u8 (codes of levels 1 and 2), peaks.f32 (minimum and
maximum of every 256 samples).
"""

import os
import sys

import numpy as np

from pyramids import cells, greatest
from recording import Recording, hann, long_grid, short_grid
from weights import mel_bank, mel_cosines, third_octaves

PIECE = 1 << 20
PEAK_CELL = 256


def powers(frames, grid):
    """|2 X / sum(w)|^2 of bins 0 to N/2 - 1; the mean of every frame removed."""
    window = hann(grid.size)
    centred = frames - frames.mean(axis=1, keepdims=True)
    spectrum = np.fft.rfft(centred * window, axis=1)[:, : grid.bins]
    return np.abs(2 * spectrum / window.sum()) ** 2


def codes_of(power):
    with np.errstate(divide="ignore"):
        level = 10 * np.log10(power)
    return np.clip(np.round((level + 120) / 0.5), 0, 255).astype(np.uint8)


def rolloff_bin(amplitude):
    """Taken away from the top as long as the rest exceeds 99 %, as meyda does it."""
    total = amplitude.sum()
    rest, bin = total, len(amplitude) - 1
    while rest > 0.99 * total and bin >= 0:
        rest -= amplitude[bin]
        bin -= 1
    return bin + 1


def describe(frames, power, grid, columns):
    """One value per frame for every column."""
    frames = frames.astype(np.float64)
    centred = frames - frames.mean(axis=1, keepdims=True)
    amplitude = np.sqrt(power)
    total = amplitude.sum(axis=1)
    k = np.arange(grid.bins)
    centroid = amplitude @ k / total
    square = (centred**2).mean(axis=1)
    peak = np.abs(frames).max(axis=1)
    signs = np.signbit(centred)
    above = power[:, grid.hearing_bin :].sum(axis=1) / 3
    below = power[:, 1 : grid.hearing_bin].sum(axis=1) / 3
    found = {
        "rmsDbFs": 10 * np.log10(2 * square),
        "peakDbFs": 20 * np.log10(peak),
        "crestDb": 20 * np.log10(peak / np.sqrt(square)),
        "zeroCrossingsPerSecond": np.count_nonzero(signs[:, 1:] != signs[:, :-1], axis=1) * grid.bin_hz,
        "centroidAmplitudeHz": centroid * grid.bin_hz,
        "spreadAmplitudeHz": np.sqrt(amplitude @ k**2 / total - centroid**2) * grid.bin_hz,
        "flatnessAmplitude": np.exp(np.log(amplitude).mean(axis=1)) / amplitude.mean(axis=1),
        "rolloff99AmplitudeHz": np.array([rolloff_bin(row) for row in amplitude]) * grid.bin_hz,
        "levelAbove20kHzDbFs": 10 * np.log10(2 * above),
        "shareAbove20kHz": above / (below + above),
    }
    bands = [name for name in columns if name.startswith("band")]
    if bands:
        found.update(zip(bands, 10 * np.log10(2 * (power @ third_octaves(grid, bands))).T))
    cepstral = [name for name in columns if name.startswith("mfcc")]
    if cepstral:
        energy = power * (grid.size**2 / 16)
        found.update(zip(cepstral, (np.log(1 + energy @ mel_bank(grid)) @ mel_cosines()).T))
    return np.stack([found[name] for name in columns], axis=1)


def main(path, folder, columns):
    recording = Recording(path)
    os.makedirs(folder, exist_ok=True)
    long, short = long_grid(recording), short_grid(recording)
    names = ["frames.f64", "audible.u8", "ultrasonic.u8", "peaks.f32"]
    table, audible, ultrasonic, peaks = [open(os.path.join(folder, name), "wb") for name in names]
    for start, end, read_from, samples in recording.pieces(PIECE, long.size):
        frames = long.frames_of(samples, read_from, long.starts(start, end))
        power = powers(frames.astype(np.float64), long)
        table.write(describe(frames, power, long, columns).tobytes())
        audible.write(greatest(codes_of(power[:, 1 : long.hearing_bin])).tobytes())
        frames = short.frames_of(samples, read_from, short.starts(start, end))
        shown = powers(frames.astype(np.float64), short)[:, short.hearing_bin :]
        ultrasonic.write(greatest(greatest(codes_of(shown))).tobytes())
        peaks.write(cells(samples[start - read_from : end - read_from], PEAK_CELL).tobytes())


if __name__ == "__main__":
    main(sys.argv[1], sys.argv[2], sys.argv[3].split(","))
