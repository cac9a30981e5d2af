"""Files that are no table end in one clear message that names the file; content counts, not the name."""

import struct
import subprocess
import sys
import zipfile
from io import BytesIO
from pathlib import Path

import openpyxl
import pytest
import xlwt

from convergence.errors import InputError
from convergence.intake._raw_table import Place
from convergence.intake.table import read_table

ROWS = [["h", "u"], [2, 1.5], [1, 1.75]]
NESTED = "".join(f'<!ENTITY {chr(98 + n)} "{f"&{chr(97 + n)};" * 10}">' for n in range(8))
ENTITIES = f'<!DOCTYPE x [<!ENTITY a "aaaaaaaaaa">{NESTED}]>'


def workbook() -> bytes:
    book = openpyxl.Workbook()
    for row in ROWS:
        book["Sheet"].append(row)
    raw = BytesIO()
    book.save(raw)
    return raw.getvalue()


def old_workbook() -> bytes:
    book, raw = xlwt.Workbook(), BytesIO()
    sheet = book.add_sheet("Sheet")
    for r, row in enumerate(ROWS):
        for c, value in enumerate(row):
            sheet.write(r, c, value)
    book.save(raw)
    return raw.getvalue()


def archive(**parts: bytes | str) -> bytes:
    raw = BytesIO()
    with zipfile.ZipFile(raw, "w", zipfile.ZIP_DEFLATED) as file:
        for name, content in parts.items():
            file.writestr(name.replace("__", "/").replace("_", "."), content)
    return raw.getvalue()


def changed(raw: bytes, part: str, old: bytes, new: bytes) -> bytes:
    """A workbook with another text in one of its parts."""
    out = BytesIO()
    with zipfile.ZipFile(BytesIO(raw)) as source, zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as file:
        for name in source.namelist():
            content = source.read(name)
            assert name != part or old in content
            file.writestr(name, content.replace(old, new) if name == part else content)
    return out.getvalue()


def said(folder: Path, raw: bytes, name: str = "t.xlsx", place: Place | None = None) -> str:
    path = folder / name
    path.write_bytes(raw)
    with pytest.raises(InputError) as caught:
        read_table(path, place)
    return str(caught.value).replace(f"{folder}/", "")


def test_content_counts_not_the_name(tmp_path: Path) -> None:
    text = b"h,u\n2,1.5\n1,1.75\n"
    for raw in (text, workbook(), old_workbook()):
        for name in ("t.csv", "t.xlsx", "t.xls", "t.ods", "t"):
            (tmp_path / name).write_bytes(raw)
            assert list(read_table(tmp_path / name).ladders[""].column("u")) == [1.5, 1.75]


@pytest.mark.parametrize("encoding", ["utf-8", "utf-8-sig", "utf-16", "utf-16-le", "utf-16-be", "cp1252"])
def test_encodings(tmp_path: Path, encoding: str) -> None:
    path = tmp_path / "t.csv"
    path.write_bytes("h [µm];Auslenkung, größte\r\n2;1,5\r\n1;1,75\r\n".encode(encoding))
    found = read_table(path)
    assert dict(found.units) == {"h": "µm", "Auslenkung, größte": ""}
    assert list(found.ladders[""].column("Auslenkung, größte")) == [1.5, 1.75]


