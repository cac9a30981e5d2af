"""Threads for work on chunks of cells, most of which numpy does without holding the interpreter.

Chunks are summed in their order, so results do not depend on the number of threads.
"""

import os
from concurrent.futures import ThreadPoolExecutor

MOST = 8


def workers() -> ThreadPoolExecutor:
    """Return a pool with a thread for each processor this process may use, up to eight."""
    allowed = len(os.sched_getaffinity(0)) if hasattr(os, "sched_getaffinity") else os.cpu_count()
    return ThreadPoolExecutor(min(MOST, allowed or 1))
