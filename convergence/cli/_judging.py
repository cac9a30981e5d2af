"""What `judge` is given: a table, a study or the folder of a run; a ladder and its judgement."""

import sys
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace
from pathlib import Path
from typing import TYPE_CHECKING

from convergence.case_folders import case_folders
from convergence.cli._folder import LADDER, STUDY, default_folder, same_study
from convergence.cli._said import Said
from convergence.columns import bare_quantities
from convergence.dimensions import SYSTEMS, Units
from convergence.errors import Fault, InputError, nearest
from convergence.fields import Fields
from convergence.intake.ladder_file import is_ladder_file, read_ladder
from convergence.intake.table import read_table
from convergence.numbers import DecimalMark
from convergence.record import Record
from convergence.results import Companion, Facts, Findings, Ladder
from convergence.study import Study, load
from convergence.textfile import MOST_BYTES

if TYPE_CHECKING:
    from convergence.bodies.pointwise import PointwiseMap


@dataclass(frozen=True)
class Judged:
    """A judged ladder and what its report needs; `fields` are those of result files, to be drawn.

    `maps` judge every node of result files, where that is asked for; `record` is what the analyst states,
    `inputs` are the files that were read, `kept` is the folder with the levels of its run, `decimal_mark`
    the one that the study asks for.
    """

    findings: Findings
    name: str
    units: Units
    study_text: str
    fields: tuple[Fields, ...] = ()
    maps: "tuple[PointwiseMap, ...]" = ()
    record: Record = field(default_factory=dict)
    inputs: tuple[Path, ...] = ()
    kept: Path | None = None
    decimal_mark: DecimalMark = "point"

    @property
    def all_sound(self) -> bool:
        return self.findings.all_sound


@dataclass(frozen=True)
class JudgedCases:
    """The judged load cases of a study; `loads` says what they differ in, `decimal_mark` as in `Judged`."""

    title: str
    name: str
    study_text: str
    cases: Mapping[str, Judged]
    loads: Mapping[str, str]
    decimal_mark: DecimalMark = "point"

    @property
    def all_sound(self) -> bool:
        return all(case.all_sound for case in self.cases.values())

    @property
    def findings(self) -> dict[str, Findings]:
        """Return the findings of every case."""
        return {name: case.findings for name, case in self.cases.items()}


def judge_saved(study: Study, folder: Path) -> Judged | JudgedCases:
    """Judge the table of a study or its ladder in the folder of its run, or those of all its cases."""
    return replace(_judged_whole(study, folder), decimal_mark=study.head.report_decimal)


def _judged_whole(study: Study, folder: Path) -> Judged | JudgedCases:
    if study.fields:
        return _judged_fields(study)
    if not study.cases:
        return _judged_ladder(study, folder)
    cases: dict[str, Judged] = {}
    faults: list[Fault] = []
    places = case_folders(study.cases)
    for name, case in study.cases.items():
        try:
            cases[name] = _judged_ladder(case, folder / places[name])
        except InputError as error:
            faults += error.faults
    if faults:
        raise InputError(faults)
    return JudgedCases(study.title, study.name, study.text, cases, study.loads())


def _judged_ladder(study: Study, folder: Path) -> Judged:
    second = study.companion
    judged = _judged(study, _solved(study, folder), _solved(second, folder) if second else None)
    return judged if study.table else replace(judged, kept=folder)


def _judged_fields(study: Study) -> Judged:
    """Judge the result files of a study."""
    from convergence.field_levels import field_ladder
    from convergence.field_map import field_map, summaries
    from convergence.judgement import facts_of, judge

    found = field_ladder(study)
    facts = facts_of(found.study)
    findings = judge(found.ladder, found.study.quantities, facts, study.title)
    spec = study.fields.map if study.fields else None
    if spec is None:
        return Judged(
            findings, study.name, study.units, study.text, found.fields, (), study.record, study.inputs
        )
    known = facts.corners is not None and facts.all_corners
    maps = field_map(spec, found.ladder.h, found.pieces, facts.corners or (), known)
    whole = len(found.fields) == len(found.ladder.levels)
    points = found.fields[-1].points if whole else None
    findings = replace(findings, mapped=summaries(maps, study.units, points))
    return Judged(
        findings, study.name, study.units, study.text, found.fields, maps, study.record, study.inputs
    )


def _solved(study: Study, folder: Path) -> Ladder:
    """Return the ladder of a study: that of its table, or the one in the folder of its run."""
    if study.table:
        return study.table
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
    return Judged(findings, study.name, study.units, study.text, record=study.record, inputs=study.inputs)


def judge_paths(paths: Sequence[Path], said: Said) -> list[Judged | JudgedCases]:
    """Judge all inputs; `InputError` has the faults of all."""
    judged: list[Judged | JudgedCases] = []
    faults: list[Fault] = []
    for path in paths:
        try:
            judged.append(judge_path(path, said))
        except InputError as error:
            faults += error.faults
    if faults:
        raise InputError(faults)
    return judged


def judge_path(path: Path, said: Said) -> Judged | JudgedCases:
    """Judge a table (- is standard input), a study or the folder of a run; nothing is solved."""
    if str(path) == "-":
        place = replace(said.place, content=sys.stdin.buffer.read(MOST_BYTES + 1))
        return _judged_table(Path("standard input"), replace(said, place=place))
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
        for name, place in case_folders(cases).items():
            if full.name == place:
                return cases[name]
    return load(folder / STUDY, name=full.name)


def _judged_study(study: Study, folder: Path, said: Said) -> Judged | JudgedCases:
    if said.anything:
        what = "--kind, --degree and the other options on tables are for bare tables"
        raise InputError([Fault(str(study.file), what, "write them in the study")])
    return judge_saved(study, folder)


def _judged_table(path: Path, said: Said) -> Judged | JudgedCases:
    if said.place.content is None and is_ladder_file(path):
        ladder = _without_records(read_ladder(path))
        return _judged_bare(replace(ladder, source=str(path)), {}, said, path, path.stem)
    found = read_table(path, said.place, case=said.case, dimension=said.dimension or 2)
    if not found.case_column:
        return _judged_bare(found.ladders[""], found.units, said, path, path.stem)
    cases = {
        name: _judged_bare(ladder, found.units, said, path, f"{path.stem}: {name}")
        for name, ladder in found.ladders.items()
    }
    return JudgedCases(path.stem, path.stem, "", cases, found.meaning())


def _judged_bare(ladder: Ladder, units: Mapping[str, str], said: Said, path: Path, title: str) -> Judged:
    from convergence.judgement import judge

    quantities = bare_quantities(ladder, units, kinds=said.kinds, degree=said.degree, relative=said.tolerance)
    names = [quantity.name for quantity in quantities]
    unknown = [name for name in said.kinds if name not in names]
    if unknown:
        raise InputError(
            Fault(f"--kind {name}", f"{path} has no such column", nearest(name, names)) for name in unknown
        )
    facts = Facts(degree=said.degree, dimension=said.dimension or 2, kinds=said.kinds)
    findings = judge(ladder, quantities, facts, title)
    return Judged(findings, path.stem, SYSTEMS["consistent"], "", inputs=(path,))


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
