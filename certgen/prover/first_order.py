"""The decision for y' = r*y over Q: algebraic with residues, or a smallest counter-prime.

Criterion: a non-zero solution is algebraic iff r = a/b (lowest terms) has no
polynomial part, only simple poles and only rational residues; and if it is, the
p-curvature vanishes at every good p (p divides neither lc(b) nor the discriminant
of the squarefree part of b).  So one good prime with p-curvature not 0 refutes.

The order of the search: a few small primes refute most transcendental equations
at once; then one word-sized prime decides between the two sides; then either the
groups of residues or the smallest counter-prime are computed to the end.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from itertools import islice

from certgen.claim import FirstOrderEquation
from certgen.errors import ClaimError
from certgen.exact.modular import reduce_polynomial, residues_modulo, squarefree_part
from certgen.exact.polynomials import IntegerPolynomial, to_flint
from certgen.exact.primes import primes
from certgen.prover.counter_prime import find_counter_prime
from certgen.prover.residue_groups import ResidueGroup, find_residue_groups

__all__ = ["AlgebraicDecision", "Decision", "TranscendentalDecision", "decide"]

_FIRST_PRIMES = 12
_FIRST_GOOD_PRIMES = 3


@dataclass(frozen=True, slots=True)
class AlgebraicDecision:
    """Every solution is algebraic: b = content * product of the bases, verified."""

    groups: tuple[ResidueGroup, ...]


@dataclass(frozen=True, slots=True)
class TranscendentalDecision:
    """No non-zero solution is algebraic; the smallest counter-prime."""

    counter_prime: int


Decision = AlgebraicDecision | TranscendentalDecision


def decide(
    equation: FirstOrderEquation, progress: Callable[[str], None] | None = None
) -> Decision:
    """Decide whether the solutions of y' = r*y are algebraic over C(x).

    Complete: one of the two answers comes for every equation in lowest terms.
    Raises ClaimError where a common factor of a and b is met.
    """
    a, b = to_flint(equation.numerator), to_flint(equation.denominator)
    if a == 0:
        return AlgebraicDecision(())
    p = _try_small_primes(a, b)
    if p is not None:
        return TranscendentalDecision(p)
    radical = squarefree_part(b)
    if radical.degree() < b.degree() and a.gcd(b).degree() > 0:
        raise ClaimError("the numerator and denominator of r have a common factor")
    if a.degree() < b.degree() == radical.degree():
        groups = find_residue_groups(a, b, progress)
        if groups is not None:
            return AlgebraicDecision(groups)
    return TranscendentalDecision(find_counter_prime(a, b, radical, progress))


def _try_small_primes(a: IntegerPolynomial, b: IntegerPolynomial) -> int | None:
    """Return the smallest counter-prime if a few small primes find it, else None.

    Needs no squarefree part: if b is squarefree modulo one p not dividing lc(b),
    it is so over Q, and the smaller primes where it is not are bad.
    """
    lead, good = int(b.leading_coefficient()), 0
    for p in islice(primes(), _FIRST_PRIMES):
        if lead % p == 0:
            continue
        num, den = reduce_polynomial(a, p), reduce_polynomial(b, p)
        s = residues_modulo(num, den, den.derivative())
        if s is None:
            continue
        if num.degree() >= den.degree() or s.pow_mod(p, den) != s:
            return p
        good += 1
        if good == _FIRST_GOOD_PRIMES:
            break
    return None
