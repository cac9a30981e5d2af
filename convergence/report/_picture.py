"""A drawn figure as SVG and PNG, and the one way to draw it; matplotlib is loaded here only."""

import gc
import io
from collections.abc import Callable, Iterable, Iterator, Sequence
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Any, Literal
from warnings import catch_warnings, filterwarnings

import numpy as np

from convergence.textfile import write_bytes, write_text

if TYPE_CHECKING:
    from matplotlib.figure import Figure

BLUE, RED, GREEN, GREY, INK = "#0072b2", "#d55e00", "#00795a", "#6b6b6b", "#1a1a1a"
RED_TEXT = "#a84800"  # RED as dark as text must be: WCAG 2.1, success criterion 1.4.3

STYLE: dict[str, Any] = {
    "font.family": "DejaVu Sans",
    "font.size": 9.0,
    "axes.titlesize": 9.0,
    "axes.labelsize": 9.0,
    "xtick.labelsize": 8.0,
    "ytick.labelsize": 8.0,
    "legend.fontsize": 8.0,
    "legend.frameon": False,
    "axes.edgecolor": GREY,
    "axes.labelcolor": INK,
    "axes.spines.right": False,
    "axes.spines.top": False,
    "axes.grid": True,
    "axes.axisbelow": True,
    "grid.color": "#dddddd",
    "grid.linewidth": 0.6,
    "xtick.color": GREY,
    "ytick.color": GREY,
    "xtick.labelcolor": INK,
    "ytick.labelcolor": INK,
    "lines.linewidth": 1.5,
    "lines.markersize": 6.0,
    "figure.facecolor": "white",
    "savefig.facecolor": "white",
    "figure.constrained_layout.use": True,
    "hatch.linewidth": 0.7,
    "svg.fonttype": "none",
    "text.usetex": False,
    "text.parse_math": False,
}
DOTS_PER_INCH = 180
LEVELS = "levels"  # beginning of the gid of artists whose marks have hints
COMPRESSION = 3  # of PNG, up to 9: more takes time and saves little


Axis = Literal["", "value", "error"]
Rewrite = Callable[[str], str]


@dataclass(frozen=True)
class Picture:
    """One figure: file stem, its words (alt, caption), SVG text, PNG bytes, inches.

    `hints` say what each mark of the artists `LEVELS` stands for, in the order in which they are drawn.
    Figures of one quantity on its `axis` of values or of errors are two views of the same levels.
    """

    name: str
    alt: str
    caption: str
    svg: str
    png: bytes
    width: float
    hints: tuple[str, ...] = ()
    axis: Axis = ""


def draw(
    name: str,
    size: tuple[float, float],
    alt: str,
    caption: str,
    paint: Callable[["Figure"], None],
    hints: Iterable[str] = (),
    axis: Axis = "",
    comma: Rewrite | None = None,
) -> Picture:
    """Let `paint` fill a new figure of `size` inches and return it in both formats.

    `comma` rewrites what is written in the figure, not alt, caption and hints, which are the document's.
    The same input gives the same bytes: no date, ids salted by the name only.
    """
    with _no_collections():
        svg, png = _drawn(name, size, paint, comma)
    svg = svg.replace("'DejaVu Sans'", "'DejaVu Sans', Verdana, sans-serif")
    return Picture(name, alt, caption, svg, png, size[0], tuple(hints), axis)


def get_ready() -> None:
    """Load what drawing needs, fonts too, by a figure that nobody sees."""

    def paint(figure: "Figure") -> None:
        figure.subplots().set_title("ready")

    _drawn("ready", (2.0, 2.0), paint, None)


@contextmanager
def _no_collections() -> Iterator[None]:
    """Leave garbage for later: a figure is so many objects that looking for it takes a fifth of the time."""
    enabled = gc.isenabled()
    gc.disable()
    try:
        yield
    finally:
        if enabled:
            gc.enable()


def _drawn(
    name: str, size: tuple[float, float], paint: Callable[["Figure"], None], comma: Rewrite | None
) -> tuple[str, bytes]:
    """Return SVG and PNG of a figure, laid out once for both."""
    import matplotlib
    from matplotlib.backends.backend_agg import FigureCanvasAgg
    from matplotlib.backends.backend_svg import FigureCanvasSVG
    from matplotlib.figure import Figure
    from PIL import Image

    settings: Any = {**STYLE, "svg.hashsalt": name}
    with matplotlib.rc_context(settings), catch_warnings():
        filterwarnings("ignore", message="Glyph")  # a sign that the font lacks; as text of the SVG it stays
        figure = Figure(figsize=size, dpi=DOTS_PER_INCH)
        canvas: Any = FigureCanvasAgg(figure)
        paint(figure)
        if comma:
            _rewrite(figure, comma)
        _lay_out(figure)
        vector, pixels = io.StringIO(), io.BytesIO()
        canvas.draw()
        opaque = Image.fromarray(np.asarray(canvas.buffer_rgba())[:, :, :3])
        opaque.save(pixels, "png", compress_level=COMPRESSION, dpi=(DOTS_PER_INCH, DOTS_PER_INCH))
        canvas = FigureCanvasSVG(figure)
        canvas.print_svg(vector, metadata={"Date": None, "Creator": None})
    return vector.getvalue(), pixels.getvalue()


def _rewrite(figure: "Figure", comma: Rewrite) -> None:
    from convergence.report._drawn_text import rewrite_text

    rewrite_text(figure, comma)


def _lay_out(figure: "Figure") -> None:
    """Place axes, titles and legends once; titles of panels that keep their shape need a second pass."""
    engine = figure.get_layout_engine()
    if engine is not None:
        titled = any(axes.get_title() for axes in figure.axes)
        for _ in range(2 if titled else 1):
            engine.execute(figure)
        figure.set_layout_engine("none")


def write_figures(folder: Path, pictures: Sequence[Picture]) -> None:
    """Write every picture in both formats; figures of an earlier run that are not drawn any more go."""
    if not pictures and not folder.exists():
        return
    folder.mkdir(parents=True, exist_ok=True)
    for picture in pictures:
        write_text(folder / f"{picture.name}.svg", picture.svg)
        write_bytes(folder / f"{picture.name}.png", picture.png)
    kept = {picture.name for picture in pictures}
    for path in folder.iterdir():
        if path.suffix in (".svg", ".png") and path.stem not in kept:
            path.unlink()
