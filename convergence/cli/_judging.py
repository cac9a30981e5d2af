"""What `judge` is given: a table, a study or the folder of a run; a ladder and its judgement."""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from pathlib import Path

from convergence.cli._folder import LADDER, STUDY, default_folder, same_study
from convergence.columns import bare_quantities, kind_of
from convergence.dimensions import SYSTEMS, Units
from convergence.errors import Fault, InputError, nearest
from convergence.intake.ladder_file import is_ladder_file, read_ladder
from convergence.intake.table import read_table
from convergence.results import Companion, Facts, Findings, Kind, Ladder
from convergence.study import Study, load


@dataclass(frozen=True)
class Said:
    """What the command line says of bare tables; None where it says nothing."""

    kinds: Mapping[str, Kind]
    degree: int | None = None
    tolerance: float | None = None
    dimension: int | None = None

    @property
    def anything(self) -> bool:
        return bool(self.kinds) or (self.degree, self.tolerance, self.dimension) != (None, None, None)


@dataclass(frozen=True)
class Judged:
    """A judged ladder and what its report needs."""

    findings: Findings
    name: str
    units: Units
    study_text: str

    @property
    def all_sound(self) -> bool:
        return self.findings.all_sound


@dataclass(frozen=True)
class JudgedCases:
    """The judged load cases of a study; `loads` says what they differ in."""

    title: str
    name: str
    study_text: str
    cases: Mapping[str, Judged]
    loads: Mapping[str, str]

    @property
    def all_sound(self) -> bool:
        return all(case.all_sound for case in self.cases.values())

    @property
    def findings(self) -> dict[str, Findings]:
        """Return the findings of every case."""
        return {name: case.findings for name, case in self.cases.items()}


def judge_saved(study: Study, folder: Path) -> Judged | JudgedCases:
    """Judge the ladder of a study in the folder of its run, or those of all its cases."""
    if not study.cases:
        return _judged_ladder(study, folder)
    cases: dict[str, Judged] = {}
    faults: list[Fault] = []
    for name, case in study.cases.items():
        try:
            cases[name] = _judged_ladder(case, folder / name)
        except InputError as error:
            faults += error.faults
    if faults:
        raise InputError(faults)
    return JudgedCases(study.title, study.name, study.text, cases, study.loads())


def _judged_ladder(study: Study, folder: Path) -> Judged:
    second = study.companion
    return _judged(study, _solved(study, folder), _solved(second, folder) if second else None)


def _solved(study: Study, folder: Path) -> Ladder:
    """Return the ladder of a study in the folder of its run."""
    path = folder / study.subfolder / LADDER
    if not path.is_file():
        raise InputError([Fault(str(path), "nothing solved yet", f"meshassay run {study.file}")])
    return replace(same_study(study, read_ladder(path), path), source=str(path))


def _judged(study: Study, ladder: Ladder, second: Ladder | None) -> Judged:
    from convergence.judgement import facts_of, judge

    companion = None
    if study.companion and second:
        companion = Companion(second, study.companion.quantities, study.companion.cells)
        ladder = replace(ladder, remarks=ladder.remarks + second.remarks)
    findings = judge(ladder, study.quantities, facts_of(study), study.title, companion)
    return Judged(findings, study.name, study.units, study.text)


def judge_path(path: Path, said: Said) -> Judged | JudgedCases:
    """Judge a table, a study or the folder of a run; nothing is solved."""
    if path.is_dir():
        return _judged_study(_study_of(path), path, said)
    if path.suffix.lower() == ".toml":
        study = load(path)
        return _judged_study(study, default_folder(study.name), said)
    return _judged_table(path, said)


def _study_of(folder: Path) -> Study:
    """Return the study of a run's folder, or the case of the folder that one of its cases has."""
    full = folder.resolve()
    whole = full.parent / STUDY
    if whole.is_file() and not (folder / STUDY).is_file():
        cases = load(whole, name=full.parent.name).cases
        if full.name in cases:
            return cases[full.name]
    return load(folder / STUDY, name=full.name)


def _judged_study(study: Study, folder: Path, said: Said) -> Judged | JudgedCases:
    if said.anything:
        what = "--kind, --degree, --tolerance and --dimension are for bare tables"
        raise InputError([Fault(str(study.file), what, "write them in the study")])
    if study.table:
        return _judged(study, study.table, study.companion.table if study.companion else None)
    return judge_saved(study, folder)


def _judged_table(path: Path, said: Said) -> Judged:
    from convergence.judgement import judge

    if is_ladder_file(path):
        ladder = _without_records(read_ladder(path))
        ladder, units = replace(ladder, source=str(path)), dict[str, str]()
    else:
        ladder, units = read_table(path, dimension=said.dimension or 2)
    quantities = bare_quantities(ladder, units, kinds=said.kinds, degree=said.degree, relative=said.tolerance)
    names = [quantity.name for quantity in quantities]
    unknown = [name for name in said.kinds if name not in names]
    if unknown:
        raise InputError(
            Fault(f"--kind {name}", f"{path} has no such column", nearest(name, names)) for name in unknown
        )
    facts = Facts(degree=said.degree, dimension=said.dimension or 2, kinds=said.kinds)
    findings = judge(ladder, quantities, facts, path.stem)
    return Judged(findings, path.stem, SYSTEMS["consistent"], "")


def _without_records(ladder: Ladder) -> Ladder:
    """Leave out what checks recorded: CHECK.NAME, where CHECK is no quantity."""
    levels = tuple(
        replace(
            level,
            values={n: v for n, v in level.values.items() if n.partition(".")[0] in level.values},
        )
        for level in ladder.levels
    )
    return replace(ladder, levels=levels)


def kinds_of(words: tuple[str, ...]) -> dict[str, Kind]:
    """Return NAME -> kind from words NAME=KIND."""
    kinds: dict[str, Kind] = {}
    faults: list[Fault] = []
    for word in words:
        name, sign, kind = word.rpartition("=")
        if not sign or not name:
            faults.append(Fault(f"--kind {word}", "not NAME=KIND", "e.g. --kind deflection=displacement"))
            continue
        try:
            kinds[name] = kind_of(name, kind)
        except InputError as error:
            faults += error.faults
    if faults:
        raise InputError(faults)
    return kinds


def tolerance_of(word: str | None) -> float | None:
    """Return 0.05 for "5%" and "0.05"; `InputError` where it is neither."""
    if word is None:
        return None
    percent = word.strip().endswith("%")
    try:
        value = float(word.strip().removesuffix("%")) / (100.0 if percent else 1.0)
    except ValueError:
        value = float("nan")
    if not 0.0 < value < float("inf"):
        raise InputError([Fault("--tolerance", "not a tolerance", "write e.g. 5% or 0.05", word)])
    return value
