"""The packaged table: everything that can be asked of it is there, and its numbers are consistent."""

from typing import get_args

import numpy as np
import pytest

from convergence.coverage import Knowledge
from convergence.histories.laws import IS_GROWING
from convergence.histories.table import HIGHEST_DEGREE, key, knowledge, outcomes, table

STATES = get_args(Knowledge)
LEVELS = ("2", "3", "4", "5")


def test_weights_add_to_one_over_the_laws_with_a_limit() -> None:
    """They are written to four significant digits, so a sum over a hundred laws keeps three of them."""
    for name, weights in table().weights.items():
        assert weights.sum() == pytest.approx(1.0, abs=1e-3), name
        assert np.all(weights >= 0.0) and not weights[IS_GROWING].any(), name


def test_growing_weights_are_of_even_odds() -> None:
    growing = table().growing
    assert growing.sum() == pytest.approx(1.0, abs=1e-3)
    assert np.all(growing >= 0.0) and not growing[~IS_GROWING].any()


def test_every_kind_has_every_degree() -> None:
    kinds = {name.partition("/")[0] for name in table().weights} - {""}
    wanted = {key("unknown", None)} | {key(kind, degree) for kind in kinds for degree in (None, 1, 2, 3)}
    assert kinds and set(table().weights) == wanted


@pytest.mark.parametrize("known", STATES)
def test_every_state_of_knowledge(known: str) -> None:
    taught = table()
    assert set(LEVELS) <= set(taught.stretch[known]) and set(LEVELS) <= set(taught.coverage[known])
    assert taught.growth[known]["possible"] < taught.growth[known]["shown"]
    for levels in LEVELS:
        found = taught.coverage[known][levels]
        assert (found.knowledge, str(found.levels)) == (known, levels)
        assert 0 <= found.covered <= found.cases
        assert 0.0 <= found.low <= found.share <= found.high <= 1.0
        assert found.ratio > 0.0 and "always" in taught.stretch[known][levels]


def test_nothing_known_uses_nothing_known() -> None:
    for betas in table().stretch["nothing"].values():
        assert not any(name.startswith(("is ", "degree ")) for name in betas)


def test_outcomes_are_what_coverage_counts() -> None:
    """Known ladders with a limit: a share up to one is covered. Printed to three digits, 1 is either."""
    rows = outcomes()
    group = np.minimum(rows["levels"], int(LEVELS[-1]))
    for known, column in (("nothing", "share_nothing"), ("kind and degree", "share_known")):
        for levels in LEVELS:
            found, shares = table().coverage[known][levels], rows[column][group == int(levels)]
            assert len(shares) == found.cases
            assert (shares < 1.0).sum() <= found.covered <= (shares <= 1.0).sum()
    assert np.all(rows["regularity_nothing"] > 0.0) and np.all(rows["regularity_known"] > 0.0)


def test_where_it_comes_from() -> None:
    made_of = table().made_of
    assert made_of["date"].count("-") == 2 and len(made_of["families"]) > 1
    assert made_of["ladders"] > 0 and made_of["sub_ladders"] > 0


def test_names() -> None:
    assert [knowledge("unknown", 2), knowledge("energy", None), knowledge("energy", 2)] == list(STATES)
    assert key("unknown", 2) == "" and key("energy", None) == "energy" and key("energy", 1) == "energy/1"
    assert key("energy", 9) == key("energy", HIGHEST_DEGREE)
