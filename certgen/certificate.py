"""What is stored: a claim, a verdict and one proof object.

Data only, no algorithms: the mathematics of a proof object is recomputed by
`certgen.checker`, found by `certgen.prover`.  The constructors enforce the shape
that the format demands (non-vacuity, lowest terms, stated order); they raise
InvariantError.  In all docstrings r = a/b is the claim's equation y' = r*y.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from fractions import Fraction
from typing import ClassVar, Literal

from certgen.claim import FirstOrderClaim, Power
from certgen.errors import InvariantError
from certgen.polynomial import Polynomial

__all__ = [
    "AlgebraicSolution",
    "Certificate",
    "ClosedFormDisagrees",
    "CounterPrime",
    "DensityBound",
    "DensityWitness",
    "Disagreement",
    "Eisenstein",
    "IrrationalResidue",
    "MinimalPolynomial",
    "MultiplePole",
    "MultiplePoleModP",
    "NoAlgebraicSolution",
    "Obstruction",
    "PCurvature",
    "PartialFraction",
    "PolynomialPart",
    "PolynomialPartModP",
    "Proof",
    "ResidueOutsidePrimeField",
    "SquarefreeFactor",
    "Verdict",
]

Verdict = Literal["proved", "refuted", "undecided"]


def _require(condition: bool, expected: str, code: str = "not-canonical") -> None:
    if not condition:
        raise InvariantError(code, expected)


def _require_content(condition: bool, expected: str) -> None:
    _require(condition, expected, "vacuous")


def _require_base(polynomial: Polynomial, name: str) -> None:
    _require_content(not polynomial.is_constant, f"a non-constant {name}")
    _require(
        polynomial.is_primitive,
        f"a {name} that is primitive in Z[x] with positive leading coefficient",
    )


def _require_sorted(items: Iterable[Polynomial], name: str) -> None:
    keys = [item.sort_key for item in items]
    _require(keys == sorted(set(keys)), f"{name} that are sorted and distinct")


def _require_reduced(polynomial: Polynomial, p: int, name: str) -> None:
    _require(
        polynomial.is_integral and all(0 <= c < p for c in polynomial.numerators),
        f"a {name} with coefficients from 0 to p - 1",
    )


# --------------------------------------------------------------------------
# the algebraic side


@dataclass(frozen=True, slots=True, kw_only=True)
class PartialFraction:
    """The term residue * factor'/factor of r, one for each displayed factor."""

    factor: Polynomial
    residue: Fraction

    def __post_init__(self) -> None:
        _require_base(self.factor, "factor")
        _require_content(self.residue != 0, "a non-zero residue")


@dataclass(frozen=True, slots=True, kw_only=True)
class MinimalPolynomial:
    """Y^degree = numerator/denominator (up to a constant c != 0), kept factored.

    The bases are those of the solution, the exponents positive integers.
    """

    degree: int
    numerator: tuple[Power, ...]
    denominator: tuple[Power, ...]

    def __post_init__(self) -> None:
        _require_content(self.degree >= 1, "a degree of at least 1")
        for side in (self.numerator, self.denominator):
            _require_sorted((power.base for power in side), "bases")
            for power in side:
                _require(
                    power.exponent > 0 and power.exponent.denominator == 1,
                    "positive integers as exponents of the minimal polynomial",
                )


@dataclass(frozen=True, slots=True, kw_only=True)
class Eisenstein:
    """`constant` is an Eisenstein constant of the solution with value 1 at `point`."""

    point: int
    constant: int

    def __post_init__(self) -> None:
        _require_content(self.constant >= 1, "a positive Eisenstein constant")


@dataclass(frozen=True, slots=True, kw_only=True)
class AlgebraicSolution:
    """y = product of base^exponent solves the equation and has exactly this degree.

    One base for each residue of r (`solution`), the displayed factors of the
    bases with their residues (`partial_fractions`), the degree with a prime
    modulo which the product of the bases stays squarefree, and an Eisenstein
    constant where it is small enough to be stated.
    """

    KIND: ClassVar[str] = "algebraic-solution"

    solution: tuple[Power, ...]
    partial_fractions: tuple[PartialFraction, ...]
    degree: int
    minimal_polynomial: MinimalPolynomial
    squarefree_prime: int
    eisenstein: Eisenstein | None

    def __post_init__(self) -> None:
        _require_sorted((power.base for power in self.solution), "bases")
        _require_sorted((term.factor for term in self.partial_fractions), "factors")
        exponents = [power.exponent for power in self.solution]
        _require(len(exponents) == len(set(exponents)), "one base for each exponent")
        _require_content(self.degree >= 1, "a degree of at least 1")


