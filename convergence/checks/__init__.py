"""Checks: `name(ladder, facts) -> Check`, and beside it `record(solution) -> {name: number}`.

`record` is called on every solved level; its numbers stand in the ladder as CHECK.NAME, so that judging
needs no solution. A check whose numbers the ladder does not have is not applicable (`passed` is None).
"""
