"""Compiled products and PARDISO give what scipy gives; neither is needed nor loaded for small parts."""

import subprocess
import sys

import numpy as np
import pytest
from scipy import sparse

from convergence.errors import SolvingError
from convergence.fem import products, solvers
from convergence.fem.products import NodeRows, in_single, is_compiled

NODES = 300


def blocks(dimension: int) -> sparse.csr_matrix:
    """Return a symmetric positive definite matrix of dense blocks between neighbours in a chain."""
    numbers = np.random.default_rng(1)
    chain = sparse.diags([np.ones(NODES - 1), np.ones(NODES), np.ones(NODES - 1)], [-1, 0, 1])
    whole = sparse.kron(chain, np.ones((dimension, dimension)), format="csr")
    whole.data = numbers.random(whole.nnz)
    found = whole + whole.T + 20.0 * sparse.identity(whole.shape[0])
    return sparse.csr_matrix(found)


@pytest.mark.parametrize("precision", [np.float64, np.float32])
@pytest.mark.parametrize("dimension", [2, 3])
@pytest.mark.parametrize("complete", [True, False], ids=["whole blocks", "an entry missing"])
def test_compiled_products_are_those_of_scipy(dimension: int, precision: type, complete: bool) -> None:
    """To the rounding of sums of at most nine terms of size 20, ten units in the last place."""
    pytest.importorskip("numba", reason="the extra `fast` is not installed")
    matrix = blocks(dimension)
    if not complete:
        matrix[0, 1] = 0.0
        matrix.eliminate_zeros()
    rows, x = NodeRows(matrix, dimension), np.random.default_rng(2).random(matrix.shape[0])
    found = (rows if precision is np.float64 else in_single(rows)) @ x.astype(precision)
    assert found.dtype == precision
    np.testing.assert_allclose(found, matrix @ x, rtol=10 * np.finfo(precision).eps)


def test_two_threads_share_the_rows(monkeypatch: pytest.MonkeyPatch) -> None:
    pytest.importorskip("numba", reason="the extra `fast` is not installed")
    monkeypatch.setattr(products, "LEAST_SHARED", 10)
    matrix = blocks(3)
    x = np.random.default_rng(2).random(matrix.shape[0])
    np.testing.assert_allclose(NodeRows(matrix, 3) @ x, matrix @ x, rtol=10 * np.finfo(float).eps)


def test_small_parts_load_no_extra() -> None:
    """The solver itself imports neither numba nor MKL."""
    code = "import sys, convergence.fem.solution; print({'numba', 'pypardiso'} & set(sys.modules))"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "set()"
    assert not is_compiled(products.LEAST_COMPILED[2], 2) and not is_compiled(products.LEAST_COMPILED[3], 3)


def test_pardiso_solves_and_refuses(monkeypatch: pytest.MonkeyPatch) -> None:
    """As SuperLU, one right-hand side or several; a matrix that is not positive definite is refused."""
    pytest.importorskip("pypardiso", reason="the extra `mkl` is not installed")
    matrix = blocks(3).tocsc()
    right = np.random.default_rng(3).random((matrix.shape[0], 2))
    expected = solvers.factorized(matrix)(right)
    monkeypatch.setattr(solvers, "LEAST_LARGE", 10)
    solve = solvers.factorized(matrix)
    np.testing.assert_allclose(solve(right), expected, rtol=1e-12)
    np.testing.assert_allclose(solve(right[:, 0]), expected[:, 0], rtol=1e-12)
    with pytest.raises(SolvingError, match="singular"):
        solvers.factorized((-matrix).tocsc())
