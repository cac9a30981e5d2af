"""TOML with line numbers: the data as the standard library reads it, and where each key stands."""

import re
import tomllib
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from convergence.errors import Fault, InputError
from convergence.textfile import read_text

_TOKEN = re.compile(
    r'''(?P<string>"""(?:[^"\\]|\\.|"{1,2}(?!"))*"{3,5}|\'\'\'(?:[^']|'{1,2}(?!'))*'{3,5}'''
    r"""|"(?:[^"\\\n]|\\.)*"|'[^'\n]*')|(?P<comment>\#[^\n]*)|(?P<newline>\n)|(?P<mark>[\[\]{}=,.])"""
    r"""|(?P<space>[^\S\n]+)|(?P<bare>[^\s\[\]{}=,.\#"']+)""",
    re.DOTALL,
)


@dataclass(frozen=True)
class TomlFile:
    """The data of a file and the line of every table and key."""

    path: Path
    text: str
    data: dict[str, Any]
    lines: Mapping[tuple[str, ...], int]

    def where(self, *keys: str) -> str:
        """Return "FILE:LINE: table.key"; empty keys are left out, an unknown key gives the file alone."""
        path = tuple(key for key in keys if key)
        line = self.lines.get(path)
        return str(self.path) if line is None else f"{self.path}:{line}: {'.'.join(path)}"


def read_toml(path: Path, text: str = "") -> TomlFile:
    """Read a file, or a text in its place; `InputError` where it is missing, no text, empty or not TOML."""
    text = text or read_text(path, "a study file (.toml)").replace("\r\n", "\n")
    try:
        data = tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        what, _, place = str(error).partition(" (at ")
        found = re.match(r"line (\d+)", place)
        line = int(found[1]) if found else text.rstrip().count("\n") + 1
        rule = "write key = value, texts in double quotes, tables as [name]"
        raise InputError([Fault(f"{path}:{line}", f"not TOML ({what})", rule)]) from None
    return TomlFile(path, text, data, _Scan(text).lines)


class _Scan:
    """Walks through the tokens of valid TOML and notes the line of every key."""

    def __init__(self, text: str):
        self.lines: dict[tuple[str, ...], int] = {}
        self.tokens: list[tuple[str, str, int]] = []
        line = 1
        for match in _TOKEN.finditer(text):
            if match.lastgroup not in ("comment", "space"):
                self.tokens.append((str(match.lastgroup), match[0], line))
            line += match[0].count("\n")
        self.tokens.append(("end", "", line))
        self.at = 0
        self.document()

    def next(self) -> str:
        return self.tokens[self.at][1]

    def skip(self, *texts: str) -> None:
        while self.next() in texts and self.tokens[self.at][0] != "end":
            self.at += 1

    def document(self) -> None:
        table: tuple[str, ...] = ()
        while True:
            self.skip("\n")
            if self.tokens[self.at][0] == "end":
                return
            if self.next() == "[":
                self.skip("[")
                table = self.key(())
                self.skip("]")
            else:
                self.pair(table)

    def key(self, table: tuple[str, ...]) -> tuple[str, ...]:
        """Read a dotted key and note the line of each of its parts."""
        while True:
            kind, text, line = self.tokens[self.at]
            table = (*table, tomllib.loads(f"name = {text}")["name"] if kind == "string" else text)
            self.lines.setdefault(table, line)
            self.at += 1
            if self.next() != ".":
                return table
            self.at += 1

    def pair(self, table: tuple[str, ...]) -> None:
        key = self.key(table)
        self.skip("=")
        self.value(key)

    def value(self, key: tuple[str, ...]) -> None:
        if self.next() == "{":
            self.skip("{", "\n")
            while self.next() != "}":
                self.pair(key)
                self.skip(",", "\n")
            self.at += 1
        elif self.next() == "[":
            self.at += 1
            self.skip("\n")
            while self.next() != "]":
                self.value(key)
                self.skip(",", "\n")
            self.at += 1
        else:
            while self.next() not in ("\n", ",", "]", "}", ""):
                self.at += 1
