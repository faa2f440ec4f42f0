"""Polynomial arithmetic on python-flint: the checker's only import of it."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any, Self

from flint import fmpz_poly, nmod_poly

__all__ = ["ARITHMETIC"]


class _Polynomial:
    """What both kinds of polynomials share; `_f` is FLINT's."""

    __slots__ = ("_f",)

    def __init__(self, f: Any) -> None:
        self._f = f

    @property
    def degree(self) -> int:
        return int(self._f.degree())

    def coefficients(self) -> list[int]:
        return [int(c) for c in self._f.coeffs()]

    def __eq__(self, other: object) -> bool:
        return isinstance(other, type(self)) and bool(self._f == other._f)

    __hash__ = None  # type: ignore[assignment]

    def __add__(self, other: Self) -> Self:
        return type(self)(self._f + other._f)

    def __sub__(self, other: Self) -> Self:
        return type(self)(self._f - other._f)

    def __mul__(self, other: Self) -> Self:
        return type(self)(self._f * other._f)

    def derivative(self) -> Self:
        return type(self)(self._f.derivative())


class _ZPoly(_Polynomial):
    """See arithmetic.ZPoly."""

    __slots__ = ()

    def leading(self) -> int:
        return int(self._f.leading_coefficient()) if self._f else 0

    def times(self, factor: int) -> _ZPoly:
        return _ZPoly(self._f * factor)

    def value(self, x: int) -> int:
        return int(self._f(x))

    def shifted(self, x: int) -> _ZPoly:
        return _ZPoly(self._f(fmpz_poly([x, 1])))

    def exact_quotient(self, divisor: _ZPoly) -> _ZPoly | None:
        quotient, remainder = divmod(self._f, divisor._f)
        return None if remainder else _ZPoly(quotient)

    def modulo(self, p: int) -> _ModPoly:
        return _ModPoly(nmod_poly(self._f, p))


class _ModPoly(_Polynomial):
    """See arithmetic.ModPoly."""

    __slots__ = ()

    def quotient(self, divisor: _ModPoly) -> _ModPoly:
        return _ModPoly(self._f // divisor._f)

    def remainder(self, divisor: _ModPoly) -> _ModPoly:
        return _ModPoly(self._f % divisor._f)

    def gcd(self, other: _ModPoly) -> _ModPoly:
        return _ModPoly(self._f.gcd(other._f))

    def power(self, exponent: int, modulus: _ModPoly | None = None) -> _ModPoly:
        if modulus is None:
            return _ModPoly(self._f**exponent)
        return _ModPoly(pow(self._f % modulus._f, exponent, modulus._f))


class _Flint:
    name = "flint"

    def integer_polynomial(self, coefficients: Sequence[int]) -> _ZPoly:
        return _ZPoly(fmpz_poly(list(coefficients)))

    def modular_polynomial(self, coefficients: Sequence[int], p: int) -> _ModPoly:
        return _ModPoly(nmod_poly([c % p for c in coefficients], p))


ARITHMETIC = _Flint()
