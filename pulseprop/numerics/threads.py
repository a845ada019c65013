"""Linear algebra on one thread, for work of many small steps.

An interior point or a search calls the library thousands of times, each for milliseconds. With two threads
each call waits at its end, spinning, for the slower one. Measured on two cores with others busy beside it:
the factor of 250 rows of n and k took nine times as much processor time as on one thread, 1,000 rows ten to
twelve times. A second core can gain a factor of two at most, where nobody else needs it; so it is one at any
size.
"""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager

__all__ = ["one_thread"]


@contextmanager
def one_thread() -> Iterator[None]:
    """Around a block, or as a decorator of a function; what was allowed before is allowed again after it."""
    import scipy.linalg  # noqa: F401  scipy brings a library of its own, and only loaded ones are limited
    from threadpoolctl import threadpool_limits

    with threadpool_limits(limits=1, user_api="blas"):
        yield
