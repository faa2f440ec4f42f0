"""What the rules share: conversion, comparison, rejection."""

from __future__ import annotations

from fractions import Fraction

from certgen.checker.arithmetic import Arithmetic, ModPoly, ZPoly
from certgen.checker.primes import require_prime
from certgen.errors import RejectedError, shorten
from certgen.polynomial import Polynomial, write_integer, write_polynomial, write_rational

__all__ = [
    "from_mod",
    "from_z",
    "reject_unless",
    "require_equal",
    "require_prime_not_dividing",
    "show",
    "to_mod",
    "to_z",
]


def to_z(arithmetic: Arithmetic, polynomial: Polynomial) -> ZPoly:
    """The numerators of a polynomial, as an element of Z[x]."""
    return arithmetic.integer_polynomial(polynomial.numerators)


def to_mod(arithmetic: Arithmetic, polynomial: Polynomial, p: int) -> ModPoly:
    """An integral polynomial modulo a proved prime p."""
    return arithmetic.modular_polynomial(polynomial.numerators, p)


def from_z(polynomial: ZPoly) -> Polynomial:
    return Polynomial(tuple(polynomial.coefficients()))


def from_mod(polynomial: ModPoly) -> Polynomial:
    return Polynomial(tuple(polynomial.coefficients()))


def reject_unless(
    condition: bool, code: str, path: str, expected: str, found: object
) -> None:
    """Raise RejectedError unless the condition holds."""
    if not condition:
        raise RejectedError(code, path, expected, show(found))


def show(value: object) -> str:
    """A short text for a value in a message."""
    if isinstance(value, Polynomial):
        return shorten(write_polynomial(value)) if value.degree <= 40 else (
            f"a polynomial of degree {value.degree}"
        )
    if isinstance(value, int | Fraction):
        return shorten(write_rational(value))
    return shorten(value)


def require_equal(left: ZPoly, right: ZPoly, code: str, path: str, name: str) -> None:
    """Reject unless left = right in Z[x]; name the first coefficient that differs."""
    if left == right:
        return
    a, b = left.coefficients(), right.coefficients()
    size = max(len(a), len(b))
    a += [0] * (size - len(a))
    b += [0] * (size - len(b))
    k = next(k for k in range(size - 1, -1, -1) if a[k] != b[k])
    raise RejectedError(
        code,
        path,
        f"{shorten(write_integer(a[k]))} as coefficient of x^{k} in {name}",
        shorten(write_integer(b[k])),
    )


def require_prime_not_dividing(p: int, leading: int, path: str) -> None:
    """Reject unless p is a prime that does not divide this leading coefficient."""
    require_prime(p, path)
    reject_unless(
        leading % p != 0,
        "prime-divides-leading-coefficient",
        path,
        "a prime that does not divide the leading coefficient",
        p,
    )
