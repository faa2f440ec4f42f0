"""What the checker computed on the way to its answer: the numbers an appendix prints.

Everything here was recomputed from the stored claim and proof by the rules of
`certgen.checker.rules`; nothing is copied from the prover.  r = a/b is the
equation y' = r*y, beta the integer with b = beta * product of the stored factors.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from certgen.polynomial import Polynomial

__all__ = [
    "AlgebraicFacts",
    "ClosedFormFacts",
    "DisagreementFacts",
    "Facts",
    "IdentitySpot",
    "IrrationalResidueFacts",
    "NoAlgebraicFacts",
    "PrimeStatus",
    "ReductionFacts",
]


@dataclass(frozen=True, slots=True, kw_only=True)
class PrimeStatus:
    """One prime of the strip: bad reduction, p-curvature zero, or not zero."""

    p: int
    status: Literal["bad", "zero", "nonzero"]


@dataclass(frozen=True, slots=True, kw_only=True)
class IdentitySpot:
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


@dataclass(frozen=True, slots=True, kw_only=True)
class AlgebraicFacts:
    """`AlgebraicSolution`: the split identity b = beta*V, N*a = beta*sum n_i v_i' V/v_i.

    `numerators` are the n_i = N*rho_i; `derivatives` the v_i'; `products` the
    n_i*v_i'*V/v_i expanded, and `identity` both sides N*a of the second
    identity, or None where the degree of b is above 40 (`spot` is None above 200 or
    where b vanishes at all points tried).  `squarefree_degree` is deg V; `strip` the
    first primes, empty where the degree of b is above 60.
    """

    degree: int
    beta: int
    numerators: tuple[int, ...]
    derivatives: tuple[Polynomial, ...]
    products: tuple[Polynomial, ...] | None
    identity: Polynomial | None
    spot: IdentitySpot | None
    squarefree_degree: int
    strip: tuple[PrimeStatus, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class DisagreementFacts:
    """Orders of the claimed bases along the disagreeing factor (0 where it divides not)."""

    orders: tuple[int, ...]
    divides_denominator: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class ClosedFormFacts:
    """`ClosedFormDisagrees`: the actual solution, and why the claimed one is another."""

    actual: AlgebraicFacts
    disagreement: DisagreementFacts


@dataclass(frozen=True, slots=True, kw_only=True)
class IrrationalResidueFacts:
    """For one `IrrationalResidue` obstruction, in the order of the certificate.

    `numerator` and `derivative`: A and B in Z[x] of degree below deg g with
    A/B = a/b' at the roots of the factor g.  `discriminant` of a quadratic residue
    polynomial (not a square), else None.
    """

    numerator: Polynomial
    derivative: Polynomial
    discriminant: int | None


@dataclass(frozen=True, slots=True, kw_only=True)
class ReductionFacts:
    """The equation modulo the counter-prime p; coefficients from 0 to p - 1.

    a = common_factor*numerator and b = common_factor*denominator mod p, with a
    monic common factor.  `derivative` is denominator' mod p.  For a residue
    witness: `residue_power` is residue^p mod its factor (it differs from the
    residue), `factor_is_irreducible` whether the factor is irreducible mod p (None
    where its degree is above 40: not tested).
    """

    numerator: Polynomial
    denominator: Polynomial
    common_factor: Polynomial
    derivative: Polynomial
    residue_power: Polynomial | None
    factor_is_irreducible: bool | None


@dataclass(frozen=True, slots=True, kw_only=True)
class NoAlgebraicFacts:
    """`NoAlgebraicSolution`: what was recomputed for the refutation.

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


Facts = AlgebraicFacts | ClosedFormFacts | NoAlgebraicFacts
