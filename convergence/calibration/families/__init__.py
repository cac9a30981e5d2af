"""Families of drawn cases for the bank: NAME() -> list of cases. Needs NGSolve (`pip install -e .[dev]`).

A family is one kind of part and load; whole families are left out when coverage is measured, so a part must
not stand in two of them, nor in one of `unseen`. Studies, tests and demo data use none of these cases.
"""
