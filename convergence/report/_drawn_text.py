"""The text of a painted figure rewritten: words on it and the labels of its ticks."""

from collections.abc import Callable

from matplotlib.axis import Axis
from matplotlib.figure import Figure
from matplotlib.text import Text
from matplotlib.ticker import Formatter

Rewrite = Callable[[str], str]


class _Rewritten(Formatter):
    """Labels of another formatter, rewritten."""

    def __init__(self, inner: Formatter, rewrite: Rewrite):
        self.inner, self.rewrite = inner, rewrite

    def __call__(self, x: float, pos: int | None = None) -> str:
        return self.rewrite(self.inner(x, pos))

    def format_ticks(self, values: list[float]) -> list[str]:
        return [self.rewrite(label) for label in self.inner.format_ticks(values)]

    def get_offset(self) -> str:
        return self.rewrite(self.inner.get_offset())

    def set_locs(self, locs: list[float]) -> None:
        self.inner.set_locs(locs)


def rewrite_text(figure: Figure, rewrite: Rewrite) -> None:
    """Rewrite each text of a figure once, before it is laid out."""
    for text in figure.findobj(Text):
        text.set_text(rewrite(text.get_text()))
    for axis in figure.findobj(Axis):
        formatter = axis.get_major_formatter()
        if not isinstance(formatter, _Rewritten):  # axes may share one
            axis.set_major_formatter(_Rewritten(formatter, rewrite))
