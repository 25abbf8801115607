"""Levels of pictures and of peaks, each a quarter of the one below, every level in a file of its own."""

import numpy as np

FACTOR = 4


class Pyramid:
    """What is made of one piece is written at once; what spans several pieces is joined at the end."""

    def __init__(self, folder, name, join, first_level, rows_per_piece):
        self.folder, self.name, self.join, self.first_level = folder, name, join, first_level
        self.joins = int(np.log2(rows_per_piece)) // 2
        self.files = {}
        self.top = []

    def write(self, level, rows):
        if level not in self.files:
            self.files[level] = open(f"{self.folder}/{self.name}.{level}", "wb")
        self.files[level].write(np.ascontiguousarray(rows))

    def push(self, rows):
        self.write(self.first_level, rows)
        for level in range(self.first_level + 1, self.first_level + 1 + self.joins):
            rows = self.join(rows)
            self.write(level, rows)
        self.top.append(rows)

    def finish(self):
        rows = np.concatenate(self.top)
        level = self.first_level + self.joins
        while len(rows) > 1:
            rows = self.join(rows)
            level += 1
            self.write(level, rows)
        for file in self.files.values():
            file.close()


def greatest(rows):
    """The greatest of each four rows; the last may be of fewer."""
    whole = len(rows) // FACTOR * FACTOR
    joined = rows[:whole].reshape(-1, FACTOR, rows.shape[1]).max(axis=1)
    return joined if whole == len(rows) else np.vstack([joined, rows[whole:].max(axis=0, keepdims=True)])


def extremes(pairs):
    """Minimum and maximum of each four pairs."""
    whole = len(pairs) // FACTOR * FACTOR
    parts = [pairs[:whole].reshape(-1, FACTOR, 2), pairs[whole:].reshape(1, -1, 2)]
    return np.concatenate([outermost(part[:, :, 0], part[:, :, 1]) for part in parts if part.size])


def cells(samples, length):
    """Minimum and maximum of each `length` samples."""
    whole = len(samples) // length * length
    parts = [samples[:whole].reshape(-1, length), samples[whole:].reshape(1, -1)]
    return np.concatenate([outermost(part, part) for part in parts if part.size])


def outermost(low, high):
    return np.stack([low.min(axis=1), high.max(axis=1)], axis=1)
