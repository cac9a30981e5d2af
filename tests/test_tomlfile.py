"""Every key of a TOML file is found on its line, and a bad file gives one clear message."""

from pathlib import Path

import pytest

from convergence.errors import InputError
from convergence.tomlfile import read_toml

TRICKY = '''# a davit
title = "arm # not a comment"  # [not.a.table]
note = """
fake = 1
[fake]
ends with a quote""""
other = \'\'\'
also = "fake"\'\'\'

[model]
name = 'arm'
length.value = 3.0
length.unit = "mm"
inline = { depth = 4, deep = { "quoted key" = 1, points = [ [1, 2], [3, 4] ] }, last = "}" }
points = [
  [0.0, 1.0],  # comment with ] and =
  { x = 1, y = 2 },
]
when = 1979-05-27 07:32:00
after = 1

[ quantities . "a.b" ]
measure = "peak"

[[loads]]
force = 1
[[loads]]
force = 2
'''


def read(folder: Path, text: str) -> str:
    path = folder / "study.toml"
    path.write_bytes(text.encode())
    with pytest.raises(InputError) as caught:
        read_toml(path)
    return str(caught.value).replace(str(folder), "DIR")


@pytest.mark.parametrize("end", ["\n", "\r\n"])
@pytest.mark.parametrize("mark", [b"", b"\xef\xbb\xbf"])
def test_keys_are_found_on_their_lines(tmp_path: Path, end: str, mark: bytes) -> None:
    path = tmp_path / "study.toml"
    path.write_bytes(mark + TRICKY.replace("\n", end).encode())
    file = read_toml(path)
    lines = TRICKY.split("\n")

    def line(start: str) -> int:
        return next(i for i, text in enumerate(lines, 1) if text.startswith(start))

    assert file.lines == {
        ("title",): 2,
        ("note",): 3,
        ("other",): line("other"),
        ("model",): line("[model]"),
        ("model", "name"): line("name"),
        ("model", "length"): line("length.value"),
        ("model", "length", "value"): line("length.value"),
        ("model", "length", "unit"): line("length.unit"),
        ("model", "inline"): line("inline"),
        ("model", "inline", "depth"): line("inline"),
        ("model", "inline", "deep"): line("inline"),
        ("model", "inline", "deep", "quoted key"): line("inline"),
        ("model", "inline", "deep", "points"): line("inline"),
        ("model", "inline", "last"): line("inline"),
        ("model", "points"): line("points"),
        ("model", "points", "x"): line("  { x"),
        ("model", "points", "y"): line("  { x"),
        ("model", "when"): line("when"),
        ("model", "after"): line("after"),
        ("quantities",): line("[ quantities"),
        ("quantities", "a.b"): line("[ quantities"),
        ("quantities", "a.b", "measure"): line("measure"),
        ("loads",): line("[[loads]]"),
        ("loads", "force"): line("force = 1"),
    }
    assert file.data["quantities"]["a.b"]["measure"] == "peak"


def test_where_names_file_line_and_key(tmp_path: Path) -> None:
    path = tmp_path / "study.toml"
    path.write_text(TRICKY)
    file = read_toml(path)
    assert file.where("title") == f"{path}:2: title"
    assert file.where("model", "name") == f"{path}:11: model.name"
    assert file.where("model", "") == f"{path}:10: model"
    assert file.where("model", "nothing") == str(path)
    assert file.where() == str(path)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("", "DIR/study.toml: the file is empty; give the path of a study file (.toml)"),
        (" \n\n", "DIR/study.toml: the file is empty; give the path of a study file (.toml)"),
        (
            "a = 1\nb =\n",
            "DIR/study.toml:2: not TOML (Invalid value); "
            "write key = value, texts in double quotes, tables as [name]",
        ),
        (
            "a = 1\na = 2\n",
            "DIR/study.toml:2: not TOML (Cannot overwrite a value); "
            "write key = value, texts in double quotes, tables as [name]",
        ),
        (
            '[model]\nname = "lug',
            "DIR/study.toml:2: not TOML (Unterminated string); "
            "write key = value, texts in double quotes, tables as [name]",
        ),
    ],
)
def test_a_bad_text_is_named_with_its_line(tmp_path: Path, text: str, message: str) -> None:
    assert read(tmp_path, text) == message


def test_what_is_no_text_file_is_said(tmp_path: Path) -> None:
    binary, missing = tmp_path / "lug.toml", tmp_path / "lag.toml"
    binary.write_bytes(b"\xff\xfe\x00\x01")
    for path, message in (
        (
            binary,
            "not a text file in UTF-8; give the path of a study file (.toml), saved as text in UTF-8",
        ),
        (tmp_path, "a folder; give the path of a study file (.toml)"),
        (missing, "no such file; did you mean 'lug.toml'?"),
        (tmp_path / "none" / "x.toml", "no such file; give the path of a study file (.toml)"),
    ):
        with pytest.raises(InputError) as caught:
            read_toml(path)
        assert str(caught.value) == f"{path}: {message}"