@dataclass(frozen=True, slots=True, kw_only=True)
class Disagreement:
    """At the roots of `factor` r and the claimed closed form have other residues.

    `prime` shows that the closed form's bases have constant order along `factor`.
    """

    factor: Polynomial
    residue_of_equation: Fraction
    residue_of_closed_form: Fraction
    prime: int

    def __post_init__(self) -> None:
        _require_base(self.factor, "factor")
        _require_content(
            self.residue_of_equation != self.residue_of_closed_form,
            "two different residues",
        )


@dataclass(frozen=True, slots=True, kw_only=True)
class ClosedFormDisagrees:
    """All solutions are algebraic, but not constant multiples of the claimed product."""

    KIND: ClassVar[str] = "closed-form-disagrees"

    actual: AlgebraicSolution
    disagreement: Disagreement


# --------------------------------------------------------------------------
# the other side: obstructions over Q


@dataclass(frozen=True, slots=True, kw_only=True)
class PolynomialPart:
    """a = quotient*b + remainder, deg remainder < deg b, with a non-zero quotient."""

    KIND: ClassVar[str] = "polynomial_part"

    quotient: Polynomial

    def __post_init__(self) -> None:
        _require_content(not self.quotient.is_zero, "a non-zero polynomial part")


@dataclass(frozen=True, slots=True, kw_only=True)
class MultiplePole:
    """r has poles of exactly this order (at least 2) at the roots of `factor`."""

    KIND: ClassVar[str] = "multiple_pole"

    factor: Polynomial
    order: int

    def __post_init__(self) -> None:
        _require_base(self.factor, "factor")
        _require_content(self.order >= 2, "an order of at least 2")


@dataclass(frozen=True, slots=True, kw_only=True)
class IrrationalResidue:
    """The residues at the roots of `factor`, simple poles, are irrational.

    They are roots of `residue_polynomial` (written in x), which has no root
    modulo `rootless_prime`, a prime not dividing its leading coefficient.
    """

    KIND: ClassVar[str] = "irrational_residue"

    factor: Polynomial
    residue_polynomial: Polynomial
    rootless_prime: int

    def __post_init__(self) -> None:
        _require_base(self.factor, "factor")
        _require_base(self.residue_polynomial, "residue polynomial")


Obstruction = PolynomialPart | MultiplePole | IrrationalResidue


# --------------------------------------------------------------------------
# the counter-prime


@dataclass(frozen=True, slots=True, kw_only=True)
class PolynomialPartModP:
    """r mod p, reduced, has a polynomial part: seen from the degrees."""

    KIND: ClassVar[str] = "polynomial_part"


@dataclass(frozen=True, slots=True, kw_only=True)
class MultiplePoleModP:
    """factor^2 divides the reduced denominator mod p; `factor` is monic."""

    KIND: ClassVar[str] = "multiple_pole"

    factor: Polynomial


@dataclass(frozen=True, slots=True, kw_only=True)
class ResidueOutsidePrimeField:
    """At the roots of `factor` (monic, mod p) the residue is `residue`, not in F_p."""

    KIND: ClassVar[str] = "residue_outside_prime_field"

    factor: Polynomial
    residue: Polynomial


@dataclass(frozen=True, slots=True, kw_only=True)
class CounterPrime:
    """p is the smallest prime of good reduction at which the p-curvature is not 0."""

    p: int
    witness: PolynomialPartModP | MultiplePoleModP | ResidueOutsidePrimeField

    def __post_init__(self) -> None:
        _require(self.p >= 2, "a prime")
        if isinstance(self.witness, PolynomialPartModP):
            return
        factor = self.witness.factor
        _require_reduced(factor, self.p, "factor")
        _require_content(factor.degree >= 1, "a non-constant factor")
        _require(factor.numerators[-1] == 1, "a monic factor")
        if isinstance(self.witness, ResidueOutsidePrimeField):
            residue = self.witness.residue
            _require_reduced(residue, self.p, "residue")
            _require_content(residue.degree > 0, "a non-constant residue")
            _require(residue.degree < factor.degree, "a residue of lower degree")


