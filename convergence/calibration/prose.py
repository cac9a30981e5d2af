"""The words of the calibration page."""

from collections.abc import Mapping, Sequence
from typing import Any

from convergence import numbers
from convergence.calibration.make_up import LeftOut
from convergence.calibration.promises import BOUNDED
from convergence.calibration.stretches import ASKED
from convergence.calibration.sub_ladders import BETTER_KNOWN, RATIOS
from convergence.histories.laws import FALLING, SCATTERS
from convergence.histories.table import LEAST_EXPONENT
from convergence.histories.width import CENTRAL

METHOD = """## Method

Every candidate L for the limit implies the error of every level, e = f - L. Such a history is weighed
against error laws: e = c h^p / (1 + (h/k)^p), scattered by a share of itself, with orders p from {least:g}
to {most:g}, a knee k above which cells are too large to see the place, {scatters} sizes of scatter, and
growing laws that have no limit. The weights of the laws are learned from the bank
(expectation-maximisation), by kind of quantity and degree where these are told. Summed over the laws this
is a belief about the limit. Its median is the best estimate, half of its central {central} the unit of
width. The unit is multiplied by exp(β·φ): φ are facts such as the spread of the belief, the last changes
and the scatter; β is fitted by quantile regression to the true errors of the bank, in which families count
the same, and kinds of quantity. A last (conformal) factor, one for three levels and more and one for two,
covers at least {asked} of every source of meshes with every number of levels, of every kind of quantity and
every dimension with ladders enough: a point more than is claimed, as leaving out knows only the families
that were thought of, and new ones were covered less (see the remarks). Shift and scale of the values change
nothing; sizes count by their ratios.

Measured is by leaving out: a sub-ladder is judged with weights, β and factor that were fitted without its
family.
"""

SOURCES = """The ladders are of three sorts. *Remeshed*: a mesher (Netgen) asked for ever smaller cells.
*Nested*: each cell of a drawn part cut along its edges; counted with them are the *similar* meshes of
this program's own mapped parts, at ratios 2, 1.5 and irregular ones. *Perturbed*: nested or similar
meshes whose inner nodes are moved by up to a fifth of a cell. Sub-ladders are runs of 2 to 7 levels,
every level, every second, every third or irregular choices, with ratios from {low:g} to {high:g}; of
every family, kinds of quantity and numbers of levels come in equal parts, as far as there are enough.

Limits are exact where there is a closed form. Otherwise they are read from a reference: for drawn parts a
mesh refined geometrically towards corners, of degree 5 to 8; for mapped ones a quadratic mesh much finer
than the ladder's and graded to the corners. A coarser reference bounds its error. Of drawn parts a ladder
is left out whose values all are nothing (below 1e-4) beside the mean displacement, or the mean stress, of
the part: what statics or symmetry makes zero is read as round-off. A sub-ladder is judged only if the
error of its finest value is {better:g} times that bound or more: of {with_limit:,} ladders with a limit,
{too_good:,} have a finest value too good to be judged so, and only coarser runs of them count. Runs that
hardly move (1e-7 of the value) are left out too. {never:,} ladders have no run in the measured sample, for
these reasons or because a family's share was full. "Judged" and "singular" count sub-ladders with a
limit and without one.
"""

COVERAGE = """## Coverage, whole families left out

{cases:,} sub-ladders with a limit. Ours: share of intervals that hold the limit (95 % binomial interval);
median U/e about the best estimate / about the finest value, where U is the half-width and e the true
error of the finest value. Aims: 95 %, and from three levels U/e of 4.5 at most from bare tables (4.5
where the kind is known, 3.5 where kind and degree are); what falls short is **bold**. Published rules:
share of the half-widths about the finest value that reach the limit, of those that were given; median
U/e. They were run on the same sub-ladders and told the formal order. Tables by kind and the like are over
three levels and more.

Were the errors of a group draws from one normal distribution about zero, the narrowest half-width that
covers 95 % of them would be 1.96 / 0.674 = 2.9 times the median error. A smaller median U/e needs a best
estimate that is nearer than the finest value, or widths that follow the errors.

![Coverage by group](calibration-coverage.svg)

![Error over half-width](calibration-errors.svg)

![U/e by levels](calibration-widths.svg)
"""

