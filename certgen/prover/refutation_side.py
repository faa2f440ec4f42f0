"""The proof object of the other side: obstructions over Q and the counter-prime."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from fractions import Fraction

from flint import fmpq_mat, fmpq_poly, fmpz_poly

from certgen.certificate import (
    DensityBound,
    IrrationalResidue,
    MultiplePole,
    NoAlgebraicSolution,
    Obstruction,
    PolynomialPart,
    SquarefreeFactor,
)
from certgen.errors import ClaimError, DefectError
from certgen.exact.modular import has_root, reduce_polynomial, squarefree_part
from certgen.exact.polynomials import (
    IntegerPolynomial,
    from_flint,
    from_flint_rational,
    irreducible_factors,
    primitive_part,
    square_free_parts,
)
from certgen.exact.primes import primes
from certgen.polynomial import write_polynomial
from certgen.prover.counter_prime import (
    build_counter_prime,
    compute_density_bound,
    compute_p_curvature,
)

__all__ = ["build_no_algebraic_solution"]

_FACTORED_DEGREE = 100
_COPRIME_PRIMES = 8
_RESIDUE_DEGREE = 12
_RESIDUE_TEXT = 2_000

_Parts = Sequence[tuple[IntegerPolynomial, int]]


def build_no_algebraic_solution(
    a: IntegerPolynomial, b: IntegerPolynomial, counter_prime: int
) -> NoAlgebraicSolution:
    """Return the refutation of y' = (a/b)*y with its smallest counter-prime."""
    lowest_terms_prime = _find_lowest_terms_prime(a, b)
    parts = sorted(_decompose(b), key=lambda part: from_flint(part[0]).sort_key)
    return NoAlgebraicSolution(
        squarefree_decomposition=tuple(
            SquarefreeFactor(factor=from_flint(v), multiplicity=m) for v, m in parts
        ),
        lowest_terms_prime=lowest_terms_prime,
        obstructions=tuple(_find_obstructions(a, b, parts)),
        counter_prime=build_counter_prime(a, b, counter_prime),
        p_curvature=compute_p_curvature(a, b, counter_prime),
        density=_compute_density(a, b, parts, counter_prime),
    )


def _decompose(b: IntegerPolynomial) -> list[tuple[IntegerPolynomial, int]]:
    """The squarefree parts of b; one large prime tells in most cases that b is one."""
    if b.degree() > 0 and squarefree_part(b).degree() == b.degree():
        return [(primitive_part(b), 1)]
    return square_free_parts(b)


def _find_lowest_terms_prime(a: IntegerPolynomial, b: IntegerPolynomial) -> int:
    """The smallest p not dividing lc(b) with gcd(a, b) = 1 mod p."""
    for count, p in enumerate(primes()):
        if count == _COPRIME_PRIMES and a.gcd(b).degree() > 0:
            raise ClaimError("the numerator and denominator of r have a common factor")
        if int(b.leading_coefficient()) % p:
            common = reduce_polynomial(b, p).gcd(reduce_polynomial(a, p))
            if common.degree() == 0:
                return p
    raise DefectError("the primes have come to an end")


def _compute_density(
    a: IntegerPolynomial, b: IntegerPolynomial, parts: _Parts, counter_prime: int
) -> DensityBound:
    if a.degree() >= b.degree() or any(m > 1 for _, m in parts):
        return DensityBound(bound=Fraction(1), witnesses=())
    return compute_density_bound(a, b, counter_prime)


# --------------------------------------------------------------------------
# obstructions over Q


def _find_obstructions(
    a: IntegerPolynomial, b: IntegerPolynomial, parts: _Parts
) -> Iterator[Obstruction]:
    if a.degree() >= b.degree():
        quotient = fmpq_poly(a) // fmpq_poly(b)
        yield PolynomialPart(quotient=from_flint_rational(quotient))
    for factor, multiplicity in parts:
        if multiplicity >= 2:
            yield MultiplePole(factor=from_flint(factor), order=multiplicity)
    if b.degree() <= _FACTORED_DEGREE:
        simple = [v for v, multiplicity in parts if multiplicity == 1]
        factors = [g for v in simple for g in irreducible_factors(v)]
        for g in sorted(factors, key=lambda g: from_flint(g).sort_key):
            yield from _irrational_residue(a, b, g)


def _irrational_residue(
    a: IntegerPolynomial, b: IntegerPolynomial, g: IntegerPolynomial
) -> Iterator[IrrationalResidue]:
    """At most one: only small factors whose residue polynomial is short are shown."""
    if g.degree() > _RESIDUE_DEGREE:
        return
    residue_polynomial = compute_residue_polynomial(a, b, g)
    if residue_polynomial.degree() == 1:
        return
    neutral = from_flint(residue_polynomial)
    if len(write_polynomial(neutral)) <= _RESIDUE_TEXT:
        yield IrrationalResidue(
            factor=from_flint(g),
            residue_polynomial=neutral,
            rootless_prime=_find_rootless_prime(residue_polynomial),
        )


def compute_residue_polynomial(
    a: IntegerPolynomial, b: IntegerPolynomial, g: IntegerPolynomial
) -> IntegerPolynomial:
    """Return the base in Z[z] irreducible over Q whose roots are the residues at g's.

    g is irreducible and divides b exactly once: the minimal polynomial of
    a/b' in Q[x]/(g), from the matrix of the multiplication by it.
    """
    modulus, variable = fmpq_poly(g), fmpq_poly([0, 1])
    _, inverse, _ = (fmpq_poly(b.derivative()) % modulus).xgcd(modulus)
    s = fmpq_poly(a) % modulus * inverse % modulus
    rows = []
    for _ in range(g.degree()):
        rows.append([s[k] for k in range(g.degree())])
        s = s * variable % modulus
    minimal = fmpq_mat(rows).minpoly()
    return primitive_part(fmpz_poly(minimal.numer()))


def _find_rootless_prime(f: IntegerPolynomial) -> int:
    """The smallest q, not dividing lc(f), modulo which f has no root.

    Exists for every irreducible f of degree at least 2 (Jordan 1872).
    """
    for q in primes():
        if int(f.leading_coefficient()) % q and not has_root(f, q):
            return q
    raise DefectError("the primes have come to an end")
