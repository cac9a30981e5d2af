"""Parametric parts: `name(*, lengths, loads, kind, material) -> Problem`.

Every parameter is a keyword annotated with a type of dimensions.py and one phrase; defaults are in mm,
N, MPa. `material` has no default; `kind` and further materials have one. Conflicts between parameters
raise `Unsuitable`, all at once. Beside the function stands `QUANTITIES`: suggestions for a study file, each
a table of a quantity's arguments. A problem with a closed-form solution carries it as `exact`; its rates
are tested.
"""
