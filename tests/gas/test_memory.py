"""No temporary as large as the array that was asked: blocks that fit the cache."""

import tracemalloc

import numpy as np
import pytest

from eoscore.gas import bose, fermi

LARGE = np.linspace(1e-3, 30, 1_000_000)  # 8 MB


@pytest.mark.parametrize("function", [bose, fermi])
@pytest.mark.parametrize("order", [1.5, 2.0, 2.3])
def test_temporaries_stay_small(function, order):
    function(order, LARGE[:10])  # the tables of the order are made once
    result = np.empty_like(LARGE)
    tracemalloc.start()
    function(order, LARGE, out=result)
    _, peak = tracemalloc.get_traced_memory()
    tracemalloc.stop()
    assert peak < 4e6
    assert np.all(np.isfinite(result))
