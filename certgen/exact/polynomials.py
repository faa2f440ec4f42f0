"""Polynomials over Z on FLINT, and their passage to and from the neutral type.

`IntegerPolynomial` is FLINT's `fmpz_poly`.  A *base* is a non-constant primitive
polynomial of Z[x] with positive leading coefficient.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from fractions import Fraction
from math import lcm
from typing import Any, TypeAlias

from flint import fmpz_poly

from certgen.polynomial import Polynomial

__all__ = [
    "IntegerPolynomial",
    "coprime_base",
    "from_flint",
    "from_flint_rational",
    "irreducible_factors",
    "logarithmic_derivative",
    "order_along",
    "primitive_part",
    "product",
    "square_free_parts",
    "taylor_coefficients",
    "to_flint",
]

IntegerPolynomial: TypeAlias = Any


def to_flint(polynomial: Polynomial) -> IntegerPolynomial:
    """Return an integral polynomial as `fmpz_poly`; ValueError if it is not integral."""
    if polynomial.denominator != 1:
        raise ValueError("the polynomial has coefficients that are not integers")
    return fmpz_poly(list(polynomial.numerators))


def from_flint(polynomial: IntegerPolynomial) -> Polynomial:
    """Return an `fmpz_poly` (or `nmod_poly`: coefficients 0 to p - 1) as Polynomial."""
    return Polynomial(tuple(map(int, polynomial.coeffs())))


def from_flint_rational(polynomial: Any) -> Polynomial:
    """Return an `fmpq_poly` as Polynomial."""
    numerators = tuple(map(int, polynomial.numer().coeffs()))
    return Polynomial(numerators, int(polynomial.denom()))


def primitive_part(f: IntegerPolynomial) -> IntegerPolynomial:
    """Return f divided by its content, with positive leading coefficient; f != 0."""
    content = f.content()
    return f / (-content if f.leading_coefficient() < 0 else content)


def product(factors: Iterable[IntegerPolynomial]) -> IntegerPolynomial:
    """Return the product, by a balanced tree."""
    level = list(factors) or [fmpz_poly([1])]
    while len(level) > 1:
        pairs = zip(level[::2], level[1::2], strict=False)
        level = [f * g for f, g in pairs] + level[len(level) & ~1 :]
    return level[0]


def logarithmic_derivative(
    powers: Sequence[tuple[IntegerPolynomial, Fraction]],
) -> tuple[IntegerPolynomial, IntegerPolynomial, int]:
    """Return (S, V, N): sum of e*v'/v over the (v, e) is S/(N*V), not reduced.

    V is the product of the bases, N the common denominator of the exponents.
    """
    degree = lcm(*(e.denominator for _, e in powers))
    level = [(v.derivative() * int(e * degree), v) for v, e in powers]
    level = level or [(fmpz_poly([]), fmpz_poly([1]))]
    while len(level) > 1:
        pairs = zip(level[::2], level[1::2], strict=False)
        merged = [(n * w + m * v, v * w) for (n, v), (m, w) in pairs]
        level = merged + level[len(level) & ~1 :]
    return (*level[0], degree)


def square_free_parts(f: IntegerPolynomial) -> list[tuple[IntegerPolynomial, int]]:
    """Return the bases v_m with f = constant * product v_m^m, one for each m."""
    _, parts = f.factor_squarefree()
    return [(primitive_part(v), int(m)) for v, m in parts if v.degree() > 0]


def irreducible_factors(f: IntegerPolynomial) -> list[IntegerPolynomial]:
    """Return the distinct irreducible bases that divide f != 0."""
    _, factors = f.factor()
    return [primitive_part(v) for v, _ in factors if v.degree() > 0]


def order_along(g: IntegerPolynomial, f: IntegerPolynomial) -> tuple[int, IntegerPolynomial]:
    """Return (m, f/g^m) with the largest m such that g^m divides f in Q[x]; g a base."""
    order = 0
    while f.degree() >= g.degree():
        quotient, rest = divmod(f, g)
        if rest != 0:
            break
        order, f = order + 1, quotient
    return order, f


def coprime_base(polynomials: Iterable[IntegerPolynomial]) -> list[IntegerPolynomial]:
    """Return pairwise coprime squarefree bases of which each input is a product of powers.

    The order of every input along each of them is constant (up to a constant factor).
    """
    base: list[IntegerPolynomial] = []
    for polynomial in polynomials:
        for part, _ in square_free_parts(polynomial):
            base = _refine(base, part)
    return base


def _refine(base: list[IntegerPolynomial], new: IntegerPolynomial) -> list[IntegerPolynomial]:
    refined = []
    for old in base:
        common = old.gcd(new)
        new = new / common
        refined += [f for f in (common, old / common) if f.degree() > 0]
    return [*refined, new] if new.degree() > 0 else refined


def taylor_coefficients(f: IntegerPolynomial, point: int) -> list[int]:
    """Return the integers f^(j)(point)/j! for j = 0, ..., deg f."""
    return [int(c) for c in f(fmpz_poly([point, 1])).coeffs()]
