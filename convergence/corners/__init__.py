"""Singular corners of planes and edges of solids, by theory: where they are and how stress grows there.

`singular_corners(problem)` returns results.Corner; files build on each other in one direction: williams and
bonded (exponents), fans (material around a point or edge), sites, sides, forced_points, chains.
"""
