"""The strip of the first primes."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from certgen.checker.facts import PrimeStatus
from certgen.notation.latex_writer import Latex, integer

__all__ = ["Strip", "StripItem", "build_strip"]

ROW = 12


@dataclass(frozen=True, slots=True, kw_only=True)
class StripItem:
    """One prime and what the checker found there."""

    p: Latex
    bad: bool
    zero: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class Strip:
    """Rows of at most 12 primes, and which marks occur in them."""

    rows: tuple[tuple[StripItem, ...], ...]
    has_bad: bool
    has_zero: bool
    has_nonzero: bool


def build_strip(primes: Sequence[PrimeStatus]) -> Strip:
    """Return the strip in its order, empty where it would show bad primes alone."""
    statuses = {prime.status for prime in primes}
    if statuses == {"bad"}:
        return Strip(rows=(), has_bad=True, has_zero=False, has_nonzero=False)
    items = [
        StripItem(
            p=integer(prime.p), bad=prime.status == "bad", zero=prime.status == "zero"
        )
        for prime in primes
    ]
    return Strip(
        rows=tuple(tuple(items[k : k + ROW]) for k in range(0, len(items), ROW)),
        has_bad="bad" in statuses,
        has_zero="zero" in statuses,
        has_nonzero="nonzero" in statuses,
    )
