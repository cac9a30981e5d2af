"""The record of an analysis: every point stands somewhere or is asked of the analyst."""

from convergence.bind import parameters
from convergence.record import NOTHING, Record, record
from convergence.report.content import Section, Table, Words, lines
from convergence.report.sections_record import POINTS, record_section

SECTIONS = [Section(name, name, f"Title of {name}", []) for name in ("statement", "checks", "quantities")]


def tables(stated: Record, sections: list[Section]) -> list[Table]:
    return [block for block in record_section(stated, sections).blocks if isinstance(block, Table)]


def texts(table: Table, row: int) -> list[str]:
    return [words.text for words in lines(table.rows[row][1])]


def test_twenty_points_each_with_a_place() -> None:
    (points,) = tables(NOTHING, SECTIONS)
    assert len(points.rows) == len(POINTS) == 20
    assert all(texts(points, row) for row in range(20))
    assert texts(points, 0) == [
        "Title of statement",
        "to be supplied by the analyst: purpose, criteria of [record] in the study",
    ]
    assert texts(points, 7) == ["Title of quantities"], "the meshes are not drawn in this document"


def test_links_lead_to_sections_that_are_there() -> None:
    (points,) = tables(NOTHING, SECTIONS)
    places = [words for row in points.rows for words in lines(row[1]) if words.to]
    assert {words.to for words in places} == {"#statement", "#checks", "#quantities"}
    assert all(words.paged for words in places)


def test_what_is_stated_is_shown_and_no_longer_asked_for() -> None:
    stated, points = tables(record(purpose="release", tests="load test of 2030"), SECTIONS)
    assert [(row[0], row[1]) for row in stated.rows] == [
        ("purpose", Words("release", given=True)),
        ("tests", Words("load test of 2030", given=True)),
    ]
    assert texts(points, 0)[1:] == [
        "stated by the analyst: purpose",
        "to be supplied by the analyst: criteria of [record] in the study",
    ]
    assert texts(points, 16) == ["stated by the analyst: tests"]


def test_a_point_without_a_place() -> None:
    """A document without the section that would hold it says so."""
    (points,) = tables(NOTHING, [])
    assert points.rows[9][1] == "not in this document"


def test_every_key_of_the_record_belongs_to_a_point() -> None:
    keys = {parameter.name for parameter in parameters(record)}
    assert keys == {key for point in POINTS for key in point.keys}


def test_an_analyst_may_write_anything() -> None:
    (stated, _) = tables(record(conclusion="<b>fit</b>"), SECTIONS)
    assert stated.rows[0][1] == Words("<b>fit</b>", given=True)
