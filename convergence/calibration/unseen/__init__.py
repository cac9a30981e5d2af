"""Families of drawn cases that no table is made of: NAME() -> list of cases. Needs NGSolve, as `families`.

The finished table is held against them, and no weight, factor or threshold is chosen by what comes out. A
family that is to teach the table moves to `families`, and another takes its place here.
"""
