"""Is a claimed product of powers the solution?  If not: where the residues differ."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from certgen.certificate import AlgebraicSolution, Disagreement
from certgen.claim import FirstOrderEquation, Power
from certgen.errors import DefectError
from certgen.exact.modular import reduce_polynomial
from certgen.exact.polynomials import (
    IntegerPolynomial,
    coprime_base,
    from_flint,
    irreducible_factors,
    logarithmic_derivative,
    order_along,
    product,
    to_flint,
)
from certgen.exact.primes import primes

__all__ = ["closed_form_solves", "find_disagreement"]

_FACTORED_DEGREE = 200


def _to_powers(powers: Sequence[Power]) -> list[tuple[IntegerPolynomial, Fraction]]:
    return [(to_flint(power.base), power.exponent) for power in powers]


def closed_form_solves(equation: FirstOrderEquation, powers: Sequence[Power]) -> bool:
    """Whether y = product base^exponent solves y' = (a/b)*y, by exact comparison.

    The bases may have multiple roots and common factors.
    """
    a, b = to_flint(equation.numerator), to_flint(equation.denominator)
    numerator, denominator, degree = logarithmic_derivative(_to_powers(powers))
    return bool(numerator * b == a * denominator * degree)


def find_disagreement(actual: AlgebraicSolution, powers: Sequence[Power]) -> Disagreement:
    """Return the smallest factor along which the residues of the two sides differ.

    Hypothesis: the closed form does not solve the equation of which `actual` is
    the solution.  Irreducible, unless a factor of degree above 200 is concerned.
    """
    bases, claimed = _to_powers(actual.solution), _to_powers(powers)
    pieces = coprime_base(v for v, _ in bases + claimed)
    differing = [
        factor
        for piece in pieces
        if _residue_along(piece, bases) != _residue_along(piece, claimed)
        for factor in _factors(piece)
    ]
    factor = min(differing, key=lambda g: from_flint(g).sort_key)
    return Disagreement(
        factor=from_flint(factor),
        residue_of_equation=_residue_along(factor, bases),
        residue_of_closed_form=_residue_along(factor, claimed),
        prime=_find_coprime_prime(factor, bases, claimed),
    )


def _factors(piece: IntegerPolynomial) -> list[IntegerPolynomial]:
    return irreducible_factors(piece) if piece.degree() <= _FACTORED_DEGREE else [piece]


def _residue_along(
    g: IntegerPolynomial, powers: Sequence[tuple[IntegerPolynomial, Fraction]]
) -> Fraction:
    return sum((e * order_along(g, v)[0] for v, e in powers), Fraction(0))


def _find_coprime_prime(
    g: IntegerPolynomial,
    bases: Sequence[tuple[IntegerPolynomial, Fraction]],
    claimed: Sequence[tuple[IntegerPolynomial, Fraction]],
) -> int:
    """The smallest q, not dividing lc(g), modulo which g is squarefree and isolated.

    Isolated: coprime to the claimed bases without g, and where g is no pole of the equation
    the product of the actual bases.
    """
    others = [g.derivative(), *(order_along(g, w)[1] for w, _ in claimed)]
    if _residue_along(g, bases) == 0:
        others.append(product(v for v, _ in bases))
    for q in primes():
        if int(g.leading_coefficient()) % q:
            image = reduce_polynomial(g, q)
            if all(image.gcd(reduce_polynomial(w, q)).degree() == 0 for w in others):
                return q
    raise DefectError("the primes have come to an end")
