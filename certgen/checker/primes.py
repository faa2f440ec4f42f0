"""Primes of a certificate, proved by trial division."""

from __future__ import annotations

from collections.abc import Iterator
from itertools import count

from certgen.errors import RejectedError

__all__ = ["PRIME_LIMIT", "is_prime", "primes", "primes_below", "radical", "require_prime"]

PRIME_LIMIT = 10**12
"""Primes from here on are not accepted: trial division would take too long."""

RADICAL_LIMIT = 10**9
"""Numbers from here on are not factored."""


def is_prime(n: int) -> bool:
    """Whether n is prime, by trial division; n must be below PRIME_LIMIT."""
    if n < 4:
        return n >= 2
    if n % 2 == 0 or n % 3 == 0:
        return False
    d = 5
    while d * d <= n:
        if n % d == 0 or n % (d + 2) == 0:
            return False
        d += 6
    return True


def require_prime(n: int, path: str) -> None:
    """Reject n at `path` unless it is a prime below PRIME_LIMIT.

    Called before anything is computed modulo n.
    """
    if not 2 <= n < PRIME_LIMIT:
        raise RejectedError("not-prime", path, "a prime below 10^12", _short(n))
    if not is_prime(n):
        raise RejectedError("not-prime", path, "a prime", _short(n))


def _short(n: int) -> str:
    return str(n) if n.bit_length() < 200 else f"an integer of {n.bit_length()} bits"


def primes() -> Iterator[int]:
    """The primes in ascending order."""
    return (n for n in count(2) if is_prime(n))


def primes_below(n: int) -> Iterator[int]:
    """The primes below n in ascending order."""
    return (k for k in range(2, n) if is_prime(k))


def radical(n: int) -> int:
    """The product of the primes dividing n >= 1, or n itself from RADICAL_LIMIT on.

    Either is divisible by every prime that divides n, which is all its user needs.
    """
    if n >= RADICAL_LIMIT:
        return n
    out, rest, d = 1, n, 2
    while d * d <= rest:
        if rest % d == 0:
            out *= d
            while rest % d == 0:
                rest //= d
        d += 1
    return out * rest if rest > 1 else out
