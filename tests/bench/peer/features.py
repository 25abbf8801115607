"""The peer of `npm run bench`: what a lab's own script on numpy and scipy does at best to get what a measurement writes.

Run: OPENBLAS_NUM_THREADS=1 python3 features.py recording.wav OUT_FOLDER column,column,...

One pass in float32, in pieces of 2^20 samples, with scipy's float32 transform on strided frames, all of it written to disk:
- a row of descriptors for each long frame: the columns that are asked for, by our names and definitions,
- the audible picture from level 1 up (half a decibel per code, the greatest of four columns),
- the ultrasonic picture of the short frames from level 2 up,
- minimum and maximum of every 256, 1024, ... samples,
- level of the whole, and mean, maximum and median (by histogram) of the long-term spectrum.

It leaves out what ours does besides: mains lines, drop-outs, effective bits, levels over time, spectra of quiet and of active
frames, any container but the plainest.
"""

import json
import os
import sys

import numpy as np
from scipy import fft

import usage
from pyramids import Pyramid, cells, greatest, extremes
from recording import Recording, hann, long_grid, short_grid
from weights import mel_bank, mel_cosines, third_octaves

PIECE = 1 << 20
PEAK_CELL = 256
POINTS = 1024
MINIMUM_DB = -120
DB_PER_CODE = 0.5
# The upper bits of a float32: four cells for each doubling, from 2^-64 up.
CELL_SHIFT = 21
FIRST_CELL = 63 << 2
CELLS = 288
f32 = np.float32


def amplitudes(windowed, size, first, end):
    """2 |X| / sum(w) of the bins [first, end)."""
    found = np.abs(fft.rfft(windowed, axis=1, overwrite_x=True)[:, first:end])
    found *= f32(4 / size)
    return found


def codes_of(amplitude):
    code = np.log(np.maximum(amplitude, f32(1e-15)))
    code *= f32(20 / np.log(10) / DB_PER_CODE)
    code += f32(0.5 - MINIMUM_DB / DB_PER_CODE)
    return np.clip(code, 0, 255, out=code).astype(np.uint8)


