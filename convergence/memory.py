"""Memory of this process in MB (10⁶ bytes): its peak, what it holds now, and what is left for it.

Linux tells all three under /proc (man 5 proc: status, clear_refs, meminfo; cgroup v1 and v2: the kernel's
admin guide, memory controllers). Elsewhere only the peak since the start is known, and the machine's size.
"""

import math
import os
import re
import sys
from collections.abc import Iterator
from contextlib import suppress
from pathlib import Path

MB = 1e6
_PROC = Path("/proc")
_CGROUPS = Path("/sys/fs/cgroup")


def reset_peak() -> None:
    """Let `peak_memory` start anew from now, where the system can; elsewhere it counts from the start."""
    with suppress(OSError):
        (_PROC / "self/clear_refs").write_text("5")


def peak_memory() -> float:
    """Return the largest resident memory of this process since `reset_peak`, NaN where it is not known."""
    peak = _kilobytes(_PROC / "self/status", "VmHWM")
    if math.isfinite(peak):
        return peak * 1024 / MB
    try:
        import resource
    except ImportError:  # Windows
        return math.nan
    unit = 1 if sys.platform == "darwin" else 1024
    return resource.getrusage(resource.RUSAGE_SELF).ru_maxrss * unit / MB


def allowed_memory() -> float:
    """Return up to what resident memory this process may grow: what it holds and what is left."""
    resident = _kilobytes(_PROC / "self/status", "VmRSS")
    held = resident * 1024 / MB if math.isfinite(resident) else 0.0
    return held + min([_free_memory(), *_cgroup_rooms(_PROC / "self/cgroup", _CGROUPS)])


def _free_memory() -> float:
    """Return what the machine has left; its whole memory where no more is known, inf where nothing is."""
    free = _kilobytes(_PROC / "meminfo", "MemAvailable")
    if math.isfinite(free):
        return free * 1024 / MB
    try:
        return os.sysconf("SC_PHYS_PAGES") * os.sysconf("SC_PAGE_SIZE") / MB
    except (AttributeError, OSError, ValueError):
        return math.inf


def _cgroup_rooms(membership: Path, mounted: Path) -> Iterator[float]:
    """Yield what is left under each limit set on a group of this process or on a group above it.

    A group's path may be that of the host: inside a container only the mounted root is there.
    Files in the cache that were not used lately count as free.
    """
    for line in _text(membership).splitlines():
        _, controllers, path = line.split(":", 2)
        if controllers not in ("", "memory"):
            continue
        root = mounted / controllers
        names = (
            ("memory.limit_in_bytes", "memory.usage_in_bytes", "total_inactive_file")
            if controllers
            else ("memory.max", "memory.current", "inactive_file")
        )
        group = root / path.strip("/")
        for folder in (group, *group.parents):
            limit, used = _text(folder / names[0]).strip(), _text(folder / names[1]).strip()
            if limit.isdigit() and used.isdigit():
                cached = re.search(rf"^{names[2]} (\d+)$", _text(folder / "memory.stat"), re.MULTILINE)
                yield (int(limit) - int(used) + (int(cached[1]) if cached else 0)) / MB
            if folder == root:
                break


def _kilobytes(file: Path, name: str) -> float:
    found = re.search(rf"^{name}:\s+(\d+) kB$", _text(file), re.MULTILINE)
    return float(found[1]) if found else math.nan


def _text(file: Path) -> str:
    try:
        return file.read_text()
    except OSError:
        return ""
