"""The proof object of the algebraic side, from the groups of residues."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from fractions import Fraction
from itertools import chain, islice
from math import lcm

from certgen.certificate import AlgebraicSolution, MinimalPolynomial, PartialFraction
from certgen.claim import Power
from certgen.errors import DefectError
from certgen.exact.modular import is_squarefree, reduce_polynomial
from certgen.exact.polynomials import (
    IntegerPolynomial,
    from_flint,
    irreducible_factors,
    product,
    to_flint,
)
from certgen.exact.primes import primes
from certgen.polynomial import Polynomial
from certgen.prover.eisenstein import compute_eisenstein
from certgen.prover.residue_groups import ResidueGroup

__all__ = ["build_algebraic_solution"]

_FACTORED_DEGREE = 200
_SQUAREFREE_WORK = 100_000
_FIRST_LARGE_PRIME = 10**9  # the checker divides by trial, up to 10^12


def build_algebraic_solution(groups: Iterable[ResidueGroup]) -> AlgebraicSolution:
    """Return the solution product base^residue with all that is stated about it."""
    solution = _sorted_powers((from_flint(g.base), g.residue) for g in groups)
    bases = [(to_flint(power.base), power.exponent) for power in solution]
    degree = lcm(*(power.exponent.denominator for power in solution))
    return AlgebraicSolution(
        solution=solution,
        partial_fractions=_partial_fractions(bases),
        degree=degree,
        minimal_polynomial=_minimal_polynomial(solution, degree),
        squarefree_prime=_find_squarefree_prime(product(base for base, _ in bases)),
        eisenstein=compute_eisenstein(bases),
    )


def _sorted_powers(powers: Iterable[tuple[Polynomial, Fraction]]) -> tuple[Power, ...]:
    ordered = sorted(powers, key=lambda power: power[0].sort_key)
    return tuple(Power(base=base, exponent=exponent) for base, exponent in ordered)


def _partial_fractions(
    bases: Sequence[tuple[IntegerPolynomial, Fraction]],
) -> tuple[PartialFraction, ...]:
    """The bases split into irreducible factors, those of degree above 200 left whole."""
    terms = [
        PartialFraction(factor=from_flint(factor), residue=residue)
        for base, residue in bases
        for factor in (
            irreducible_factors(base) if base.degree() <= _FACTORED_DEGREE else [base]
        )
    ]
    return tuple(sorted(terms, key=lambda term: term.factor.sort_key))


def _minimal_polynomial(solution: Sequence[Power], degree: int) -> MinimalPolynomial:
    """Y^degree * product of the poles = product of the zeros, in lowest terms."""
    scaled = [(power.base, power.exponent * degree) for power in solution]
    return MinimalPolynomial(
        degree=degree,
        numerator=tuple(Power(base=v, exponent=n) for v, n in scaled if n > 0),
        denominator=tuple(Power(base=v, exponent=-n) for v, n in scaled if n < 0),
    )


def _find_squarefree_prime(v: IntegerPolynomial) -> int:
    """The smallest p not dividing lc(v) with v squarefree mod p.

    In high degree, where many small primes fail at a cost, the small ones tried
    are fewer, and the primes above 10^9 follow.
    """
    tried = islice(primes(), max(16, _SQUAREFREE_WORK // max(1, v.degree())))
    lead = int(v.leading_coefficient())
    for p in chain(tried, primes(_FIRST_LARGE_PRIME)):
        if lead % p and is_squarefree(reduce_polynomial(v, p)):
            return p
    raise DefectError("the primes have come to an end")
