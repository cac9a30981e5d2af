"""The end of the document: caution, and what it takes to get the same numbers again."""

from collections.abc import Mapping, Sequence
from hashlib import sha256
from pathlib import Path

from convergence.report import records
from convergence.report.content import Block, Bullets, Details, Section, Table, Verbatim, Words
from convergence.textfile import digest_of

CAUTION = (
    "The discretization error is one part of the uncertainty of a result. It says how far the numbers are"
    " from the exact answer of this model, not how far the model is from the part.",
    "Modelling, loads, material data and code checks stay with the analyst.",
    "Local codes and licensed practice decide what may be built, operated or approved.",
    "A balance of forces proves bookkeeping and solver; it says nothing about the mesh.",
)


def caution_section() -> Section:
    """Return what the document must not be taken for."""
    return Section("caution", "Caution", "Caution", [Bullets(CAUTION)])


def digests(study_text: str, inputs: Sequence[Path]) -> dict[str, str]:
    """Return the SHA-256 of the study and of every file that was read and is still there."""
    found = {"SHA-256 of the study": sha256(study_text.encode()).hexdigest()} if study_text else {}
    for path in inputs:
        if path.is_file():
            found[f"SHA-256 of {path.name}"] = digest_of(path)
    return found


def trace_section(facts: Mapping[str, str], study_text: str) -> Section:
    """Return facts such as command and date, the versions and the study itself."""
    known = {**facts, **records.versions()}
    rows = [tuple(Words(words, given=True) for words in row) for row in known.items()]
    blocks: list[Block] = [Table("How to get these numbers again", ("what", "which"), rows, "words")]
    if study_text:
        blocks.append(Details("The study as it was read", [Verbatim(study_text)]))
    return Section("trace", "Traceability", "Traceability", blocks)
