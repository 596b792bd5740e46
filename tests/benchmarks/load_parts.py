"""One load of part lists in a process of its own: prints seconds, seconds of the processor, greatest memory in MiB, and how often progress was told.

python -m tests.benchmarks.load_parts RECORD FILE...
"""

from __future__ import annotations

import json
import resource
import sys
import time
from pathlib import Path

from store import files, records


def main() -> None:
    """Load and say what it cost."""
    told = 0

    def tell(what: str, lines: int) -> None:
        nonlocal told
        told += 1

    record = records.open(Path(sys.argv[1]), create=True)
    begun, worked = time.perf_counter(), time.process_time()
    files.load(record, [Path(name) for name in sys.argv[2:]], progress=tell)
    seconds, cpu = time.perf_counter() - begun, time.process_time() - worked
    record.close()
    memory = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
    print(json.dumps({"seconds": seconds, "cpu": cpu, "memory": memory, "told": told}))


if __name__ == "__main__":
    main()
