"""HTML from small functions; `Html` is text that is already safe, so that types catch what is not."""

import html
from collections.abc import Mapping, Sequence
from typing import NewType

from convergence.report._look import CSS
from convergence.report._picture import Picture

Html = NewType("Html", str)

POLICY = "default-src 'none'; style-src 'unsafe-inline'; img-src data:"


def text(plain: str) -> Html:
    """Return plain text made safe."""
    return Html(html.escape(plain))


def element(tag: str, attributes: Mapping[str, str], *children: Html) -> Html:
    """Return one element; attribute values are made safe, children are safe already."""
    shown = "".join(f' {key}="{html.escape(value)}"' for key, value in attributes.items())
    return Html(f"<{tag}{shown}>{''.join(children)}</{tag}>")


def join(*parts: Html) -> Html:
    """Return the parts one after another, a line each."""
    return Html("\n".join(part for part in parts if part))


def paragraph(plain: str, kind: str = "") -> Html:
    """Return a paragraph of plain text."""
    return element("p", {"class": kind} if kind else {}, text(plain))


def bullets(items: Sequence[str]) -> Html:
    """Return a list of plain sentences, nothing where there is none."""
    return element("ul", {}, *(element("li", {}, text(item)) for item in items)) if items else Html("")


def header(title: str, about: str) -> Html:
    """Return the top of the page."""
    return element("header", {}, element("h1", {}, text(title)), paragraph(about, "about"))


def section(anchor: str, title: str, *children: Html) -> Html:
    """Return a main section of the page."""
    return element("section", {"id": anchor}, element("h2", {}, text(title)), join(*children))


def badge(word: str) -> Html:
    """Return a verdict word as a mark; its frame tells it apart without colour."""
    return element("span", {"class": f"verdict {word}"}, text(word))


def table(caption: str, head: Sequence[str], rows: Sequence[Sequence[Html]], kind: str = "") -> Html:
    """Return a table that scrolls where it is wider than the page; first column heads the row."""
    top = element("tr", {}, *(element("th", {"scope": "col"}, text(name)) for name in head))
    body = [
        element("tr", {}, element("th", {"scope": "row"}, row[0]), *(element("td", {}, c) for c in row[1:]))
        for row in rows
    ]
    frame = {"class": "scroll", "tabindex": "0", "role": "region", "aria-label": caption}
    inner = element(
        "table",
        {"class": kind} if kind else {},
        element("caption", {}, text(caption)),
        element("thead", {}, top),
        element("tbody", {}, *body),
    )
    return element("div", frame, inner)


def details(summary: str, *children: Html) -> Html:
    """Return something that opens on demand."""
    return element("details", {}, element("summary", {}, text(summary)), *children)


def figure(picture: Picture | None) -> Html:
    """Return a picture inside the page with its caption, nothing where there is none."""
    if picture is None:
        return Html("")
    caption = element("figcaption", {}, text(picture.caption))
    card = element("div", {"class": "card"}, Html(picture.inline()))
    return element("figure", {"style": f"max-width: {7 * picture.width:.1f}rem"}, card, caption)


def page(title: str, contents: Sequence[tuple[str, str]], *body: Html) -> str:
    """Return the whole document; `contents` are (anchor, title)."""
    links = [element("li", {}, element("a", {"href": f"#{to}"}, text(name))) for to, name in contents]
    nav = element("nav", {"aria-label": "Contents"}, element("ul", {}, *links))
    head = join(
        Html('<meta charset="utf-8">'),
        Html('<meta name="viewport" content="width=device-width, initial-scale=1">'),
        Html(f'<meta http-equiv="Content-Security-Policy" content="{POLICY}">'),
        element("title", {}, text(title)),
        element("style", {}, Html(CSS)),
    )
    whole = element(
        "html",
        {"lang": "en"},
        element("head", {}, head),
        element("body", {}, nav, element("main", {}, join(*body))),
    )
    return f"<!DOCTYPE html>\n{whole}\n"
