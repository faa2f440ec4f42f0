"""The smallest counter-prime of y' = r*y and what is shown about it.

A prime p is good for r = a/b when p divides neither lc(b) nor the discriminant of
the squarefree part of b.  A counter-prime is a good prime at which the p-curvature
is not zero; it proves that no non-zero solution is algebraic.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from fractions import Fraction
from itertools import islice
from math import lcm

from certgen.certificate import (
    CounterPrime,
    DensityBound,
    DensityWitness,
    MultiplePoleModP,
    PCurvature,
    PolynomialPartModP,
    ResidueOutsidePrimeField,
)
from certgen.errors import DefectError
from certgen.exact.modular import (
    ModularPolynomial,
    is_squarefree,
    monic,
    p_curvature_numerator,
    p_curvature_vanishes,
    reduce_fraction,
    reduce_polynomial,
    residues_modulo,
)
from certgen.exact.polynomials import IntegerPolynomial, from_flint
from certgen.exact.primes import primes
from certgen.polynomial import Polynomial, write_polynomial

__all__ = [
    "build_counter_prime",
    "compute_density_bound",
    "compute_p_curvature",
    "find_counter_prime",
    "frobenius_order",
    "good_primes",
]

_P_CURVATURE_WORK = 20_000
_P_CURVATURE_TEXT = 700
_DENSITY_PRIMES = 40
_DENSITY_DEGREE = 60
_ORDER_LIMIT = 100


def good_primes(
    b: IntegerPolynomial,
    radical: IntegerPolynomial,
    start: int = 2,
    progress: Callable[[str], None] | None = None,
) -> Iterator[int]:
    """Yield the good primes from `start` on; `radical` is the squarefree part of b."""
    lead = int(b.leading_coefficient())
    for count, p in enumerate(primes(start), 1):
        if progress is not None and count % 500 == 0:
            progress(f"primes below {p} tried")
        if lead % p and is_squarefree(reduce_polynomial(radical, p)):
            yield p


def find_counter_prime(
    a: IntegerPolynomial,
    b: IntegerPolynomial,
    radical: IntegerPolynomial,
    progress: Callable[[str], None] | None = None,
) -> int:
    """Return the smallest counter-prime.

    Hypotheses: y' = (a/b)*y has no algebraic solution, a/b is in lowest terms.
    Then there are infinitely many (Kronecker), so the search ends.
    """
    for p in good_primes(b, radical, progress=progress):
        num, den, _ = reduce_fraction(a, b, p)
        if not p_curvature_vanishes(num, den, p):
            return p
    raise DefectError("the primes have come to an end")


# --------------------------------------------------------------------------
# the witness modulo p


def build_counter_prime(a: IntegerPolynomial, b: IntegerPolynomial, p: int) -> CounterPrime:
    """Return p with the witness that a/b mod p, reduced, has p-curvature not 0."""
    num, den, _ = reduce_fraction(a, b, p)
    if num.degree() >= den.degree():
        return CounterPrime(p=p, witness=PolynomialPartModP())
    repeated = den.gcd(den.derivative())
    if repeated.degree() > 0:
        factor = from_flint(_smallest_factor(repeated))
        return CounterPrime(p=p, witness=MultiplePoleModP(factor=factor))
    return CounterPrime(p=p, witness=_find_residue_witness(num, den, p))


def _smallest_factor(f: ModularPolynomial) -> ModularPolynomial:
    """The smallest monic irreducible factor, by degree, then coefficients from the top."""
    factors = [monic(factor) for factor, _ in f.factor()[1]]
    return min(factors, key=lambda g: (g.degree(), [int(c) for c in g.coeffs()[::-1]]))


def _find_residue_witness(
    num: ModularPolynomial, den: ModularPolynomial, p: int
) -> ResidueOutsidePrimeField:
    s = residues_modulo(num, den, den.derivative())
    factor = _smallest_factor(_irrational_part(s, den, p))
    return ResidueOutsidePrimeField(
        factor=from_flint(factor), residue=from_flint(s % factor)
    )


def _irrational_part(
    s: ModularPolynomial, den: ModularPolynomial, p: int
) -> ModularPolynomial:
    """The factor of den along which the residue s lies outside F_p."""
    return den // den.gcd(s.pow_mod(p, den) - s)


def compute_p_curvature(
    a: IntegerPolynomial, b: IntegerPolynomial, p: int
) -> PCurvature | None:
    """Return the p-curvature at p if it is short enough to be printed."""
    num, den, _ = reduce_fraction(a, b, p)
    if p * (max(num.degree(), den.degree()) + 1) > _P_CURVATURE_WORK:
        return None
    numerator = Polynomial.from_integers(p_curvature_numerator(num, den, p))
    if len(write_polynomial(numerator)) > _P_CURVATURE_TEXT:
        return None
    return PCurvature(numerator=numerator)


# --------------------------------------------------------------------------
# how many counter-primes


def compute_density_bound(
    a: IntegerPolynomial, b: IntegerPolynomial, counter_prime: int
) -> DensityBound:
    """Return the bound 1 - 1/M for a/b with simple poles and no polynomial part.

    M is the least common multiple of the orders of Frobenius on the residues at
    good primes; it divides the order of the Galois group of the residues
    (Chebotarev), which is at least 2.  Looks at the counter-prime, and in degree
    <= 60 at the good ones among the next 40 primes; keeps orders up to 100 that
    increase M.
    """
    witnesses, multiple = [], 1
    for p in _density_primes(b, counter_prime):
        order = frobenius_order(a, b, p)
        if order is not None and multiple % order:
            multiple = lcm(multiple, order)
            witnesses.append(DensityWitness(p=p, order=order))
    bound = max(1 - Fraction(1, multiple), Fraction(1, 2))
    return DensityBound(bound=bound, witnesses=tuple(witnesses))


def _density_primes(b: IntegerPolynomial, counter_prime: int) -> Iterator[int]:
    yield counter_prime
    if b.degree() <= _DENSITY_DEGREE:
        last = list(islice(primes(counter_prime + 1), _DENSITY_PRIMES))[-1]
        for p in good_primes(b, b, counter_prime + 1):
            if p > last:
                return
            yield p


def frobenius_order(a: IntegerPolynomial, b: IntegerPolynomial, p: int) -> int | None:
    """Return the least t >= 1 with s^(p^t) = s, s the residues of a/b mod the good p.

    None above 100: the checker repeats these powers.
    """
    num, den, _ = reduce_fraction(a, b, p)
    s = residues_modulo(num, den, den.derivative())
    if den.degree() == 0 or (rest := _irrational_part(s, den, p)).degree() == 0:
        return 1
    s = image = s % rest
    for order in range(1, _ORDER_LIMIT + 1):
        image = image.pow_mod(p, rest)
        if image == s:
            return order
    return None
