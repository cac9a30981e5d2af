"""How plausible every candidate limit of a ladder is, from the error history that it implies.

Take a candidate: the errors of all levels follow at once. `evidence` weighs that history against every error
law of `laws`; `belief` sums up over the laws with the weights that the bank of known ladders gave them
(`table`), and reads interval, best estimate, order and the odds of growth without limit from the sum.
"""
