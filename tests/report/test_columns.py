"""How the columns of a table share a page, and how one that is too wide is parted."""

import pytest

from convergence.report._columns import A4_WIDTH, LONGEST_WORD, PADDING, SNUG, bands, is_narrow, shares
from convergence.report.content import Table, Words


def table(*columns: tuple[str, str]) -> Table:
    return Table("Values", [head for head, _ in columns], [[cell for _, cell in columns]])


def test_columns_share_the_width() -> None:
    """Short lines have all the room they need, long ones what is left; a small table stays small."""
    number = "8839.5840011 ± 9.5e-6"
    widths = shares(table(("a", "b" * 300), ("x", number), ("y", "word " * 60)))
    assert sum(widths) == pytest.approx(1.0)
    assert widths[1] * A4_WIDTH == pytest.approx(len(number) + PADDING)
    assert min(widths[0], widths[2]) > widths[1]
    small = table(("a", "1"), ("b", "2"))
    assert sum(shares(small)) == pytest.approx(2 * (1 + PADDING) / A4_WIDTH)
    assert sum(shares(small, A4_WIDTH // 2)) == pytest.approx(4 * (1 + PADDING) / A4_WIDTH)


def test_lines_that_fit_are_not_broken() -> None:
    longest = A4_WIDTH - 2 * PADDING - 1
    assert is_narrow(table(("a", "1"), ("b", "c" * longest)))
    assert not is_narrow(table(("a", "1"), ("b", "c" * (longest + 1))))


def test_a_table_that_fits_is_one_part() -> None:
    fits = table(("name", "x"), *[(f"level {n}", "1.0") for n in range(8)])
    assert bands(fits) == [fits]
    words = table(("a", "word " * 900), ("b", "x" * 900))
    assert bands(words) == [words], "long lines and long words are broken"


@pytest.mark.parametrize("count", [12, 13, 40, 121])
def test_one_that_is_too_wide_is_parted(count: int) -> None:
    """Every column once, in its order, the first one in each part, no part wider than the page."""
    cases = [(f"case {n}", f"{n}.04744480e+07") for n in range(count)]
    parts = bands(table(("quantity", "peak"), *cases))
    assert len(parts) > 1
    assert [head for part in parts for head in part.head[1:]] == [head for head, _ in cases]
    assert [cell for part in parts for cell in part.rows[0][1:]] == [cell for _, cell in cases]
    for part in parts:
        assert (part.head[0], part.rows[0][0], part.caption) == ("quantity", "peak", "Values")
        words = [[*head.split(), str(cell)] for head, cell in zip(part.head, part.rows[0], strict=True)]
        assert sum(SNUG + max(map(len, column)) for column in words) <= A4_WIDTH


def test_a_column_wider_than_the_page_has_a_part_of_its_own() -> None:
    wide = Table("", ("a", "b", "c"), [("1", ("x" * LONGEST_WORD, Words("y" * 900)), "z" * 900)])
    assert [len(part.head) for part in bands(wide, LONGEST_WORD)] == [2, 2]
