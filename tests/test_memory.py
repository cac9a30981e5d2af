"""Peak and allowed memory: measured on this process, and read from groups as Linux writes them."""

import math
from pathlib import Path

import numpy as np
import pytest

from convergence import memory
from convergence.memory import allowed_memory, peak_memory, reset_peak

BLOCK = 40_000_000  # doubles: 320 MB
NO_LIMIT_V1 = 9223372036854771712  # the largest multiple of a page in 63 bits: "no limit" of version 1
on_linux = pytest.mark.skipif(not Path("/proc/self/clear_refs").exists(), reason="/proc tells the peak")


@on_linux
def test_the_peak_counts_what_was_freed_until_it_is_reset() -> None:
    reset_peak()
    before = peak_memory()
    block = np.ones(BLOCK)
    size = block.nbytes / 1e6
    del block
    # the system counts resident pages in batches per thread, here to within 10 MB
    assert peak_memory() - before == pytest.approx(size, abs=10.0)
    reset_peak()
    assert peak_memory() - before == pytest.approx(0.0, abs=10.0)


def test_the_peak_is_known_without_proc(monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    pytest.importorskip("resource")
    counted = peak_memory()
    monkeypatch.setattr(memory, "_PROC", tmp_path / "none")
    reset_peak()
    since_start = peak_memory()
    assert math.isfinite(since_start) and since_start >= counted - 10.0


@on_linux
def test_allowed_is_more_than_held_and_less_than_the_machine_has() -> None:
    text = Path("/proc/meminfo").read_text()
    total = float(text.split("MemTotal:")[1].split()[0]) * 1024 / 1e6
    assert 10.0 < allowed_memory() <= total
    block = np.ones(BLOCK)
    held = allowed_memory()
    # what is taken is no longer free, but held: the sum stays, but for what others take meanwhile
    assert held > block.nbytes / 1e6


def group(folder: Path, **files: object) -> None:
    folder.mkdir(parents=True, exist_ok=True)
    for name, content in files.items():
        (folder / name.replace("memory_", "memory.", 1)).write_text(f"{content}\n")


def rooms(tmp_path: Path, membership: str) -> list[float]:
    (tmp_path / "cgroup").write_text(membership)
    return list(memory._cgroup_rooms(tmp_path / "cgroup", tmp_path / "sys"))


def test_limits_of_groups_version_2(tmp_path: Path) -> None:
    """A group and the one above it have limits; cached files that were not used lately are free."""
    top = tmp_path / "sys/jobs"
    group(top, memory_max=5_000_000_000, memory_current=1_000_000_000)
    group(
        top / "one", memory_max=2_000_000_000, memory_current=700_000_000,
        memory_stat="anon 5\ninactive_file 200000000\nactive_file 9",
    )  # fmt: skip
    assert rooms(tmp_path, "0::/jobs/one\n") == [1500.0, 4000.0]
    group(top / "one", memory_max="max")
    assert rooms(tmp_path, "0::/jobs/one\n") == [4000.0]


def test_limits_of_groups_version_1(tmp_path: Path) -> None:
    top = tmp_path / "sys/memory"
    group(top, memory_limit_in_bytes=NO_LIMIT_V1, memory_usage_in_bytes=10**9)
    group(
        top / "one", memory_limit_in_bytes=3_000_000_000, memory_usage_in_bytes=1_000_000_000,
        memory_stat="inactive_file 1\ntotal_inactive_file 500000000",
    )  # fmt: skip
    mine, above = rooms(tmp_path, "9:name=systemd:/\n4:memory:/one\n1:cpu:/other\n0::/\n")
    assert mine == 2500.0 and above > 1e12


def test_a_container_that_sees_only_its_own_group(tmp_path: Path) -> None:
    """The path is that of the host, the files stand at the mounted root."""
    group(tmp_path / "sys", memory_max=1_000_000_000, memory_current=400_000_000)
    assert rooms(tmp_path, "0::/host/path/of/it\n") == [600.0]
    assert rooms(tmp_path, "0::/\n") == [600.0]


def test_without_groups_there_is_no_limit(tmp_path: Path) -> None:
    assert rooms(tmp_path, "") == [] and rooms(tmp_path, "0::/one\n") == []
