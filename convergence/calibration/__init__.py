"""How often the estimates are right: ladders whose limits are known exactly, and the coverage over them.

`exact_ladders` makes the ladders, `coverage` counts, `python -m convergence.calibration` writes the page.
"""
