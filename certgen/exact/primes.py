"""Proved primes, small and of word size.

Primality is decided by FLINT's `fmpz.is_prime`: below 2^64 a strong-pseudoprime
test that was verified for all such numbers, above a primality proof (Pocklington
and the test of Adleman, Pomerance, Rumely, Cohen and Lenstra).  No modulus enters
modular arithmetic before it has passed here: a composite one aborts the process.
"""

from __future__ import annotations

from collections.abc import Iterator
from functools import lru_cache
from itertools import count

from flint import fmpz

__all__ = ["is_prime", "large_primes", "next_prime", "primes"]

_LARGE = 1 << 62


def is_prime(n: int) -> bool:
    """Whether `n` is a prime number."""
    return n > 1 and bool(fmpz(n).is_prime())


@lru_cache(maxsize=4096)
def next_prime(n: int) -> int:
    """Return the smallest prime above `n`."""
    n = max(n + 1, 2)
    while not is_prime(n):
        n += 1
    return n


def primes(start: int = 2) -> Iterator[int]:
    """Yield the primes from `start` on, ascending, without end."""
    p = start - 1
    while True:
        p = next_prime(p)
        yield p


@lru_cache(maxsize=256)
def _large_prime(index: int) -> int:
    n = (_large_prime(index - 1) if index else _LARGE) - 1
    while not is_prime(n):
        n -= 1
    return n


def large_primes() -> Iterator[int]:
    """Yield the primes below 2^62, descending: products of two fit FLINT's words."""
    for index in count():
        yield _large_prime(index)
