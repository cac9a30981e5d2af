"""A run killed by the system: the same command continues it and ends with the same numbers."""

import os
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest

from convergence import climbing
from convergence.climbing import LADDER, level_file
from convergence.intake.ladder_file import read_ladder

STUDY = """
[model]
name = "thick_cylinder"

[ladder]
divisions = 2
levels = 5
shape = "triangle"
degree = 2

[quantities.growth]
measure = "displacement"
at = "bore_x"
component = "x"

[quantities.peak]
measure = "peak_stress"
"""


def text_without_cost(path: Path) -> list[list[str]]:
    """The cells of a ladder file as they are printed, without the columns of seconds and memory."""
    rows = [line.split(",") for line in path.read_text().splitlines() if not line.startswith("#")]
    place = rows[0].index("seconds")
    assert rows[0][place + 1] == "memory"
    return [row[:place] + row[place + 2 :] for row in rows]


@pytest.mark.slow
def test_killed_by_the_system_in_the_middle(tmp_path: Path) -> None:
    """kill -9 after two levels, then the same command: byte for byte the numbers of a straight run."""
    file, folder = tmp_path / "barrel.toml", tmp_path / "out"
    file.write_text(STUDY)
    command = [sys.executable, "-m", "convergence", "run", str(file), "--out", str(folder)]
    home = Path(climbing.__file__).parents[1]
    environment = {**os.environ, "PYTHONPATH": str(home)}
    process = subprocess.Popen(command, env=environment, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
    deadline = time.monotonic() + 60.0
    while process.poll() is None and not level_file(folder, 2).exists():
        assert time.monotonic() < deadline, "no level within a minute"
        time.sleep(0.002)
    process.send_signal(signal.SIGKILL)
    assert process.wait() == -signal.SIGKILL
    left = read_ladder(folder / LADDER)
    assert 2 <= len(left.levels) < 5
    written = {number: level_file(folder, number).stat().st_mtime_ns for number in range(len(left.levels))}
    again = subprocess.run(command, env=environment, capture_output=True, text=True, timeout=120, check=False)
    assert again.returncode in (0, 1), again.stderr
    for number, stamp in written.items():
        assert level_file(folder, number).stat().st_mtime_ns == stamp, "solved twice"
    straight = [*command[:-1], str(tmp_path / "straight")]
    subprocess.run(straight, env=environment, capture_output=True, timeout=120, check=False)
    assert text_without_cost(folder / LADDER) == text_without_cost(tmp_path / "straight" / LADDER)
