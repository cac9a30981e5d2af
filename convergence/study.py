"""A study file, read and checked: what is to be solved or which table is to be judged, and what counts."""

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from pathlib import Path
from typing import TYPE_CHECKING, Any

from convergence import rooms
from convergence.cases import loads_of
from convergence.dimensions import SYSTEMS, Units
from convergence.errors import Fault, InputError
from convergence.fem.material import Material
from convergence.fem.problem import Problem
from convergence.ladder_spec import LadderSpec
from convergence.model_study import ModelStudy, digest, material_tables, read_materials, read_model
from convergence.printed_balance import EQUILIBRIUM, printed_balances
from convergence.record import RECORD, Record, read_record
from convergence.results import Ladder, Quantity
from convergence.sections import BODY_TABLES, Sections
from convergence.statics import Balance
from convergence.study_head import DEFAULT_SYSTEM, Head, read_head
from convergence.table_study import TableStudy, read_table_study
from convergence.tomlfile import read_toml

if TYPE_CHECKING:
    from convergence.field_study import FieldStudy
    from convergence.mesh_study import MeshStudy

SOURCES = ("model", "table", "meshes", "fields")
SECTIONS = (*SOURCES, "cases", "ladder", "companion", "quantities", *BODY_TABLES, EQUILIBRIUM, RECORD)
COMPANION = "companion"


@dataclass(frozen=True)
class Study:
    """What a study file says: `model`, `arguments` and `ladder`, or `given` and `ladder`, or `table`.

    `given` is the problem on meshes of `files`, `remarks` what was done to these, `acting` the loads of a
    case in words; `fields` are results of another solver on them. `table` is the ladder of the table of
    `table_file` under the names of the quantities. `materials` are under the names of their tables.
    `fingerprint` changes with all that changes a number of a level. `cases` are studies that differ in
    their loads only: they are what is solved and judged. `companion` is the same study on a second ladder,
    kept in the `subfolder` of a run. `balance` is that of loads and reactions another solver printed, in
    `printout`; `head` is what stands above the tables, `record` what the analyst states.
    """

    file: Path
    name: str
    title: str
    head: Head
    units: Units
    quantities: tuple[Quantity, ...]
    materials: Mapping[str, Material]
    text: str
    fingerprint: str
    model: str = ""
    arguments: Mapping[str, Any] | None = None
    ladder: LadderSpec | None = None
    table: Ladder | None = None
    table_file: Path | None = None
    dimension: int = 2
    cases: Mapping[str, "Study"] = field(default_factory=dict)
    companion: "Study | None" = None
    subfolder: str = ""
    balance: Balance | None = None
    printout: Path | None = None
    given: Problem | None = None
    files: tuple[Path, ...] = ()
    remarks: tuple[str, ...] = ()
    acting: str = ""
    fields: "FieldStudy | None" = None
    record: Record = field(default_factory=dict)

    @property
    def cells(self) -> str:
        """Return what the meshes are made of, in words; the name of the file of a table."""
        if self.ladder is None:
            return self.table_file.name if self.table_file else ""
        return f"{self.ladder.shape}s of degree {self.ladder.degree}"

    def problem(self) -> Problem:
        """Return the problem of a study that is solved."""
        if self.given is not None:
            return self.given
        if self.arguments is None:
            raise InputError([Fault(str(self.file), "a table study has nothing to solve", "give [model]")])
        problem: Problem = rooms.find("models", self.model)(**self.arguments, **self.materials)
        return problem

    @property
    def inputs(self) -> tuple[Path, ...]:
        """Return the files that the study names: table, meshes, results, printout."""
        return tuple(dict.fromkeys(f for f in (self.table_file, *self.files, self.printout) if f))

    def loads(self) -> dict[str, str]:
        """Return what the cases differ in, in words for each of them."""
        if self.arguments is None:
            return {name: case.acting for name, case in self.cases.items()}
        arguments = {name: case.arguments or {} for name, case in self.cases.items()}
        return loads_of(rooms.find("models", self.model), self.arguments or {}, arguments, self.units)


