"""Styles of a Word file: those of a template stay as they are, those it lacks are added in our look."""

from dataclasses import dataclass
from typing import Any

from convergence.report._word_parts import tag

INK, SOFT, RULE = "1A1A1A", "59626C", "B8B4A8"
FONT, FIXED = "Arial", "Courier New"  # on every machine, or something as wide in their place


@dataclass(frozen=True)
class Look:
    """How a paragraph looks: sizes and distances in points, indents in mm, a bar at its left in 1/8 point."""

    size: float
    bold: bool = False
    colour: str = INK
    before: float = 0.0
    after: float = 4.0
    left: float = 0.0
    hanging: float = 0.0
    bar: int = 0
    font: str = FONT
    stays: bool = False  # on the page of what follows
    level: int | None = None  # in the outline
    leads: bool = False  # by dots to the right margin


NORMAL = "Normal"
BULLETS = "List Bullet"
TABLE = "Table Grid"
LOOKS = {
    NORMAL: Look(9.5),
    "Title": Look(18, bold=True, after=2, stays=True),
    "Heading 1": Look(14, bold=True, before=16, after=5, stays=True, level=0),
    "Heading 2": Look(11, bold=True, before=11, after=4, stays=True, level=1),
    BULLETS: Look(9.5, after=2, left=5, hanging=5),
    "Quote": Look(9.5, before=3, after=6, left=3, bar=6),
    "Intense Quote": Look(12, before=2, after=6, left=3, bar=18),
    "Caption": Look(8, colour=SOFT, before=6, after=4),
    "Table Text": Look(8, after=0),
    "Small Print": Look(8, colour=SOFT, after=4),
    "Listing": Look(6.5, after=0, font=FIXED),
    "TOC Heading": Look(11, bold=True, before=12, after=3, stays=True),
    "toc 1": Look(8.5, after=0, leads=True),
    "Header": Look(7.5, colour=SOFT, after=0),
    "Footer": Look(7.5, colour=SOFT, after=0),
}
OUR_NAMES = ("Table Text", "Small Print", "Listing")
EDGES = ("top", "left", "bottom", "right", "insideH", "insideV")


def dress(file: Any) -> None:
    """Give a file without a template our look throughout."""
    for name, look in LOOKS.items():
        style = _style(file, name)
        _bare(style)
        _put(style, look, room_of(file))
    _rule(_table_style(file))


def complete(file: Any) -> None:
    """Add the styles that a template lacks, in its own font."""
    known = {style.name for style in file.styles}
    for name, look in LOOKS.items():
        if name not in known:
            _put(_style(file, name), look, room_of(file), in_font=look.font == FIXED)
    if TABLE not in known:
        _rule(_table_style(file))


def has_bullets(file: Any) -> bool:
    """Return whether the style of lists, or one that it is based on, puts their bullets itself."""
    style = file.styles[BULLETS]
    while style is not None and not style.element.xpath("./w:pPr/w:numPr"):
        style = style.base_style
    return style is not None


def room_of(file: Any) -> int:
    """Return the width between the margins."""
    section = file.sections[-1]
    return int(section.page_width - section.left_margin - section.right_margin)


def _style(file: Any, name: str) -> Any:
    from docx.enum.style import WD_STYLE_TYPE

    if name in {style.name for style in file.styles}:
        return file.styles[name]
    style = file.styles.add_style(name, WD_STYLE_TYPE.PARAGRAPH, builtin=name not in OUR_NAMES)
    style.base_style = file.styles[NORMAL]
    style.next_paragraph_style = file.styles[NORMAL]
    style.quick_style = True
    return style


def _table_style(file: Any) -> Any:
    from docx.enum.style import WD_STYLE_TYPE

    if TABLE in {style.name for style in file.styles}:
        return file.styles[TABLE]
    return file.styles.add_style(TABLE, WD_STYLE_TYPE.TABLE, builtin=True)


def _bare(style: Any) -> None:
    """Take the looks of a style away, but for the numbering of a list."""
    for part in style.element.xpath("./w:rPr | ./w:pPr/*[not(self::w:numPr)]"):
        part.getparent().remove(part)


def _put(style: Any, look: Look, room: int, in_font: bool = True) -> None:
    from docx.enum.text import WD_TAB_ALIGNMENT, WD_TAB_LEADER
    from docx.oxml.ns import qn
    from docx.shared import Mm, Pt, RGBColor

    layout = style.paragraph_format
    if look.bar:
        bar = tag("left", val="single", sz=str(look.bar), space="6", color=INK)
        border = tag("pBdr")
        border.append(bar)
        style.element.get_or_add_pPr().append(border)
    layout.space_before, layout.space_after, layout.line_spacing = Pt(look.before), Pt(look.after), 1.1
    layout.keep_with_next = True if look.stays else None
    layout.widow_control = True
    if look.left or look.hanging:
        layout.left_indent, layout.first_line_indent = Mm(look.left), -Mm(look.hanging)
    if look.leads:
        layout.tab_stops.add_tab_stop(room, WD_TAB_ALIGNMENT.RIGHT, WD_TAB_LEADER.DOTS)
    if look.level is not None:
        style.element.get_or_add_pPr().append(tag("outlineLvl", val=str(look.level)))
    font = style.font
    font.size, font.bold, font.color.rgb = Pt(look.size), look.bold, RGBColor.from_string(look.colour)
    looks = style.element.get_or_add_rPr()
    looks.append(tag("szCs", val=str(round(2 * look.size))))  # of scripts written from the right
    if in_font:
        font.name = look.font
        looks.rFonts.set(qn("w:cs"), look.font)


def _rule(style: Any) -> None:
    """Let a table have a rule below each row and no other."""
    from docx.oxml.ns import qn

    for old in style.element.findall(qn("w:tblPr")):
        style.element.remove(old)
    borders = tag("tblBorders")
    for edge in EDGES:
        seen = edge in ("bottom", "insideH")
        borders.append(tag(edge, val="single" if seen else "nil", sz="4", space="0", color=RULE))
    margins = tag("tblCellMar")
    for edge, width in (("top", 20), ("left", 60), ("bottom", 20), ("right", 60)):
        margins.append(tag(edge, w=str(width), type="dxa"))
    properties = tag("tblPr")
    properties.extend([borders, margins])
    style.element.append(properties)
