"""Samples of a plain WAV file (one channel, 24 bits) and the frames that server/signal/frame-plan.ts lays over them."""

import os

import numpy as np

HEARING_LINE_HZ = 20_000
HEAD_BYTES = 44


class Recording:
    def __init__(self, path):
        self.path = path
        with open(path, "rb") as file:
            head = file.read(HEAD_BYTES)
        assert head[8:16] == b"WAVEfmt " and head[36:40] == b"data", "a plain WAV file"
        assert int.from_bytes(head[22:24], "little") == 1 and head[34] == 24, "one channel of 24 bits"
        self.rate_hz = int.from_bytes(head[24:28], "little")
        self.frames = (os.path.getsize(path) - HEAD_BYTES) // 3

    def pieces(self, length, reach):
        """Samples [start, end) of each piece, with `reach` more on both sides where there are so many."""
        with open(self.path, "rb", buffering=0) as file:
            for start in range(0, self.frames, length):
                end = min(start + length, self.frames)
                read_from = max(0, start - reach)
                samples = read_samples(file, read_from, min(end + reach, self.frames))
                yield start, end, read_from, samples


def read_samples(file, start, end):
    """Every sample as the upper three bytes of an int32, read with a stride of three bytes."""
    file.seek(HEAD_BYTES + 3 * start - 1)
    raw = file.read(3 * (end - start) + 1)
    packed = np.ndarray(end - start, "<i4", raw, 0, (3,))
    return np.multiply(packed & -256, np.float32(2.0**-31), dtype=np.float32)


class Grid:
    """Frames of one size: centred on their hop, those at both ends moved inside."""

    def __init__(self, size, recording):
        self.size = size
        self.hop = size // 2
        self.frames = recording.frames
        self.bin_hz = recording.rate_hz / size
        self.bins = size // 2
        self.hearing_bin = int(np.ceil(HEARING_LINE_HZ / self.bin_hz - 1e-9))

    def starts(self, start, end):
        """First samples of the frames whose hops begin in [start, end)."""
        first, last = -(-start // self.hop), -(-end // self.hop)
        return np.clip(np.arange(first, last) * self.hop - self.hop // 2, 0, self.frames - self.size)

    def frames_of(self, samples, read_from, starts):
        """A view of the samples with a stride of one hop; copies where an end of the recording moved a frame."""
        count = len(starts)
        if starts[-1] - starts[0] != (count - 1) * self.hop:
            return np.stack([samples[s - read_from : s - read_from + self.size] for s in starts])
        step = samples.strides[0]
        return np.lib.stride_tricks.as_strided(
            samples[starts[0] - read_from :], (count, self.size), (self.hop * step, step)
        )


def long_grid(recording):
    nearest = 2 ** round(np.log2(0.0107 * recording.rate_hz))
    return Grid(min(max(nearest, 256), 16384), recording)


def short_grid(recording):
    return Grid(512 if recording.rate_hz > 400_000 else 256, recording)


def hann(size):
    return 0.5 - 0.5 * np.cos(2 * np.pi * np.arange(size) / size)
