"""What `compare` is given, two ladders judged alike, and the comparison on the screen."""

from collections.abc import Mapping, Sequence
from pathlib import Path
from typing import TYPE_CHECKING

from convergence.cli._judging import Judged, JudgedCases, judge_path
from convergence.cli._said import Said, kinds_of
from convergence.errors import Fault, InputError, listing

if TYPE_CHECKING:
    from convergence.comparison import Comparison

COLOURS = {"meet": "green", "part": "red", "cannot be compared": "magenta"}


def matches_of(words: tuple[str, ...]) -> dict[str, str]:
    """Return the name in the first ladder -> in the second from words FIRST=SECOND."""
    faults = [
        Fault(f"--match {word}", "not FIRST=SECOND", 'e.g. --match "tip deflection=u_tip"')
        for word in words
        if not all(part.strip() for part in word.partition("="))
    ]
    if faults:
        raise InputError(faults)
    return {a.strip(): b.strip() for a, _, b in (word.partition("=") for word in words)}


def said_of(
    kinds: tuple[str, ...], match: Mapping[str, str], degrees: tuple[int, ...], dimension: int | None
) -> tuple[Said, Said]:
    """Return what is said of the first and of the second where these are bare tables."""
    if len(degrees) > 2:
        raise InputError([Fault("--degree", "more than two", "once for both, or first and second", degrees)])
    known = kinds_of(kinds)
    theirs = {match.get(name, name): kind for name, kind in known.items()}
    first, second = (degrees[0], degrees[-1]) if degrees else (None, None)
    return Said(known, first, None, dimension), Said(theirs, second, None, dimension)


def judge_both(paths: tuple[Path, Path], said: tuple[Said, Said]) -> list[Judged | JudgedCases]:
    """Judge both; `InputError` has the faults of both."""
    judged: list[Judged | JudgedCases] = []
    faults: list[Fault] = []
    bare = [not path.is_dir() and path.suffix.lower() != ".toml" for path in paths]
    for path, words, is_bare in zip(paths, said, bare, strict=True):
        try:
            judged.append(judge_path(path, words if is_bare or not any(bare) else Said({})))
        except InputError as error:
            faults += error.faults
    if faults:
        raise InputError(faults)
    return judged


def compare_judged(
    judged: Sequence[Judged | JudgedCases],
    paths: tuple[Path, Path],
    match: Mapping[str, str],
    revisions: bool,
) -> "dict[str, Comparison]":
    """Compare what was judged by load case, under "" where there is none."""
    from convergence.comparison import compare

    first, second = ({"": one.findings} if isinstance(one, Judged) else one.findings for one in judged)
    common = [case for case in first if case in second]
    if not common:
        what = f"no load case in common: {_cases(first)} in {paths[0]}, {_cases(second)} in {paths[1]}"
        raise InputError([Fault(str(paths[1]), what, "give the folder of one case of each")])
    names = (str(paths[0]), str(paths[1]))
    return {
        case: compare(first[case], second[case], names=names, match=match, revisions=revisions)
        for case in common
    }


def _cases(found: Mapping[str, object]) -> str:
    return listing([case for case in found if case])


def show_comparisons(found: "Mapping[str, Comparison]") -> None:
    """Print the outcome of every quantity and what follows from it."""
    from rich.text import Text

    from convergence.cli._show import columns, terminal
    from convergence.report._compared import overall, remarks, sentence
    from convergence.report.comparison_page import HEAD, compared_rows

    screen = terminal()
    for case, comparison in found.items():
        table = columns(HEAD)
        for name, word, *rest in compared_rows(comparison):
            table.add_row(Text(name), Text(word, COLOURS[word]), *(Text(cell) for cell in rest))
        screen.print(Text(f"{case}: " * bool(case) + " | ".join(comparison.names), "bold"))
        screen.print(table)
        for one in comparison.compared:
            screen.print(Text(sentence(one, comparison.revisions)))
        screen.print(Text(overall(comparison)))
        for remark in remarks(comparison):
            screen.print(Text(f"Remark: {remark}"))
