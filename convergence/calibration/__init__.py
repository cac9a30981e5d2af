"""How the interval is calibrated: a bank of ladders with known limits, the table made of it, and its page.

`making` makes the bank (`drawn_ladders`, `mapped_ladders`), `bank` keeps it, `calibrate` fits the table and
judges every family without it, `page` says what was measured. `python -m convergence.calibration` does all.
"""
