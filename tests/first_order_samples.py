"""Equations and claims for the tests, built with FLINT and none of certgen's algebra."""

from __future__ import annotations

import random
from fractions import Fraction
from math import gcd

from flint import fmpq, fmpq_poly, fmpz_poly

from certgen.claim import FirstOrderClaim, FirstOrderEquation, Letters, Power
from certgen.polynomial import Polynomial

Factors = list[tuple[list[int], Fraction]]


def make_equation(top: fmpq_poly, bottom: fmpq_poly) -> FirstOrderEquation:
    """y' = (top/bottom)*y in canonical form."""
    common = top.gcd(bottom)
    top, bottom = top / common, bottom / common
    scale = (top.denom() * bottom.denom()) * (1 if bottom[bottom.degree()] > 0 else -1)
    a, b = (top * scale).numer(), (bottom * scale).numer()
    content = gcd(int(a.content()), int(b.content()))
    return FirstOrderEquation(
        numerator=Polynomial(tuple(int(c) // content for c in a.coeffs())),
        denominator=Polynomial(tuple(int(c) // content for c in b.coeffs())),
    )


def equation_of(a: list[int], b: list[int]) -> FirstOrderEquation:
    """y' = (a/b)*y from ascending coefficients."""
    return make_equation(fmpq_poly(a), fmpq_poly(b))


def logarithmic_derivative(factors: Factors) -> tuple[fmpq_poly, fmpq_poly]:
    """Numerator and denominator of the sum of exponent * v'/v, one term at a time."""
    top, bottom = fmpq_poly([0]), fmpq_poly([1])
    for coefficients, exponent in factors:
        v = fmpq_poly(coefficients)
        top = top * v + v.derivative() * fmpq(*exponent.as_integer_ratio()) * bottom
        bottom = bottom * v
    return top, bottom


def make_claim(
    equation: FirstOrderEquation,
    asserts: str = "algebraic",
    solution: Factors | None = None,
) -> FirstOrderClaim:
    powers = None
    if solution is not None:
        powers = tuple(
            Power(base=Polynomial.from_integers(v), exponent=e) for v, e in solution
        )
        powers = tuple(sorted(powers, key=lambda power: power.base.sort_key))
    return FirstOrderClaim(
        id="test",
        equation=equation,
        as_written=str(equation),
        letters=Letters(),
        asserts=asserts,
        solution=powers,
        solution_as_written=None if powers is None else "as in the test",
    )


def random_base(rng: random.Random, degree: int, size: int = 9) -> list[int]:
    while True:
        coefficients = [rng.randint(-size, size) for _ in range(degree)]
        coefficients.append(rng.randint(1, size))
        if gcd(*coefficients) == 1:
            return coefficients


def random_factors(rng: random.Random, count: int, degree: int) -> Factors:
    return [
        (
            random_base(rng, rng.randint(1, degree)),
            Fraction(rng.choice([-1, 1]) * rng.randint(1, 9), rng.randint(1, 9)),
        )
        for _ in range(count)
    ]


def expand(powers: tuple[Power, ...]) -> fmpz_poly:
    """The product of integral powers, multiplied out."""
    result = fmpz_poly([1])
    for power in powers:
        result *= fmpz_poly(list(power.base.numerators)) ** int(power.exponent)
    return result
