"""Doors for results of other programs: a file goes in, a Ladder comes out, nothing is solved.

Each member reads one kind of file and raises `InputError` with the place of every fault: file, line and
column, or file, sheet and cell. Sizes are positive, levels run from coarse to fine, a value that is not there
is NaN.
"""
