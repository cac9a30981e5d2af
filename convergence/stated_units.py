"""Units of forces, lengths and moments as headers of tables state them, and their sizes in N and mm."""

FORCES = {
    "N": 1.0,
    "daN": 10.0,
    "kN": 1e3,
    "MN": 1e6,
    "kgf": 9.80665,
    "lbf": 4.4482216152605,
    "kip": 4448.2216152605,
}
LENGTHS = {"mm": 1.0, "cm": 10.0, "m": 1e3, "in": 25.4, "ft": 304.8}
MOMENTS = {
    text: (force, length)
    for force in FORCES
    for length in LENGTHS
    for first, second in ((force, length), (length, force))
    for text in (f"{first}{mark}{second}" for mark in ("", " ", "·", "*", "-", "."))
    if text != "mN"  # that is a force
}
