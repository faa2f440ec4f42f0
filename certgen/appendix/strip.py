"""The strip of the first primes."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from certgen.checker.facts import PrimeStatus
from certgen.notation.latex_writer import Latex, integer

__all__ = ["StripItem", "build_strip"]


@dataclass(frozen=True, slots=True, kw_only=True)
class StripItem:
    """One prime and what the checker found there."""

    p: Latex
    bad: bool
    zero: bool


def build_strip(primes: Sequence[PrimeStatus]) -> tuple[StripItem, ...]:
    """Return the strip in its order."""
    return tuple(
        StripItem(p=integer(prime.p), bad=prime.status == "bad",
                  zero=prime.status == "zero")
        for prime in primes
    )