@dataclass(frozen=True, slots=True, kw_only=True)
class PCurvature:
    """The p-curvature at the counter-prime is numerator(x^p) / b(x)^p mod p.

    b is the reduced denominator mod p, cancelled by a monic factor, so that its
    leading coefficient is that of the equation; coefficients from 0 to p - 1.
    """

    numerator: Polynomial

    def __post_init__(self) -> None:
        _require_content(not self.numerator.is_zero, "a p-curvature that is not zero")
        _require(self.numerator.is_integral, "coefficients from 0 to p - 1")


# --------------------------------------------------------------------------
# how many counter-primes


@dataclass(frozen=True, slots=True, kw_only=True)
class DensityWitness:
    """Frobenius acts with this order on the residues of r modulo the good prime p."""

    p: int
    order: int

    def __post_init__(self) -> None:
        _require(self.p >= 2, "a prime")
        _require_content(self.order >= 2, "an order of at least 2")


@dataclass(frozen=True, slots=True, kw_only=True)
class DensityBound:
    """The counter-primes have density at least `bound`.

    Without witnesses `bound` is 1 (polynomial part or multiple pole: all good
    primes but finitely many) or 1/2 (simple poles with an irrational residue).
    Otherwise 1 - 1/M, M the least common multiple of the orders of the witnesses.
    """

    bound: Fraction
    witnesses: tuple[DensityWitness, ...]

    def __post_init__(self) -> None:
        _require_content(0 < self.bound <= 1, "a density above 0 and at most 1")
        primes = [witness.p for witness in self.witnesses]
        _require(primes == sorted(set(primes)), "ascending, distinct primes")


@dataclass(frozen=True, slots=True, kw_only=True)
class SquarefreeFactor:
    """A factor of b with its exact multiplicity."""

    factor: Polynomial
    multiplicity: int

    def __post_init__(self) -> None:
        _require_base(self.factor, "factor")
        _require_content(self.multiplicity >= 1, "a multiplicity of at least 1")


@dataclass(frozen=True, slots=True, kw_only=True)
class NoAlgebraicSolution:
    """No non-zero solution is algebraic: the counter-prime, and why over Q.

    `squarefree_decomposition`: b = constant * product factor^multiplicity, the
    product of the factors squarefree.  `lowest_terms_prime`: a prime, not
    dividing lc(b), modulo which a and b have no common factor.  `obstructions`
    lists the polynomial part if there is one, every multiple pole, and those
    irrational residues whose residue polynomial is small enough to be printed.
    """

    KIND: ClassVar[str] = "no-algebraic-solution"

    squarefree_decomposition: tuple[SquarefreeFactor, ...]
    lowest_terms_prime: int
    obstructions: tuple[Obstruction, ...]
    counter_prime: CounterPrime
    p_curvature: PCurvature | None
    density: DensityBound

    def __post_init__(self) -> None:
        _require_sorted((f.factor for f in self.squarefree_decomposition), "factors")
        order = (PolynomialPart, MultiplePole, IrrationalResidue)
        ranks = [order.index(type(item)) for item in self.obstructions]
        _require(
            ranks == sorted(ranks),
            "polynomial part, multiple poles and irrational residues in this order",
        )
        _require(ranks.count(0) <= 1, "at most one polynomial part")
        for kind in (MultiplePole, IrrationalResidue):
            _require_sorted(
                (o.factor for o in self.obstructions if isinstance(o, kind)),
                "factors of the obstructions",
            )


# --------------------------------------------------------------------------

Proof = AlgebraicSolution | ClosedFormDisagrees | NoAlgebraicSolution


@dataclass(frozen=True, slots=True, kw_only=True)
class Certificate:
    """A claim, the verdict about it as stated, and the proof of that verdict."""

    claim: FirstOrderClaim
    verdict: Verdict
    proof: Proof
