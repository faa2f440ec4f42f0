"""What the checker computed on the way to its answer: the numbers an appendix prints.

Everything here was recomputed from the stored claim and proof, over the arithmetic of
the rules; nothing is copied from the prover.  r = a/b is the
equation y' = r*y, beta the integer with b = beta * product of the stored factors.
"""

from __future__ import annotations

from fractions import Fraction
from typing import Literal, NamedTuple

from certgen.polynomial import Polynomial

__all__ = [
    "AlgebraicFacts",
    "Bezout",
    "ClosedFormFacts",
    "DisagreementFacts",
    "Facts",
    "IdentitySpot",
    "IrrationalResidueFacts",
    "NoAlgebraicFacts",
    "PrimeStatus",
    "ProductSpot",
    "ReductionFacts",
    "RootValues",
]


class PrimeStatus(NamedTuple):
    """One prime of the strip: bad reduction, p-curvature zero, or not zero."""

    p: int
    status: Literal["bad", "zero", "nonzero"]


class IdentitySpot(NamedTuple):
    """All terms of the two identities at the integer `point`, where b is not zero.

    b(point) = beta * product of `bases`, and
    N*a(point) = beta * sum_i n_i * derivatives[i] * product of the other bases
    = beta * sum of `terms`; `terms` carry the factor n_i.
    """

    point: int
    a: int
    b: int
    bases: tuple[int, ...]
    derivatives: tuple[int, ...]
    terms: tuple[int, ...]


class Bezout(NamedTuple):
    """left*f + right*g = 1 modulo the prime p; coefficients from 0 to p - 1."""

    p: int
    left: Polynomial
    right: Polynomial


class RootValues(NamedTuple):
    """The values of a and b' at the rational root of a linear factor."""

    root: Fraction
    a: Fraction
    derivative: Fraction


class AlgebraicFacts(NamedTuple):
    """`AlgebraicSolution`: the split identity b = beta*V, N*a = beta*sum n_i v_i' V/v_i.

    `numerators` are the n_i = N*rho_i; `derivatives` the v_i'; `products` the
    n_i*v_i'*V/v_i expanded, and `identity` both sides N*a of the second
    identity, or None where the degree of b is above 40 (`spot` is None above 200 or
    where b vanishes at all points tried).  `squarefree_degree` is deg V; `bezout` is
    for V and V' modulo the squarefree prime, None where V is constant or of degree
    above 12.  `b_derivative` is b' and `root_values` has one entry for each displayed
    factor, None for those that are not linear; both are None and empty above degree
    40.  `strip` has the first primes, empty where the degree of b is above 60.
    """

    degree: int
    beta: int
    numerators: tuple[int, ...]
    derivatives: tuple[Polynomial, ...]
    products: tuple[Polynomial, ...] | None
    identity: Polynomial | None
    spot: IdentitySpot | None
    squarefree_degree: int
    bezout: Bezout | None
    b_derivative: Polynomial | None
    root_values: tuple[RootValues | None, ...]
    strip: tuple[PrimeStatus, ...]


class DisagreementFacts(NamedTuple):
    """Orders of the claimed bases along the disagreeing factor (0 where it divides not)."""

    orders: tuple[int, ...]
    divides_denominator: bool


class ClosedFormFacts(NamedTuple):
    """`ClosedFormDisagrees`: the actual solution, and why the claimed one is another."""

    actual: AlgebraicFacts
    disagreement: DisagreementFacts


class ProductSpot(NamedTuple):
    """Values at the integer `point`: `total` = `factor` * `cofactor`.

    `numerator` and `derivative` are A and B there, so that the total can be
    computed from them and the residue polynomial.
    """

    point: int
    numerator: int
    derivative: int
    total: int
    factor: int
    cofactor: int


class IrrationalResidueFacts(NamedTuple):
    """For one `IrrationalResidue` obstruction, in the order of the certificate.

    `numerator` and `derivative`: A and B in Z[x] of degree below deg g with
    A/B = a/b' at the roots of the factor g.  `discriminant` of a quadratic residue
    polynomial (not a square), else None.  With R the residue polynomial, of degree n,
    sum R_k A^k B^(n-k) = g*`cofactor`; `spot` has this identity at one integer.
    """

    numerator: Polynomial
    derivative: Polynomial
    discriminant: int | None
    cofactor: Polynomial
    spot: ProductSpot


class ReductionFacts(NamedTuple):
    """The equation modulo the counter-prime p; coefficients from 0 to p - 1.

    a = common_factor*numerator and b = common_factor*denominator mod p, with a
    monic common factor.  `derivative` is denominator' mod p.  For a residue
    witness: `residue_power` is residue^p mod its factor (it differs from the
    residue), `factor_is_irreducible` whether the factor is irreducible mod p (None
    where its degree is above 40: not tested).  `bezout` is for the squarefree part
    of b and its derivative modulo p, None where it is constant or of degree above 12.
    """

    numerator: Polynomial
    denominator: Polynomial
    common_factor: Polynomial
    derivative: Polynomial
    residue_power: Polynomial | None
    factor_is_irreducible: bool | None
    bezout: Bezout | None


class NoAlgebraicFacts(NamedTuple):
    """`NoAlgebraicSolution`: what was recomputed for the refutation.

    `lowest_terms` is for b and a, in this order, modulo the lowest-terms prime, None
    where b is constant or a degree above 12.

    `smaller_primes` has the status (bad or zero) of every prime below the
    counter-prime; `strip` the first primes through at least the counter-prime or
    the first twelve.  `remainder` goes with a `PolynomialPart` obstruction.
    """

    beta: int
    remainder: Polynomial | None
    irrational: tuple[IrrationalResidueFacts, ...]
    reduction: ReductionFacts
    smaller_primes: tuple[PrimeStatus, ...]
    strip: tuple[PrimeStatus, ...]
    density: Fraction
    lowest_terms: Bezout | None


Facts = AlgebraicFacts | ClosedFormFacts | NoAlgebraicFacts
