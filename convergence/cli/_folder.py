"""The folder a run leaves: the study's copy, the ladder, the levels, the report."""

import shutil
from pathlib import Path

from convergence.errors import Fault, InputError
from convergence.results import Ladder
from convergence.study import Study
from convergence.textfile import write_text

STUDY = "study.toml"
LADDER = "ladder.csv"


def default_folder(name: str) -> Path:
    """Return where a study is kept if the user does not say."""
    return Path("out") / name


def keep_study(study: Study, folder: Path) -> None:
    """Copy the study, and its tables where it has some, so that the folder can be judged by itself."""
    folder.mkdir(parents=True, exist_ok=True)
    write_text(folder / STUDY, study.text)
    for each in (study, study.companion):
        if each is None or each.table_file is None:
            continue
        copy = folder / each.table_file.name
        if not (copy.exists() and copy.samefile(each.table_file)):
            shutil.copyfile(each.table_file, copy)


def same_study(study: Study, ladder: Ladder, path: Path) -> Ladder:
    """Return the ladder; `InputError` where it was made from another study."""
    if ladder.fingerprint != study.fingerprint:
        what = "the ladder was made from another study (model, sizes, quantities or version differ)"
        right = "run the study again; --out FOLDER keeps the old ladder"
        raise InputError([Fault(str(path), what, right)])
    return ladder
