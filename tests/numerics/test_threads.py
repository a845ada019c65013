"""The linear algebra libraries that are loaded stay on one thread inside, and are released after it."""

from __future__ import annotations

import numpy as np
import pytest
import scipy.linalg  # noqa: F401  its own library is to be among those before
from threadpoolctl import threadpool_info, threadpool_limits

from pulseprop.numerics.threads import one_thread


def threads():
    return [library["num_threads"] for library in threadpool_info() if library["user_api"] == "blas"]


def test_one_thread_inside_and_as_before_after_it():
    with threadpool_limits(limits=2, user_api="blas"):
        before = threads()
        with one_thread():
            assert threads()
            assert set(threads()) == {1}
            np.ones((300, 300)) @ np.ones((300, 300))
        assert threads() == before


def test_released_where_the_work_fails():
    @one_thread()
    def failing():
        assert set(threads()) == {1}
        raise ValueError("no")

    with threadpool_limits(limits=2, user_api="blas"):
        with pytest.raises(ValueError, match="no"):
            failing()
        assert 1 not in threads()
