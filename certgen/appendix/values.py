"""Values at points: the small numbers that a reader recomputes by hand.

Only integers, and nothing here decides anything: what the checker has proved is
evaluated once more, and a disagreement is a defect of the program.
"""

from __future__ import annotations

from fractions import Fraction
from math import comb

from certgen.errors import DefectError
from certgen.polynomial import Polynomial

__all__ = ["CALCULATOR", "derivative", "fits", "multiply", "quotient_of", "shifted", "value_at"]

CALCULATOR = 10
"""Spot checks are printed when their numbers have at most this many digits."""


def fits(*values: int | Fraction) -> bool:
    """Whether a pocket calculator shows numerators and denominators in full."""
    bound = 10**CALCULATOR
    return all(abs(v.numerator) < bound and v.denominator < bound for v in values)


def value_at(f: Polynomial, point: int | Fraction) -> Fraction:
    """Return f(point)."""
    total = Fraction(0)
    for c in reversed(f.numerators):
        total = total * point + c
    return total / f.denominator


def derivative(f: Polynomial) -> Polynomial:
    """Return f'."""
    return Polynomial.from_coefficients(k * c for k, c in enumerate(f.coefficients) if k)


def multiply(f: Polynomial, g: Polynomial) -> Polynomial:
    """Return f*g."""
    out = [0] * (len(f.numerators) + len(g.numerators))
    for i, c in enumerate(f.numerators):
        for j, d in enumerate(g.numerators):
            out[i + j] += c * d
    scale = f.denominator * g.denominator
    return Polynomial.from_coefficients(Fraction(c, scale) for c in out)


def shifted(f: Polynomial, point: int, scale: int) -> Polynomial:
    """Return f(point + scale*t) for integral f, a polynomial in t."""
    return Polynomial.from_integers(
        sum(c * comb(k, j) * point ** (k - j) for k, c in enumerate(f.numerators) if k >= j)
        * scale**j
        for j in range(len(f.numerators))
    )


def quotient_of(total: Fraction, factor: Fraction) -> Fraction:
    """Return total/factor, an integer, as the checker has proved."""
    if factor == 0 or (total / factor).denominator != 1:
        raise DefectError("a spot check fails")
    return total / factor
