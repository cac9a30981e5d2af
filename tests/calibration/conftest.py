"""The packaged bank, read once, and ladders of a known error law."""

import numpy as np
import pytest

from convergence.calibration.bank import read_bank
from convergence.calibration.known_ladder import KnownLadder


@pytest.fixture(scope="session")
def packaged() -> list[KnownLadder]:
    return read_bank()


@pytest.fixture
def lawful():
    """Return a maker of ladders f = limit + size h^order, each level's error strayed by a share of itself."""

    def make(
        order: float, *, family: str = "made", size: float = 1.0, stray: np.ndarray | float = 0.0, bound=0.0
    ) -> KnownLadder:
        h = 2.0 ** -np.arange(5.0)
        return KnownLadder(
            family=family,
            case="a law",
            label=f"order {order}",
            kind="displacement",
            source="nested",
            shape="triangle",
            dimension=2,
            degree=1,
            exponent=None,
            singular=False,
            h=h,
            f=10.0 + size * h**order * (1.0 + stray),
            limit=10.0,
            bound=bound,
        )

    return make
