"""Quantities of interest: `name(solution, *, ...)` returns one number, or a number and its place.

The return annotation carries the dimension. Beside the function stand `KIND`, one of `results.Kind`,
and `formal_order(degree, shape, arguments)`: the order of accuracy on a smooth solution and similar meshes,
given the element degree and the arguments of the quantity.
"""
