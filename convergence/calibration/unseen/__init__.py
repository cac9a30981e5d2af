"""Families of drawn cases that no table is made of: NAME() -> list of cases. Needs NGSolve, as `families`.

The finished table is held against them; by what comes out only the share was chosen that the last factor
covers (`stretches.ASKED`). A family that is to teach the table moves to `families`, and another takes its
place here.
"""
