"""Mechanics: the only place where meshes are made and equations solved; nothing here knows a study.

A Problem says what is to be solved, a mesh of its part carries it, `solve` returns a Solution. Files
build on each other in one direction: material, part, problem; mesh, assembly, solvers, solution;
stress, recovery, location, display. Arrays: components, then cells, then quadrature points.
"""