@pytest.mark.parametrize("raw", [workbook(), old_workbook()])
def test_a_truncated_workbook_is_said_at_every_length(tmp_path: Path, raw: bytes) -> None:
    for share in range(1, 20):
        message = said(tmp_path, raw[: len(raw) * share // 20])
        assert message.startswith("t.xlsx: ") and "\n" not in message


def test_what_is_no_workbook(tmp_path: Path) -> None:
    as_workbook = "save it as a workbook (.xlsx, .ods) or as text (.csv)"
    ole = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + bytes(600)
    encrypted = ole + "EncryptedPackage".encode("utf-16-le") + bytes(20)
    assert said(tmp_path, encrypted) == "t.xlsx: an encrypted workbook; save it without a password"
    assert said(tmp_path, ole) == f"t.xlsx: a document, not a workbook; {as_workbook}"
    assert said(tmp_path, archive(readme_txt="h,u")) == f"t.xlsx: an archive, not a workbook; {as_workbook}"
    assert said(tmp_path, archive(xl__workbook_bin=b"")) == (
        "t.xlsx: a binary workbook (.xlsb); save it as .xlsx"
    )
    sealed = archive(content_xml=b"?", **{"META-INF__manifest_xml": "<encryption-data/>"})
    assert said(tmp_path, sealed) == "t.xlsx: an encrypted workbook; save it without a password"
    assert said(tmp_path, archive(content_xml=b"<a>")).startswith("t.xlsx: a damaged workbook (no element")
    text = b"h,u\n2,1.5\n1,1.75\n"
    assert said(tmp_path, text, "t.csv", Place(sheet="Davit")) == (
        "t.csv: a text, which has neither sheets nor ranges; leave out the sheet and the range"
    )


def test_a_password_of_the_old_kind(tmp_path: Path) -> None:
    """A record FILEPASS (47) at the start of the workbook says that the rest is encrypted."""
    raw = old_workbook()
    start = raw.index(struct.pack("<HH", 0x0809, 16)) + 20
    locked = raw[:start] + struct.pack("<HHHH", 47, 6, 1, 1) + bytes(4) + raw[start + 12 :]
    assert said(tmp_path, locked, "t.xls") == "t.xls: an encrypted workbook; save it without a password"


def test_a_workbook_that_would_unpack_to_far_too_much(tmp_path: Path) -> None:
    bomb = archive(content_xml=bytes(210_000_000))
    assert len(bomb) < 300_000
    assert said(tmp_path, bomb, "t.ods") == (
        "t.ods: a workbook that would unpack to 210 MB from 0.2 MB; save the sheet of the table alone"
    )
    # a directory that lies about the size: reading ends there
    small = bytearray(bomb)
    size = struct.pack("<L", 210_000_000)
    for _ in range(small.count(size)):
        at = small.index(size)
        small[at : at + 4] = struct.pack("<L", 1000)
    assert said(tmp_path, bytes(small), "t.ods").startswith("t.ods: a damaged workbook (")


def test_entities_that_expand_without_end(tmp_path: Path) -> None:
    text = f"{ENTITIES}<x>&i;</x>"
    assert said(tmp_path, archive(content_xml=text), "t.ods").startswith("t.ods: a damaged workbook (")
    old, new = b"<worksheet", f"{ENTITIES}<worksheet".encode()
    sheet = changed(workbook(), "xl/worksheets/sheet1.xml", old, new)
    sheet = changed(sheet, "xl/worksheets/sheet1.xml", b"<v>1.75</v>", b"<v>&i;</v>")
    assert said(tmp_path, sheet).startswith("t.xlsx: ")


SPARSE = """
import resource, sys
resource.setrlimit(resource.RLIMIT_AS, (2 * 1024**3, 2 * 1024**3))
from pathlib import Path
from convergence.errors import InputError
from convergence.intake.table import read_table
try:
    print(read_table(Path(sys.argv[1])).ladders[""].column("u").tolist())
except InputError as error:
    print(error)
"""


def test_a_cell_at_the_far_end_of_a_sheet_needs_no_memory(tmp_path: Path) -> None:
    """The largest sheet has 1,048,576 rows and 16,384 columns, all but a few cells empty."""
    book = openpyxl.Workbook()
    for row in ROWS:
        book["Sheet"].append(row)
    book["Sheet"]["XFD1048576"] = "far away"
    book.save(tmp_path / "t.xlsx")
    done = subprocess.run(
        [sys.executable, "-c", SPARSE, str(tmp_path / "t.xlsx")], capture_output=True, text=True, timeout=60
    )
    assert (done.stdout, done.stderr) == ("[1.5, 1.75]\n", "")


def test_a_repeated_cell_of_an_open_document_fills_no_memory(tmp_path: Path) -> None:
    spaces = "".join(
        f' xmlns:{name}="urn:oasis:names:tc:opendocument:xmlns:{name}:1.0"' for name in ("table", "office")
    )
    content = (
        f'<a{spaces}><table:table table:name="Davit"><table:table-row table:number-rows-repeated="1048576">'
        '<table:table-cell office:value-type="float" office:value="1" table:number-columns-repeated="16384"/>'
        "</table:table-row></table:table></a>"
    )
    assert said(tmp_path, archive(content_xml=content), "t.ods") == (
        "t.ods: sheet 'Davit': more than 200,000 cells; name the range of the table, --range A3:F9"
    )


def test_a_text_far_too_long(tmp_path: Path) -> None:
    assert said(tmp_path, b"h,u\n" + b"1,2\n" * 100_000, "t.csv") == (
        "t.csv: a text of more than 100,000 lines; give a table with one row a mesh"
    )


def test_bytes_that_are_changed_end_in_a_table_or_a_message(tmp_path: Path) -> None:
    for raw in (workbook(), old_workbook()):
        for at in range(0, len(raw), len(raw) // 60):
            (tmp_path / "t").write_bytes(raw[:at] + bytes([raw[at] ^ 0x55]) + raw[at + 1 :])
            try:
                assert read_table(tmp_path / "t").ladders
            except InputError as error:
                assert str(error).startswith(str(tmp_path / "t"))


def test_a_sheet_without_cells(tmp_path: Path) -> None:
    book, raw = openpyxl.Workbook(), BytesIO()
    book.create_sheet("Old").sheet_state = "hidden"
    book.save(raw)
    assert said(tmp_path, raw.getvalue()) == (
        "t.xlsx: no cells in any visible sheet; give a table; hidden sheets: 'Old'"
    )
    assert said(tmp_path, raw.getvalue(), place=Place(sheet="Sheet")) == (
        "t.xlsx: sheet 'Sheet': no rows of numbers; give a header and one row for each mesh"
    )