ANSWERS = """## Who answers at all

A rule gives no half-width where its conditions do not hold. All sources together.
"""

UNSEEN = """## Families that no table is made of

Judged with the finished table: {families}.
Nothing is chosen by what comes out here, but the share that the last factor covers (see the remarks); a
family that is to teach the table joins the bank, and another takes its place. Few families stand in a group,
so that one of them moves it: the intervals in brackets are of sub-ladders alone. Drawn parts only, by the
same mesher. Bold falls short.
"""

COMPANION = """## A companion ladder

Pairs of ladders of one quantity, of another degree or other cells, that end at nearly the same size:
where both intervals meet, one stands for both. Coverage and U/e against the better of the two finest
values, kind and degree known, families left out; pairs that do not meet have no interval. Aims: 95 % and
U/e of 2; bold falls short.
"""

ASIDE = """## Kept aside: slower than is calibrated

Parts with a corner whose exponent is below {least} have no part in the table ({families}: {low:.2f} to
{high:.2f}; re-entrant corners with one side held, or bonded to what is nearly rigid). Their energies,
displacements and reactions converge with h^0.6 to h^0.8. With them among the families, the median U/e of
remeshed ladders (kind and degree known) was 4.8, 4.0 and 3.1 at three, four and five levels, as slow ladders
look like many others. Here they are judged with the table as it is. Where the model is known, a corner of
this sort leaves its quantities *unproven*; a bare table does not tell.
"""

GROWTH = """## Values without a limit

The odds of growing against falling laws tell them. From four levels a stress is called singular where the
odds pass the first of these numbers, and growth stays possible above the second: {odds}. They were set on
the whole bank, judged with families left out, so that {alarm} of the stresses with a limit lie above the
first, and {missed} of the singular ones below the second or with a narrow interval (no other lies below where
the narrow ones alone are more). A bare table says nothing of corners, so a stress whose growth is possible is
*unproven*, unless its half-width is below {settled} of its value. A model that is known is asked for its
corners instead. Where growth is faster than any corner's (λ < 0.2) a value is left unproven rather than
called singular; such are counted as singular here. "Neither" may be called sound or refine: the 16 of an
earlier sample were peaks of a whole part or side that still sat at a regular place, where values do settle,
as the corner had not outgrown it yet; no table tells that. Aims at four levels and more: at most 2 % of the
singular are neither, and at most 2 % of those with a limit are called singular; bold falls short.
"""

PROMISE = """## The next mesh

A finer size is promised to do where a bound on the half-width left says so: it holds in {bounded} of the
steps, families counting the same. Held against finer levels of the bank's ladders at the tightest
tolerance that would have been promised, each family by the bound of the others. Aim: 90 % are kept; bold
falls short.
"""

SHORT = """## What falls short

Every group of these tables, for each state of knowledge, that is covered below 95 %, and then, from three
levels, every one whose median U/e is above its aim, about either value. "Beyond chance": 95 % lies above
the binomial interval. Misses: which family (in a family: which kind) has most of them, what coverage is
without it, and how far a miss is off in the median. Widths: the central 95 % of the median U/e where as many
families are drawn with replacement ("of other families": what the choice of families alone moves); the error
of the best estimate over that of the finest value in the median (near one, the levels tell little of the
limit, and no narrow interval can hold it), and who is widest.
"""

