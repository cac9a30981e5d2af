"""Time and memory of whole studies against a general finite element library on the same mesh.

Each measurement is a process of its own, so that start-up counts and peaks are separate. The peer, NGSolve,
is imported in its own processes only.
"""
