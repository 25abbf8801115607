"""What a measurement should store of a short recording, in float64.

Run: python3 tests/reference/views.py > tests/reference/views.json
Needs numpy; the test reads the JSON and needs none. The signal is made of whole numbers, the same as in views-reference.ts.
"""

import base64
import json
import os
import sys
import tempfile
import wave

import numpy as np

sys.path.insert(0, os.path.join(os.path.dirname(__file__), "../bench/peer"))
import oracle  # noqa: E402

RATE_HZ = 192_000
SAMPLES = 263_123
CLICKS = [(9_000, 4), (21_000, 38), (21_300, 7), (140_000, 3), (262_000, 24)]
COLUMNS = [
    "rmsDbFs",
    "peakDbFs",
    "crestDb",
    "zeroCrossingsPerSecond",
    "centroidAmplitudeHz",
    "spreadAmplitudeHz",
    "flatnessAmplitude",
    "rolloff99AmplitudeHz",
    "levelAbove20kHzDbFs",
    "shareAbove20kHz",
    *[f"mfcc{c}" for c in range(13)],
    *[f"band{round(1000 * 10 ** (x / 10))}HzDbFs" for x in range(20)],
]


PARTS = {"frames": ".f32", "audible": ".u8", "ultrasonic": ".u8", "peaks": ".f32"}


def base64_of(path):
    with open(path, "rb") as file:
        return base64.b64encode(file.read()).decode()


def codes():
    """24-bit codes: noise, a triangle of 50 Hz, and clicks that halve every 64 samples."""
    state = 12345
    for n in range(SAMPLES):
        state = (1664525 * state + 1013904223) % 2**32
        code = (state >> 16) - 32768 + 40 * abs(2 * (n % 3840) - 3840) - 76_800
        for onset, period in CLICKS:
            if n >= onset:
                height = 2**21 >> min(30, (n - onset) // 64)
                code += height if (n - onset) % period < period // 2 else -height
        yield code


def main():
    with tempfile.TemporaryDirectory() as folder:
        path = os.path.join(folder, "recording.wav")
        with wave.open(path, "wb") as file:
            file.setnchannels(1)
            file.setsampwidth(3)
            file.setframerate(RATE_HZ)
            file.writeframes(b"".join(code.to_bytes(3, "little", signed=True) for code in codes()))
        oracle.main(path, folder, COLUMNS)
        with open(os.path.join(folder, "frames.f32"), "wb") as file:
            np.fromfile(os.path.join(folder, "frames.f64")).astype(np.float32).tofile(file)
        kept = {name: base64_of(os.path.join(folder, name + ending)) for name, ending in PARTS.items()}
        print(json.dumps({"made": f"numpy {np.__version__}", "columns": COLUMNS, **kept}, indent=2))


main()
