"""The small polynomial interface that the rules are written against.

Two implementations: `plain` (standard library alone) and `flint_arithmetic`
(python-flint, the only module of the checker that imports it).
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from typing import Protocol, Self, TypeVar

__all__ = ["Arithmetic", "ModPoly", "ZPoly", "fold", "load"]


class ZPoly(Protocol):
    """A polynomial with integer coefficients."""

    @property
    def degree(self) -> int:
        """The degree, -1 for zero."""

    def coefficients(self) -> list[int]:
        """The ascending coefficients, without trailing zeros."""

    def leading(self) -> int:
        """The leading coefficient, 0 for zero."""

    def __add__(self, other: Self) -> Self: ...
    def __sub__(self, other: Self) -> Self: ...
    def __mul__(self, other: Self) -> Self: ...

    def times(self, factor: int) -> Self:
        """The multiple by an integer."""

    def derivative(self) -> Self:
        """The derivative."""

    def value(self, x: int) -> int:
        """The value at an integer."""

    def shifted(self, x: int) -> Self:
        """The polynomial in t that is f(x + t)."""

    def exact_quotient(self, divisor: Self) -> Self | None:
        """The quotient if the (non-zero) divisor divides in Z[x], else None."""

    def modulo(self, p: int) -> ModPoly:
        """The image modulo a prime p."""


class ModPoly(Protocol):
    """A polynomial over F_p; both operands of an operation have the same prime p."""

    @property
    def degree(self) -> int:
        """The degree, -1 for zero."""

    def coefficients(self) -> list[int]:
        """The ascending coefficients from 0 to p - 1, without trailing zeros."""

    def __add__(self, other: Self) -> Self: ...
    def __sub__(self, other: Self) -> Self: ...
    def __mul__(self, other: Self) -> Self: ...

    def quotient(self, divisor: Self) -> Self:
        """The quotient of the division by a non-zero divisor."""

    def remainder(self, divisor: Self) -> Self:
        """The remainder of the division by a non-zero divisor."""

    def gcd(self, other: Self) -> Self:
        """The monic greatest common divisor (0 if both are 0)."""

    def derivative(self) -> Self:
        """The derivative."""

    def power(self, exponent: int, modulus: Self | None = None) -> Self:
        """The power, modulo a non-constant polynomial if one is given."""


class Arithmetic(Protocol):
    """A way to compute: its name and its two constructors."""

    name: str

    def integer_polynomial(self, coefficients: Sequence[int]) -> ZPoly:
        """The polynomial with these ascending coefficients."""

    def modular_polynomial(self, coefficients: Sequence[int], p: int) -> ModPoly:
        """The polynomial over F_p, p a proved prime, with these coefficients."""


def load(name: str) -> Arithmetic:
    """Return the arithmetic called "plain" or "flint" (ImportError without python-flint)."""
    if name == "plain":
        from certgen.checker import plain

        return plain.ARITHMETIC
    if name == "flint":
        from certgen.checker import flint_arithmetic

        return flint_arithmetic.ARITHMETIC
    raise ValueError(f"unknown arithmetic '{name}': it is 'plain' or 'flint'")


T = TypeVar("T")


def fold(items: Iterable[T], combine: Callable[[T, T], T], empty: T) -> T:
    """Combine the items in a balanced tree: operands of equal size multiply fastest."""
    level = list(items)
    while len(level) > 1:
        pairs = [combine(level[i], level[i + 1]) for i in range(0, len(level) - 1, 2)]
        level = pairs + level[len(level) & ~1 :]
    return level[0] if level else empty