def load(path: Path, *, name: str = "", text: str = "") -> Study:
    """Read a study; `InputError` has every fault of the file. The name is the file's where none is given.

    `text` is read in place of the file, as if it stood there.
    """
    sections = Sections(read_toml(path, text), SYSTEMS[DEFAULT_SYSTEM])
    data = sections.file.data
    needed = () if {"meshes", "fields"} & set(data) else material_tables(sections)
    head = read_head(sections, (*SECTIONS, *needed, *(("map",) if "fields" in data else ())))
    blank = Study(
        file=path,
        name=name or path.stem,
        title=head.title or name or path.stem,
        head=head,
        units=sections.units,
        quantities=(),
        materials=read_materials(sections, needed),
        text=sections.file.text,
        fingerprint="",
        record=read_record(sections),
    )
    named = [name for name in SOURCES if name in data]
    if len(named) != 1:
        what = f"both [{'] and ['.join(named)}]" if named else "nothing to judge"
        right = "give one of [model] with name, [table] with file, [meshes] or [fields] with files = [...]"
        sections.fault((), what, right)
        raise InputError(sections.faults)
    study = (_model_study, _table_study, _mesh_study, _field_study)[SOURCES.index(named[0])](sections, blank)
    if EQUILIBRIUM in data:
        study = _balanced(sections, study)
    if sections.faults:
        raise InputError(sections.faults)
    return study


def _model_study(sections: Sections, blank: Study) -> Study:
    found = read_model(sections, blank.materials, blank.head.units)
    study = _on_ladder(blank, found)
    if found.companion is None:
        return study
    return _with_companion(study, _on_ladder(replace(blank, subfolder=COMPANION), found.companion))


def _on_ladder(blank: Study, found: ModelStudy) -> Study:
    study = replace(
        blank,
        model=found.model,
        arguments=found.arguments,
        ladder=found.ladder,
        quantities=found.quantities,
        dimension=found.dimension,
        fingerprint=found.fingerprint(found.arguments),
    )
    cases = {
        name: {"arguments": arguments, "fingerprint": found.fingerprint(arguments)}
        for name, arguments in found.cases.items()
    }
    return _with_cases(study, cases)


def _with_cases(study: Study, cases: Mapping[str, Mapping[str, Any]]) -> Study:
    """Return the study with its load cases; each has the fields that differ from it."""
    whole = {
        name: replace(study, name=f"{study.name}/{name}", title=f"{study.title}: {name}", **own)
        for name, own in cases.items()
    }
    return replace(study, cases=whole)


def _with_companion(study: Study, second: Study) -> Study:
    cases = {name: replace(case, companion=second.cases.get(name)) for name, case in study.cases.items()}
    return replace(study, companion=second, cases=cases)


def _table_study(sections: Sections, blank: Study) -> Study:
    sections.refuse("a table has levels in rows, cases in a column: it has no", "ladder", "cases")
    found = read_table_study(sections, blank.units)
    if found is None:
        return blank
    study = _of_table(blank, found)
    if found.companion is None:
        return study
    return _with_companion(study, _of_table(replace(blank, subfolder=COMPANION), found.companion))


def _mesh_study(sections: Sections, blank: Study) -> Study:
    from convergence.mesh_study import read_mesh_study

    sections.refuse("the meshes of files are the levels: they have no", "ladder", "companion")
    found = read_mesh_study(sections, blank.head.units)
    if found is None:
        return blank
    study = _on_meshes(blank, found)
    cases = {
        name: {"given": problem, "acting": acting, "fingerprint": digest({**found.parts, "case": acting})}
        for name, (problem, acting) in found.cases.items()
    }
    return _with_cases(study, cases)


def _field_study(sections: Sections, blank: Study) -> Study:
    from convergence.field_study import read_field_study

    sections.refuse("a study of result files has no", "ladder", "companion", "cases")
    found = read_field_study(sections, blank.head.units)
    if found is None:
        return blank
    return replace(_on_meshes(blank, found), fields=found)


def _on_meshes(blank: Study, found: "MeshStudy | FieldStudy") -> Study:
    return replace(
        blank,
        given=found.problem,
        files=found.files,
        remarks=found.remarks,
        ladder=found.ladder,
        quantities=found.quantities,
        dimension=found.problem.part.dimension,
        fingerprint=digest(dict(found.parts)),
    )


def _balanced(sections: Sections, study: Study) -> Study:
    """Return the study, or each of its cases, with the balance of the printout that [equilibrium] names."""
    solved = study.ladder is not None and study.fields is None
    second = study.companion.table_file if study.companion else None
    others = [file for file in (study.table_file, second, *study.files) if file]
    path, found = printed_balances(sections, list(study.cases), others, solved=solved)
    cases = {name: replace(case, balance=found.get(name)) for name, case in study.cases.items()}
    return replace(study, cases=cases, balance=found.get(""), printout=path)


def _of_table(blank: Study, found: TableStudy) -> Study:
    study = replace(
        blank,
        quantities=found.quantities,
        table=found.ladders.get(""),
        table_file=found.file,
        dimension=found.said["dimension"],
        fingerprint=digest(found.parts()),
    )
    cases = {
        name: {"table": found.ladders[name], "acting": acting, "fingerprint": digest(found.parts(name))}
        for name, acting in found.meaning.items()
    }
    return _with_cases(study, cases)
