"""The context of a `NoAlgebraicSolution`."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import isqrt, lcm

from certgen.appendix.common import Head, build_head, printer_of
from certgen.appendix.formulas import FACTORS_LIMIT, Printer, join_numbers, signed_factor
from certgen.appendix.strip import StripItem, build_strip
from certgen.certificate import (
    IrrationalResidue,
    MultiplePole,
    NoAlgebraicSolution,
    PolynomialPart,
    PolynomialPartModP,
    ResidueOutsidePrimeField,
)
from certgen.checker import CheckedCertificate
from certgen.checker.facts import IrrationalResidueFacts, NoAlgebraicFacts, PrimeStatus
from certgen.errors import DefectError
from certgen.notation.latex_writer import Latex, integer, rational
from certgen.polynomial import Polynomial, write_polynomial

__all__ = ["CounterPrimePart", "Density", "ObstructionShown", "Refutation", "build_refutation"]

HAND_PRIME = 31
HAND_DEGREE = 3
HAND_DIVISION = 8
HAND_DIGITS = 12


@dataclass(frozen=True, slots=True, kw_only=True)
class PolynomialPartShown:
    """a = quotient*b + remainder; `cost` orders the obstructions by their length."""

    kind: str = PolynomialPart.KIND
    cost: int
    by_hand: bool
    quotient: Latex
    remainder: Latex


@dataclass(frozen=True, slots=True, kw_only=True)
class MultiplePoleShown:
    """A factor with the order of the poles at its roots."""

    kind: str = MultiplePole.KIND
    cost: int
    factor: Latex
    order: Latex
    one_root: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class IrrationalResidueShown:
    """The residues numerator/derivative and the polynomial R that they satisfy.

    `quadratic` says that R is shown to have no rational root by its discriminant,
    between two squares or negative; otherwise by a prime.
    """

    kind: str = IrrationalResidue.KIND
    cost: int
    by_hand: bool
    factor: Latex
    numerator: Latex
    derivative: Latex
    residue_polynomial: Latex
    quadratic: bool
    negative: bool
    discriminant: Latex
    discriminant_sum: Latex
    root_below: Latex
    root_above: Latex
    rootless_prime: Latex
    rootless_by_hand: bool


ObstructionShown = PolynomialPartShown | MultiplePoleShown | IrrationalResidueShown


@dataclass(frozen=True, slots=True, kw_only=True)
class PowerOfFactor:
    """factor^multiplicity in b."""

    factor: Latex
    multiplicity: Latex
    simple: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class CounterPrimePart:
    """The counter-prime with its witness; `kind` names the witness."""

    p: Latex
    kind: str
    goodness: str
    numerator: Latex
    denominator: Latex
    cancelled: bool
    common_factor: Latex
    derivative: Latex
    numerator_degree: Latex
    denominator_degree: Latex
    factor: Latex | None
    residue: Latex | None
    residue_power: Latex | None
    by_hand: bool
    irreducible: bool
    irreducible_by_hand: bool
    last_residue_class: Latex
    p_curvature: Latex | None
    none_smaller: bool
    bad: Latex
    bad_count: int
    zero: Latex
    zero_count: int


@dataclass(frozen=True, slots=True, kw_only=True)
class Density:
    """How many counter-primes there are."""

    almost_all: bool
    bound: Latex
    witnesses: tuple[tuple[Latex, Latex], ...]
    one_witness: bool
    multiple: Latex


@dataclass(frozen=True, slots=True, kw_only=True)
class Refutation:
    """Everything that a refutation prints."""

    beta: Latex
    beta_is_one: bool
    constant_denominator: bool
    squarefree: bool
    decomposition: tuple[PowerOfFactor, ...]
    factor_count: Latex
    constant_numerator: bool
    lowest_terms_prime: Latex
    obstructions: tuple[ObstructionShown, ...]
    counter_prime: CounterPrimePart
    density: Density
    strip: tuple[StripItem, ...]


def build_refutation(checked: CheckedCertificate) -> tuple[Head, Refutation]:
    """Return the contexts of a certificate whose proof is a NoAlgebraicSolution."""
    claim, proof, facts = checked.certificate.claim, checked.certificate.proof, checked.facts
    if not (isinstance(proof, NoAlgebraicSolution) and isinstance(facts, NoAlgebraicFacts)):
        raise DefectError("the facts do not belong to the proof")
    printer, head = printer_of(checked), build_head(checked)
    parts = _obstructions(printer, head.sym.z, proof, facts)
    return head, Refutation(
        beta=signed_factor(facts.beta),
        beta_is_one=facts.beta == 1,
        constant_denominator=claim.equation.denominator.is_constant,
        squarefree=all(f.multiplicity == 1 for f in proof.squarefree_decomposition),
        decomposition=_decomposition(printer, proof),
        factor_count=integer(len(proof.squarefree_decomposition)),
        constant_numerator=claim.equation.numerator.is_constant,
        lowest_terms_prime=integer(proof.lowest_terms_prime),
        obstructions=parts,
        counter_prime=_counter_prime(printer, proof, facts),
        density=_density(proof, facts),
        strip=build_strip(facts.strip),
    )


def _decomposition(printer: Printer, proof: NoAlgebraicSolution) -> tuple[PowerOfFactor, ...]:
    entries = proof.squarefree_decomposition
    if len(entries) > FACTORS_LIMIT:
        return ()
    return tuple(
        PowerOfFactor(
            factor=printer.polynomial(f"squarefree-factor-{k}", entry.factor),
            multiplicity=integer(entry.multiplicity),
            simple=entry.multiplicity == 1,
        )
        for k, entry in enumerate(entries, 1)
    )


# --------------------------------------------------------------------------
# over Q


def _size(*values: Polynomial) -> int:
    return sum(len(write_polynomial(value)) for value in values)


def _obstructions(
    printer: Printer, z: str, proof: NoAlgebraicSolution, facts: NoAlgebraicFacts
) -> tuple[ObstructionShown, ...]:
    """The obstructions, the one that is shortest to print first."""
    irrational = iter(facts.irrational)
    parts: list[ObstructionShown] = []
    for k, item in enumerate(proof.obstructions, 1):
        if isinstance(item, PolynomialPart):
            parts.append(_polynomial_part(printer, item, facts))
        elif isinstance(item, MultiplePole):
            parts.append(_multiple_pole(printer, k, item))
        else:
            parts.append(_irrational(printer, z, k, item, next(irrational)))
    return tuple(sorted(parts, key=lambda part: part.cost))


def _polynomial_part(
    printer: Printer, item: PolynomialPart, facts: NoAlgebraicFacts
) -> PolynomialPartShown:
    remainder = facts.remainder
    if remainder is None:
        raise DefectError("the remainder of the polynomial part is missing")
    return PolynomialPartShown(
        # seen from the degrees; the data count only when they are long
        cost=max(0, _size(item.quotient, remainder) - 200),
        by_hand=item.quotient.degree <= HAND_DEGREE and remainder.degree <= HAND_DIVISION,
        quotient=printer.polynomial("quotient", item.quotient),
        remainder=printer.polynomial("remainder", remainder),
    )


def _multiple_pole(printer: Printer, k: int, item: MultiplePole) -> MultiplePoleShown:
    return MultiplePoleShown(
        cost=_size(item.factor),
        factor=printer.polynomial(f"multiple-pole-{k}", item.factor),
        order=integer(item.order),
        one_root=item.factor.degree == 1,
    )


def _irrational(
    printer: Printer, z: str, k: int, item: IrrationalResidue, facts: IrrationalResidueFacts
) -> IrrationalResidueShown:
    residue_polynomial, disc = item.residue_polynomial, facts.discriminant
    root = isqrt(disc) if disc is not None and disc > 0 else 0
    short = all(abs(c) < 10**HAND_DIGITS for c in residue_polynomial.numerators)
    return IrrationalResidueShown(
        # a quadratic needs one line more than a multiple pole, others a prime
        cost=_size(item.factor, residue_polynomial) + (0 if disc is not None else 200),
        by_hand=short and item.factor.degree == 2 and residue_polynomial.degree == 2,
        factor=printer.polynomial(f"residue-factor-{k}", item.factor),
        numerator=printer.polynomial(f"residue-numerator-{k}", facts.numerator),
        derivative=printer.polynomial(f"residue-derivative-{k}", facts.derivative),
        residue_polynomial=printer.polynomial(
            f"residue-polynomial-{k}", residue_polynomial, z
        ),
        quadratic=disc is not None,
        negative=disc is not None and disc < 0,
        discriminant=integer(disc or 0),
        discriminant_sum=_discriminant_sum(residue_polynomial),
        root_below=integer(root),
        root_above=integer(root + 1),
        rootless_prime=integer(item.rootless_prime),
        rootless_by_hand=item.rootless_prime <= HAND_PRIME
        and residue_polynomial.degree <= HAND_DEGREE,
    )


def _discriminant_sum(quadratic: Polynomial) -> Latex:
    """B^2 - 4AC with the coefficients put in, unevaluated."""
    if quadratic.degree != 2:
        return Latex("")
    low, middle, top = quadratic.numerators
    middle_text = integer(middle) if middle >= 0 else f"({integer(middle)})"
    return Latex(
        rf"{middle_text}^2\certgenbreak -4\cdot {signed_factor(top)}"
        rf"\certgenbreak\cdot {signed_factor(low)}"
    )


# --------------------------------------------------------------------------
# modulo p


def _counter_prime(
    printer: Printer, proof: NoAlgebraicSolution, facts: NoAlgebraicFacts
) -> CounterPrimePart:
    value, reduced = proof.counter_prime, facts.reduction
    witness, p = value.witness, value.p
    outside = isinstance(witness, ResidueOutsidePrimeField)
    factor = None if isinstance(witness, PolynomialPartModP) else witness.factor
    small = p <= HAND_PRIME and reduced.denominator.degree <= HAND_DIVISION
    bad, zero = _by_status(facts.smaller_primes)
    return CounterPrimePart(
        p=integer(p),
        kind=witness.KIND,
        goodness=_goodness(proof, p),
        numerator=printer.polynomial("reduced-numerator", reduced.numerator),
        denominator=printer.polynomial("reduced-denominator", reduced.denominator),
        cancelled=reduced.common_factor.degree > 0,
        common_factor=printer.polynomial("common-factor", reduced.common_factor),
        derivative=printer.polynomial("reduced-derivative", reduced.derivative),
        numerator_degree=integer(reduced.numerator.degree),
        denominator_degree=integer(reduced.denominator.degree),
        factor=printer.polynomial("witness-factor", factor) if factor else None,
        residue=printer.polynomial("witness-residue", witness.residue)
        if isinstance(witness, ResidueOutsidePrimeField) else None,
        residue_power=printer.polynomial("witness-residue-power", reduced.residue_power)
        if reduced.residue_power is not None else None,
        by_hand=small and (factor is None or factor.degree <= HAND_DEGREE),
        irreducible=outside and bool(reduced.factor_is_irreducible),
        irreducible_by_hand=factor is not None and factor.degree <= HAND_DEGREE
        and p <= HAND_PRIME,
        last_residue_class=integer(p - 1),
        p_curvature=_p_curvature(printer, proof),
        none_smaller=not facts.smaller_primes,
        bad=join_numbers(bad),
        bad_count=len(bad),
        zero=join_numbers(zero),
        zero_count=len(zero),
    )


def _p_curvature(printer: Printer, proof: NoAlgebraicSolution) -> Latex | None:
    if proof.p_curvature is None:
        return None
    return printer.polynomial("p-curvature", proof.p_curvature.numerator)


def _goodness(proof: NoAlgebraicSolution, p: int) -> str:
    """How the reader sees that rad b stays squarefree modulo p."""
    degree = sum(f.factor.degree for f in proof.squarefree_decomposition)
    if degree <= 1:
        return "by sight"
    return "by hand" if degree <= HAND_DEGREE and p <= HAND_PRIME else "by machine"


def _by_status(primes: Sequence[PrimeStatus]) -> tuple[list[int], list[int]]:
    bad = [prime.p for prime in primes if prime.status == "bad"]
    return bad, [prime.p for prime in primes if prime.status == "zero"]


def _density(proof: NoAlgebraicSolution, facts: NoAlgebraicFacts) -> Density:
    witnesses = proof.density.witnesses
    return Density(
        almost_all=facts.density == 1,
        bound=rational(facts.density),
        witnesses=tuple((integer(w.p), integer(w.order)) for w in witnesses),
        one_witness=len(witnesses) == 1,
        multiple=integer(lcm(*(w.order for w in witnesses))),
    )
