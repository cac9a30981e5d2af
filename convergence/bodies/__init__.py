"""Meshes and fields of other programs: a file becomes a mesh, a field a solution like our own.

Files build on each other in one direction. A mesh of a file has cells of one shape and degree in each of its
groups; every repair is stated and counted, every fault of a file is reported at once.
"""
