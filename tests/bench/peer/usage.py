"""What this program took, for the bench that started it."""

import json
import os
import re
import resource


def report():
    path = os.environ.get("RECALESCE_BENCH_USAGE_FILE")
    if path is None:
        return
    used = resource.getrusage(resource.RUSAGE_SELF)
    with open("/proc/self/status") as file:
        # Of this program alone: what getrusage tells begins with the size of the process that started it.
        peak_kib = int(re.search(r"^VmHWM:\s+(\d+) kB", file.read(), re.M).group(1))
    with open(path, "w") as file:
        json.dump({"cpuS": used.ru_utime + used.ru_stime, "peakMb": peak_kib * 1024 / 1e6}, file)
