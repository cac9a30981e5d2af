"""`python -m convergence.calibration [FOLDER] [--bank] [--date YYYY-MM-DD]`: bank, table and page.

From the packaged bank of known ladders come histories/table.json, histories/outcomes.csv.gz,
FOLDER/calibration.md and its plots. With --bank the bank itself, and the ladders of families that no
table is made of, are made anew first: about an hour on two processors; it needs NGSolve with Netgen.
"""

import argparse
import importlib.util
from datetime import date
from pathlib import Path

from convergence.calibration import making
from convergence.calibration.bank import BANK, UNSEEN, read_bank, write_bank
from convergence.calibration.calibrate import calibrate, write_calibrated
from convergence.calibration.page import write_page

MISSING = "calibration: NGSolve is not installed; install it with: pip install -e '.[dev]'"
FAILED = "calibration: no bank, as these cases failed: {}; the others are kept in out/bank"


def say(line: str) -> None:
    """Print a line of progress."""
    print(line, flush=True)


def main() -> None:
    """Make what is asked for."""
    parser = argparse.ArgumentParser(prog="python -m convergence.calibration", description=__doc__)
    parser.add_argument("folder", nargs="?", default="figures", type=Path, help="where the page goes")
    parser.add_argument("--bank", action="store_true", help="make the bank anew first: about an hour")
    parser.add_argument("--date", default=date.today(), type=date.fromisoformat, help="date of the table")
    chosen = parser.parse_args()
    if chosen.bank:
        if importlib.util.find_spec("ngsolve") is None:
            raise SystemExit(MISSING)
        for package, path in ((making.FAMILIES, BANK), (making.UNSEEN, UNSEEN)):
            made, failed = making.made_ladders(package, say)
            if failed:
                raise SystemExit(FAILED.format(", ".join(failed)))
            write_bank(made, path)
    ladders = read_bank()
    found = calibrate(ladders, read_bank(UNSEEN), chosen.date, say)
    write_calibrated(found)
    chosen.folder.mkdir(exist_ok=True)
    write_page(chosen.folder, found, ladders)


if __name__ == "__main__":
    main()
