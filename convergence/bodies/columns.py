"""Fields that a file has as separate columns, put together: ux uy uz a vector, S_xx S_yy S_xy a stress."""

import re
from collections.abc import Mapping, Sequence

AXES = {"x": "x", "1": "x", "y": "y", "2": "y", "z": "z", "3": "z"}
TURNED = {"yx": "xy", "zy": "yz", "xz": "zx"}
VECTORS = (("x", "y", "z"), ("x", "y"))
# the columns of a stress: in space, in a plane with and without the normal stress across it
TENSORS = (("xx", "yy", "zz", "xy", "yz", "zx"), ("xx", "yy", "zz", "xy"), ("xx", "yy", "xy"))


def together(fields: Sequence[str]) -> Mapping[str, tuple[str, ...]]:
    """Return what columns of one component make: name -> the columns in the order above.

    A name is what stands before one or two of x, y, z or 1, 2, 3, less _ . - : and spaces. It is left out
    where a field has it already.
    """
    found: dict[tuple[str, int], dict[str, str]] = {}
    for field in fields:
        match = re.fullmatch(r"(.*?)[\s_.:\-]*([xyz]{1,2}|[123]{1,2})", field.strip(), flags=re.IGNORECASE)
        if match and match[1]:
            word = "".join(AXES[letter] for letter in match[2].lower())
            found.setdefault((match[1], len(word)), {}).setdefault(TURNED.get(word, word), field)
    made: dict[str, tuple[str, ...]] = {}
    for (name, length), columns in found.items():
        orders = VECTORS if length == 1 else TENSORS
        whole = next((order for order in orders if set(order) <= set(columns)), None)
        if whole and name not in fields:
            made.setdefault(name, tuple(columns[word] for word in whole))
    return made
