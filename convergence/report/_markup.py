"""Text made safe for a page, and elements around it."""

import html
import re
from collections.abc import Mapping

REPLACEMENT = "\N{REPLACEMENT CHARACTER}"
# control characters but tab and line ends, and those that turn the direction of whatever follows
UNSEEN = re.compile("[\x00-\x08\x0b\x0c\x0e-\x1f\x7f-\x9f\u202a-\u202e\u2066-\u2069]")
LEFTWARD = "\u0590-\u08ff\ufb1d-\ufdff\ufe70-\ufefc\U00010800-\U00010fff\U0001e800-\U0001efff"
# words written from right to left; a comma ends the run, so that the names of a list keep their order
RUN = re.compile(f"[{LEFTWARD}]+(?:[ _'\"\\-0-9]+[{LEFTWARD}]+)*")


def text(plain: str) -> str:
    """Return plain text as HTML; words written from right to left are kept from turning their neighbours."""
    return RUN.sub(r"<bdi>\g<0></bdi>", attribute(plain))


def attribute(plain: str) -> str:
    """Return plain text as the value of an attribute."""
    return html.escape(UNSEEN.sub(REPLACEMENT, plain))


def element(tag: str, attributes: Mapping[str, str], *children: str) -> str:
    """Return one element; attribute values are made safe, children are safe already.

    An attribute without a value, such as `hidden`, is "".
    """
    shown = "".join(
        f' {key}="{attribute(value)}"' if value else f" {key}" for key, value in attributes.items()
    )
    return f"<{tag}{shown}>{''.join(children)}</{tag}>"
