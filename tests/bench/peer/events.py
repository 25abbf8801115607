"""The peer of streaming candidates: STA/LTA and AIC by plain numpy over the whole recording, as in tests/reference.

Run: python3 events.py recording.wav OUT_FILE
"""

import importlib.util
import json
import os
import sys

import usage
from recording import Recording

REFERENCE = os.path.join(os.path.dirname(__file__), "../../reference/sta-lta-events.py")


def reference():
    spec = importlib.util.spec_from_file_location("sta_lta_events", REFERENCE)
    module = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(module)
    return module


def main(path, out_path):
    recording = Recording(path)
    [(_, _, _, samples)] = recording.pieces(recording.frames, 0)
    found = reference().events(samples, recording.rate_hz)
    with open(out_path, "w") as out:
        json.dump(found, out)


if __name__ == "__main__":
    main(sys.argv[1], sys.argv[2])
    usage.report()
