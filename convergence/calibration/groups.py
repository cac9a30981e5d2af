"""The groups of sub-ladders that coverage is stated for, and what is aimed at in each."""

from collections.abc import Sequence
from dataclasses import dataclass

from convergence.calibration.tally import Judged, Test

AIM = 0.95
WIDTHS = {"bare table": 4.5, "kind known": 4.5, "kind and degree known": 3.5}
SOURCE = "Source of the meshes and levels"
AIMED = (SOURCE, "Kind of quantity", "Dimension")
FAMILY = "Family"
LEAST_LEVELS = 3  # of the groups by anything but the number of levels, and of those with an aimed width
SOURCES = {
    "nested": ("nested", "similar"),
    "nested (drawn parts)": ("nested",),
    "nested (mapped parts)": ("similar",),
    "perturbed": ("perturbed",),
    "remeshed": ("remeshed",),
}
LEVELS = {2: "2 levels", 3: "3 levels", 4: "4 levels", 5: "5 levels and more"}


@dataclass(frozen=True, eq=False)
class Group:
    """Sub-ladders of one kind under a name; `table` is the heading that it stands under."""

    table: str
    name: str
    members: Sequence[Judged]

    @property
    def is_of_two_levels(self) -> bool:
        return all(one.levels < LEAST_LEVELS for one in self.members)


def groups(all_of: Sequence[Judged]) -> list[Group]:
    """Return the groups by source and number of levels, and by kind, dimension, degree, shape and family."""
    found = []
    for source, of in SOURCES.items():
        for levels, name in LEVELS.items():

            def is_in(one: Judged, of: tuple[str, ...] = of, levels: int = levels) -> bool:
                return one.sub.of.source in of and one.levels == levels

            found.append(_group(SOURCE, f"{source}, {name}", all_of, is_in))
    more = [one for one in all_of if one.levels >= LEAST_LEVELS]
    for heading, attribute in (
        ("Kind of quantity", "kind"),
        ("Dimension", "dimension"),
        ("Degree", "degree"),
        ("Shape of the cells", "shape"),
        (FAMILY, "family"),
    ):
        for value in sorted({getattr(one.sub.of, attribute) for one in more}):

            def has(one: Judged, attribute: str = attribute, value: object = value) -> bool:
                return bool(getattr(one.sub.of, attribute) == value)

            found.append(_group(heading, f"{value}".replace("_", " "), more, has))
    return [group for group in found if group.members]


def _group(table: str, name: str, all_of: Sequence[Judged], test: Test) -> Group:
    return Group(table, name, [one for one in all_of if test(one)])
