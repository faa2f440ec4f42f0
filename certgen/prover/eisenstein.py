"""An Eisenstein constant of a product of powers at an integer point."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from math import lcm

from certgen.certificate import Eisenstein
from certgen.exact.integers import radical
from certgen.exact.polynomials import IntegerPolynomial, taylor_coefficients
from certgen.exact.primes import primes

__all__ = ["compute_eisenstein"]

_DIGITS = 1_000
_TRIAL_LIMIT = 10_000
_GREEDY_DEGREE = 60


def compute_eisenstein(
    powers: Sequence[tuple[IntegerPolynomial, Fraction]],
) -> Eisenstein | None:
    """Return a constant L for y = product v^(n/d), normalised by y(x0) = 1.

    y(x0 + L*t) has integer coefficients when for every base v and all j >= 1
    d*rad(d)*v(x0) divides L^j * v^(j)(x0)/j!  (only v(x0) where d = 1), for
    binomial(n/d, k) * (d*rad(d))^k is an integer.  x0 is the first of
    0, 1, -1, 2, ... that is no root; None where L has more than 1000 digits.
    """
    point = _find_point([v for v, _ in powers])
    conditions = [_condition(v, exponent, point) for v, exponent in powers]
    constant = lcm(*(modulus for modulus, _ in conditions))
    if sum(v.degree() for v, _ in powers) <= _GREEDY_DEGREE:
        constant = _reduce(constant, conditions)
    if constant >= 10**_DIGITS:
        return None
    return Eisenstein(point=point, constant=constant)


def _find_point(bases: Sequence[IntegerPolynomial]) -> int:
    point = 0
    while any(v(point) == 0 for v in bases):
        point = -point if point > 0 else 1 - point
    return point


_Condition = tuple[int, list[int]]


def _condition(v: IntegerPolynomial, exponent: Fraction, point: int) -> _Condition:
    """(m, [c_1, c_2, ...]): m must divide L^j * c_j for all j >= 1."""
    value, *rest = taylor_coefficients(v, point)
    d = exponent.denominator
    return abs(value) * (1 if d == 1 else d * radical(d)), rest


def _reduce(constant: int, conditions: Sequence[_Condition]) -> int:
    for q in primes():
        if q > min(_TRIAL_LIMIT, constant):
            return constant
        while constant % q == 0 and _is_sufficient(constant // q, conditions):
            constant //= q
    return constant


def _is_sufficient(constant: int, conditions: Sequence[_Condition]) -> bool:
    for modulus, coefficients in conditions:
        power = 1
        for c in coefficients:
            power = power * constant % modulus
            if power * c % modulus:
                return False
    return True
