"""Tables of a Word file: widths of columns, rows that stay whole, two columns without rules."""

from collections.abc import Sequence
from typing import Any

from convergence.report._word_parts import tag


def set_widths(table: Any, widths: Sequence[int]) -> None:
    """Give a table columns of fixed widths, and rows that are not parted by the end of a page."""
    table.autofit = False
    for column, width in zip(table.columns, widths, strict=True):
        column.width = width
    for row in table.rows:
        row._tr.get_or_add_trPr().append(tag("cantSplit"))
        for cell, width in zip(row.cells, widths, strict=True):
            cell.width = width


def in_two(file: Any, rows: int, room: int, gap: int) -> Any:
    """Return a new table of two columns without rules, with a gap at the right side of each."""
    from docx.shared import Length

    table = file.add_table(rows=rows, cols=2)
    set_widths(table, [room // 2] * 2)
    margins = tag("tblCellMar")
    for edge, width in (("top", 0), ("left", 0), ("bottom", 0), ("right", Length(gap).twips)):
        margins.append(tag(edge, w=str(width), type="dxa"))
    looks = table._tbl.tblPr.xpath("./w:tblLook")
    looks[0].addprevious(margins) if looks else table._tbl.tblPr.append(margins)
    return table
