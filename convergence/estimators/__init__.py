"""Published estimators of the limit and of the uncertainty of the finest value.

A member is `name(h, f, *, formal_order=None) -> Estimate`: sizes and values from coarse to fine in, numbers
out, at any ratios of size. The uncertainty is an absolute half-width about the finest value. Beside the
function stand `SOURCE` (the full citation) and `LEVELS` (the fewest levels it needs). A member never raises
and never warns on account of the values: where its conditions do not hold it returns NaN and a remark that
says why. Where it needs a formal order and none is given, it assumes 2 and says so.
"""