REMARKS = """## What these numbers are not

- β and factor for a family were fitted without it, but to facts of the other families, and the weights
  behind those facts were fitted without *their* family only: the family left out had a part in them.
- Thresholds of growth, the choice of facts and constants such as the least size of a group that is covered by
  itself were made on the whole bank, some of them after earlier coverages had been seen.
  One factor for three levels and more, in place of one for each number of levels, and 900 sub-ladders of a
  family, in place of 300, are from such a second look, and so is the family of cracked arms: before
  it, stress intensities were of one family only.
- The last factor covers 96 %, not 95, since new families were seen. Two sets were drawn after the table and
  then held against it, kind and degree known: of the first 92.1 % were covered (plane and ring parts; it has
  joined the bank), of the second (eight of those above) 92.7, 92.4 and 96.1 % of the remeshed ladders of
  three, four, five and more levels, while leaving families out said 95 % and more of every group. Most of
  what was missed are slow ladders of parts with a singular corner: resultants over a boundary that ends in
  one, energies and displacements of quadratic cells whose slow part is not seen yet. The other families
  above were drawn after that choice, and nothing was chosen by them:
  angle cleat, angle frame, grooved block, slotted link, stepped sleeve.
  The price is width: with 95 %, median U/e of remeshed ladders of three, four, five and more levels was 4.7,
  4.2 and 3.4 from bare tables, 3.2, 2.7 and 2.3 with kind and degree known, and fewer groups fell short.
- The nested ladders are mostly similar meshes of mapped parts, which are the regular ones: look at the rows
  of drawn parts too.
- Sub-ladders of a ladder share levels, and quantities of a part share meshes. The binomial intervals take
  them for independent draws, so they are too narrow. The spread over families says more about a new part.
- Displacements and energies that fall slowly and cleanly, with orders below 0.9, come nearly all from two
  families: held corner and glued sleeve. With one left out, the other alone teaches such laws; coverage is
  lowest there, and the last factor, which makes up for it, widens every other interval.
- The families are ours. A part unlike all of them may be covered less.
- Coverage is that of all such ladders, not the odds of one.
"""


def head(made_of: Mapping[str, Any]) -> str:
    """Return the title and what the table was made of."""
    families, ladders, subs = len(made_of["families"]), made_of["ladders"], made_of["sub_ladders"]
    return f"""# Calibration of the interval

Made {made_of["date"]} from {ladders:,} ladders of {families} families of parts; {subs:,} sub-ladders of them
were measured. `make calibrate` makes bank, table and this page.
"""


def aside(families: Sequence[str], low: float, high: float) -> str:
    """Return what was kept aside and why."""
    return ASIDE.format(least=LEAST_EXPONENT, families=", ".join(families), low=low, high=high)


def method() -> str:
    """Return how an interval is found."""
    return METHOD.format(
        least=min(FALLING),
        most=max(FALLING),
        scatters=len(SCATTERS),
        central=numbers.plain_percent(CENTRAL),
        asked=numbers.plain_percent(ASKED),
    )


def bank(out: LeftOut) -> str:
    """Return how the bank was made and what was left out."""
    low, high = RATIOS
    counts = {"with_limit": out.with_limit, "too_good": out.too_good, "never": out.never}
    return "## The bank\n\n" + SOURCES.format(low=low, high=high, better=BETTER_KNOWN, **counts)


def coverage(cases: int) -> str:
    """Return what the tables of coverage show."""
    return COVERAGE.format(cases=cases)


def unseen(families: Sequence[str]) -> str:
    """Return what the families are that no table is made of."""
    return UNSEEN.format(families=", ".join(families))


def promise() -> str:
    """Return how promises of the next mesh are held against the bank."""
    return PROMISE.format(bounded=numbers.plain_percent(BOUNDED))


def growth(odds: str, alarm: float, missed: float, settled: float) -> str:
    """Return how growth is told, with the odds by state of knowledge."""
    shares = {name: numbers.plain_percent(x) for name, x in (("alarm", alarm), ("missed", missed))}
    return GROWTH.format(odds=odds, settled=numbers.plain_percent(settled), **shares)