class LongFrames:
    def __init__(self, recording, folder, columns):
        grid = self.grid = long_grid(recording)
        self.columns = columns
        self.table = open(f"{folder}/frames.f32", "wb")
        self.picture = Pyramid(folder, "audible", greatest, 1, PIECE // grid.hop // 4)
        self.spectra = LongTermSpectra(grid)
        self.window = hann(grid.size).astype(f32)
        k = np.arange(grid.bins)
        self.moments = np.stack([np.ones(grid.bins), k, k * k], axis=1).astype(f32)
        self.bands = [name for name in columns if name.startswith("band")]
        self.cepstral = [name for name in columns if name.startswith("mfcc")]
        sides = np.stack([(k > 0) & (k < grid.hearing_bin), k >= grid.hearing_bin], axis=1) / 3
        parts = [sides, third_octaves(grid, self.bands)] if self.bands else [sides]
        if self.cepstral:
            parts.append(mel_bank(grid) * (grid.size**2 / 16))
        self.weights = np.concatenate(parts, axis=1).astype(f32)
        self.cosines = mel_cosines().astype(f32)

    def push(self, samples, read_from, start, end):
        grid = self.grid
        frames = grid.frames_of(samples, read_from, grid.starts(start, end))
        row = {}
        peak = np.maximum(frames.max(axis=1), -frames.min(axis=1))
        centred = frames - frames.mean(axis=1, keepdims=True)
        square = np.einsum("fn,fn->f", centred, centred) / f32(grid.size)
        signs = np.signbit(centred)
        crossings = (signs[:, 1:] ^ signs[:, :-1]).sum(axis=1, dtype=np.int32)
        row["rmsDbFs"] = 10 * np.log10(2 * square)
        row["peakDbFs"] = 20 * np.log10(peak)
        row["crestDb"] = 20 * np.log10(peak / np.sqrt(square))
        row["zeroCrossingsPerSecond"] = crossings * grid.bin_hz
        centred *= self.window
        amplitude = amplitudes(centred, grid.size, 0, grid.bins)
        power = amplitude * amplitude
        self.describe_shape(amplitude, row)
        self.describe_bands(power, row)
        self.table.write(np.stack([row[name] for name in self.columns], axis=1).astype(f32))
        self.picture.push(codes_of(greatest(amplitude[:, 1 : grid.hearing_bin])))
        self.spectra.push(power)

    def describe_shape(self, amplitude, row):
        grid = self.grid
        total, first, second = (amplitude @ self.moments).T
        centroid = first / total
        row["centroidAmplitudeHz"] = centroid * grid.bin_hz
        row["spreadAmplitudeHz"] = np.sqrt(np.maximum(0, second / total - centroid * centroid)) * grid.bin_hz
        # One logarithm for four bins that lie far apart.
        four = amplitude.reshape(-1, 4, grid.bins // 4)
        product = four[:, 0] * four[:, 1] * (four[:, 2] * four[:, 3])
        logs = np.log(product, out=product).sum(axis=1)
        row["flatnessAmplitude"] = np.exp(logs / grid.bins) * grid.bins / total
        row["rolloff99AmplitudeHz"] = rolloff(amplitude, total) * grid.bin_hz

    def describe_bands(self, power, row):
        sums = power @ self.weights
        row["levelAbove20kHzDbFs"] = 10 * np.log10(2 * sums[:, 1])
        row["shareAbove20kHz"] = sums[:, 1] / (sums[:, 0] + sums[:, 1])
        end = 2 + len(self.bands)
        row.update(zip(self.bands, 10 * np.log10(2 * sums[:, 2:end]).T))
        if self.cepstral:
            row.update(zip(self.cepstral, (np.log1p(sums[:, end:]) @ self.cosines).T))

    def finish(self, folder):
        self.table.close()
        self.picture.finish()
        self.spectra.write(f"{folder}/spectra.f32")


def rolloff(amplitude, total):
    """Bins below which 99 % lie: first whole groups of 32, then bins of the group after them."""
    frame = np.arange(len(amplitude))
    groups = amplitude.reshape(len(amplitude), -1, 32)
    upto = np.cumsum(groups.sum(axis=2), axis=1)
    threshold = f32(0.99) * total
    group = np.minimum((upto < threshold[:, None]).sum(axis=1), groups.shape[1] - 1)
    rest = threshold - np.where(group > 0, upto[frame, group - 1], 0)
    return 32 * group + (np.cumsum(groups[frame, group], axis=1) < rest[:, None]).sum(axis=1)


class LongTermSpectra:
    """Mean and maximum of all frames; for the median, a histogram of every other one, which hold all samples once."""

    def __init__(self, grid):
        self.points = min(grid.bins, POINTS)
        self.maximum = np.zeros(self.points, f32)
        self.sum = np.zeros(self.points)
        self.counts = np.zeros(self.points * CELLS, np.int64)
        self.rows = np.arange(self.points, dtype=np.int32) * CELLS
        self.frames = 0

    def push(self, power):
        points = power if power.shape[1] == self.points else power.reshape(len(power), self.points, -1).mean(axis=2)
        np.maximum(self.maximum, points.max(axis=0), out=self.maximum)
        self.sum += points.sum(axis=0)
        cell = (points[::2].view(np.uint32) >> CELL_SHIFT).astype(np.int32)
        cell -= FIRST_CELL
        np.clip(cell, 0, CELLS - 1, out=cell)
        cell += self.rows
        self.counts += np.bincount(cell.ravel(), minlength=len(self.counts))
        self.frames += len(power)

    def write(self, path):
        seen = self.counts.reshape(-1, CELLS).cumsum(axis=1)
        cell = (seen < seen[:, -1:] / 2).sum(axis=1)
        median = ((cell + FIRST_CELL).astype(np.uint32) << CELL_SHIFT).view(f32)
        np.stack([self.sum / self.frames, self.maximum, median]).astype(f32).tofile(path)


class ShortFrames:
    """The mean of a frame reaches bins 0 and 1 alone, which the picture does not show: it is left in."""

    def __init__(self, recording, folder):
        grid = self.grid = short_grid(recording)
        self.picture = Pyramid(folder, "ultrasonic", greatest, 2, PIECE // grid.hop // 16)
        self.window = hann(grid.size).astype(f32)

    def push(self, samples, read_from, start, end):
        grid = self.grid
        frames = grid.frames_of(samples, read_from, grid.starts(start, end))
        amplitude = amplitudes(frames * self.window, grid.size, grid.hearing_bin, grid.bins)
        self.picture.push(codes_of(greatest(greatest(amplitude))))


class Levels:
    def __init__(self, folder):
        self.peaks = Pyramid(folder, "peaks", extremes, 0, PIECE // PEAK_CELL)
        self.sum = self.squares = 0.0

    def push(self, samples):
        self.peaks.push(cells(samples, PEAK_CELL))
        self.sum += float(samples.sum(dtype=np.float64))
        self.squares += float(np.dot(samples, samples))

    def finish(self, folder, frames):
        self.peaks.finish()
        mean = self.sum / frames
        facts = {"mean": mean, "rmsDbFs": 10 * np.log10(2 * (self.squares / frames - mean * mean))}
        with open(f"{folder}/levels.json", "w") as file:
            json.dump(facts, file)


def measure(path, folder, columns):
    recording = Recording(path)
    os.makedirs(folder, exist_ok=True)
    long_frames, short_frames = LongFrames(recording, folder, columns), ShortFrames(recording, folder)
    levels = Levels(folder)
    # A frame that an end of the recording moved begins up to a frame before its own hop.
    for start, end, read_from, samples in recording.pieces(PIECE, long_frames.grid.size):
        levels.push(samples[start - read_from : end - read_from])
        long_frames.push(samples, read_from, start, end)
        short_frames.push(samples, read_from, start, end)
    long_frames.finish(folder)
    short_frames.picture.finish()
    levels.finish(folder, recording.frames)


if __name__ == "__main__":
    measure(sys.argv[1], sys.argv[2], sys.argv[3].split(","))
    usage.report()
