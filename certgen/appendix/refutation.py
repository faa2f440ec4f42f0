"""The context of a `NoAlgebraicSolution`."""

from __future__ import annotations

from dataclasses import dataclass
from math import lcm

from certgen.appendix.bezout import BezoutShown, build_bezout
from certgen.appendix.common import Head, build_head, printer_of
from certgen.appendix.formulas import (
    FACTORS_LIMIT,
    LINE,
    Printer,
    is_long,
    join_numbers,
    listing,
    show,
    signed_factor,
)
from certgen.appendix.obstructions import ObstructionShown, build_obstructions
from certgen.appendix.strip import Strip, build_strip
from certgen.appendix.values import derivative, fits, multiply
from certgen.certificate import (
    NoAlgebraicSolution,
    PolynomialPartModP,
    ResidueOutsidePrimeField,
)
from certgen.checker import CheckedCertificate
from certgen.checker.facts import NoAlgebraicFacts, ReductionFacts
from certgen.claim import FirstOrderEquation
from certgen.errors import DefectError
from certgen.notation.latex_writer import Latex, integer, rational
from certgen.polynomial import Polynomial, write_polynomial

__all__ = ["CounterPrimePart", "Density", "Refutation", "build_refutation"]

HAND_PRIME = 31
HAND_DEGREE = 3
HAND_DIVISION = 8
PRINTED_RADICAL = 12
"""Degree up to which the checker gives a Bezout line for the squarefree part."""

HAND_EXPANSION = 20
"""Degree up to which a power modulo p is multiplied out on the page."""


@dataclass(frozen=True, slots=True, kw_only=True)
class PowerOfFactor:
    """factor^multiplicity in b."""

    power: Latex


@dataclass(frozen=True, slots=True, kw_only=True)
class CounterPrimePart:
    """The counter-prime with its witness; `kind` names the witness."""

    p: Latex
    kind: str
    goodness_how: str
    goodness: BezoutShown | None
    radical_degree: int
    radical: Latex
    show_radical: Latex
    leading: Latex | None
    long_reduced: bool
    show_factor: Latex
    factor_is_denominator: bool
    factor_is_multiple: bool
    long_residue: bool
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
    no_root: Latex
    unchecked: Latex | None
    last_residue_class: Latex
    power: Latex
    p_curvature: Latex | None
    expansion: Latex | None
    none_smaller: bool
    leading_bad: Latex
    leading_bad_count: int
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
    decomposition_by_hand: bool
    factor_count: Latex
    constant_numerator: bool
    lowest_how: str
    lowest_terms_prime: Latex
    lowest_terms: BezoutShown | None
    obstructions: tuple[ObstructionShown, ...]
    counter_prime: CounterPrimePart
    density: Density
    strip: Strip


def build_refutation(checked: CheckedCertificate) -> tuple[Head, Refutation]:
    """Return the contexts of a certificate whose proof is a NoAlgebraicSolution."""
    claim, proof, facts = checked.certificate.claim, checked.certificate.proof, checked.facts
    if not (isinstance(proof, NoAlgebraicSolution) and isinstance(facts, NoAlgebraicFacts)):
        raise DefectError("the facts do not belong to the proof")
    printer, head = printer_of(checked), build_head(checked)
    equation, sym = claim.equation, head.sym
    lowest_terms = build_bezout(
        printer, "lowest-terms", facts.lowest_terms, (sym.b, sym.a),
        (equation.denominator, equation.numerator),
    )  # fmt: skip
    constant = equation.numerator.is_constant or equation.denominator.is_constant
    return head, Refutation(
        beta=signed_factor(facts.beta),
        beta_is_one=facts.beta == 1,
        constant_denominator=equation.denominator.is_constant,
        squarefree=all(f.multiplicity == 1 for f in proof.squarefree_decomposition),
        decomposition=_decomposition(printer, proof),
        decomposition_by_hand=equation.denominator.degree <= HAND_DIVISION,
        factor_count=integer(len(proof.squarefree_decomposition)),
        constant_numerator=equation.numerator.is_constant,
        lowest_how="by sight" if constant
        else lowest_terms.how if lowest_terms is not None else "by machine",
        lowest_terms_prime=integer(proof.lowest_terms_prime),
        lowest_terms=lowest_terms,
        obstructions=build_obstructions(printer, sym, proof, facts),
        counter_prime=_counter_prime(printer, head, equation, proof, facts),
        density=_density(proof, facts),
        strip=build_strip(facts.strip),
    )


def _decomposition(printer: Printer, proof: NoAlgebraicSolution) -> tuple[PowerOfFactor, ...]:
    entries = proof.squarefree_decomposition
    if len(entries) > FACTORS_LIMIT:
        return ()
    return tuple(
        PowerOfFactor(
            power=printer.polynomial(f"squarefree-factor-{k}", entry.factor)
            if entry.multiplicity == 1
            else printer.power(f"squarefree-power-{k}", entry.factor, entry.multiplicity),
        )
        for k, entry in enumerate(entries, 1)
    )


# --------------------------------------------------------------------------
# modulo p


def _counter_prime(
    printer: Printer,
    head: Head,
    equation: FirstOrderEquation,
    proof: NoAlgebraicSolution,
    facts: NoAlgebraicFacts,
) -> CounterPrimePart:
    value, reduced = proof.counter_prime, facts.reduction
    witness, p = value.witness, value.p
    outside = isinstance(witness, ResidueOutsidePrimeField)
    factor = None if isinstance(witness, PolynomialPartModP) else witness.factor
    small = p <= HAND_PRIME and reduced.denominator.degree <= HAND_DIVISION
    radical, degree = _radical(proof)
    goodness = build_bezout(
        printer, "good", reduced.bezout, (head.sym.S, f"{head.sym.S}'"),
        (radical, derivative(radical)),
    )  # fmt: skip
    leading = equation.denominator.numerators[-1]
    bad = [q.p for q in facts.smaller_primes if q.status == "bad"]
    zero = [q.p for q in facts.smaller_primes if q.status == "zero"]
    expansion = _expansion(reduced, p, proof)
    by_hand = small and (factor is None or factor.degree <= HAND_DEGREE)
    return CounterPrimePart(
        p=integer(p),
        kind=witness.KIND,
        goodness_how="by sight" if degree <= 1
        else goodness.how if goodness is not None else "by machine",
        goodness=goodness if degree > 1 else None,
        radical_degree=degree,
        radical=printer.polynomial("radical", radical),
        show_radical=show(radical),
        leading=integer(leading) if fits(leading) else None,
        long_reduced=is_long(reduced.numerator, reduced.denominator),
        show_factor=show(factor) if factor is not None else Latex("inline"),
        factor_is_denominator=factor == reduced.denominator,
        factor_is_multiple=factor is not None
        and factor.degree == reduced.denominator.degree,
        long_residue=isinstance(witness, ResidueOutsidePrimeField)
        and is_long(witness.residue, reduced.derivative),
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
        by_hand=by_hand,
        irreducible=outside and bool(reduced.factor_is_irreducible),
        irreducible_by_hand=factor is not None and factor.degree <= HAND_DEGREE
        and p <= HAND_PRIME,
        no_root=_no_root(p),
        unchecked=_unchecked(by_hand, witness.KIND, bool(reduced.factor_is_irreducible),
                             degree <= 1 or (goodness is not None and goodness.has_numbers)),
        last_residue_class=integer(p - 1),
        power=Latex("" if p == 2 else f"^{{{integer(p - 1)}}}"),
        p_curvature=_p_curvature(printer, proof),
        expansion=printer.polynomial("expansion", expansion) if expansion else None,
        none_smaller=not facts.smaller_primes,
        leading_bad=join_numbers([q for q in bad if leading % q == 0]),
        leading_bad_count=sum(1 for q in bad if leading % q == 0),
        bad=join_numbers([q for q in bad if leading % q]),
        bad_count=sum(1 for q in bad if leading % q),
        zero=join_numbers(zero),
        zero_count=len(zero),
    )


def _unchecked(by_hand: bool, kind: str, irreducible: bool, good: bool) -> Latex | None:
    """The steps by machine that have no numbers to check at one point."""
    outside = kind == ResidueOutsidePrimeField.KIND
    steps = ["(a)"] if not good else []
    if not by_hand:
        steps.append("(b)")
    if (not by_hand and kind != PolynomialPartModP.KIND) or (outside and not irreducible):
        steps.append("(c)")
    return listing(steps) if steps else None


def _no_root(p: int) -> Latex:
    """The residue classes modulo p, as the subject of a denial."""
    if p == 2:
        return Latex("neither $0$ nor $1$")
    if p == 3:
        return Latex("none of $0$, $1$ and $2$")
    return Latex(rf"none of $0$, $1$, \ldots, ${integer(p - 1)}$")


def _p_curvature(printer: Printer, proof: NoAlgebraicSolution) -> Latex | None:
    if proof.p_curvature is None:
        return None
    return printer.polynomial("p-curvature", proof.p_curvature.numerator)


def _radical(proof: NoAlgebraicSolution) -> tuple[Polynomial, int]:
    """The squarefree part of b, multiplied out where it is printed, and its degree."""
    degree = sum(entry.factor.degree for entry in proof.squarefree_decomposition)
    out = Polynomial.from_integers([1])
    for entry in proof.squarefree_decomposition if degree <= PRINTED_RADICAL else ():
        out = multiply(out, entry.factor)
    return out, degree


def _expansion(
    reduced: ReductionFacts, p: int, proof: NoAlgebraicSolution
) -> Polynomial | None:
    """a*b^(p-1) modulo p, from which the value of the p-curvature is read off."""
    degree = reduced.numerator.degree + (p - 1) * reduced.denominator.degree
    if proof.p_curvature is None or p > HAND_PRIME or degree > HAND_EXPANSION:
        return None
    out = reduced.numerator
    for _ in range(p - 1):
        product = multiply(out, reduced.denominator)
        out = Polynomial.from_integers(c % p for c in product.numerators)
    return out if len(write_polynomial(out)) <= 2 * LINE else None


def _density(proof: NoAlgebraicSolution, facts: NoAlgebraicFacts) -> Density:
    witnesses = proof.density.witnesses
    return Density(
        almost_all=facts.density == 1,
        bound=rational(facts.density),
        witnesses=tuple((integer(w.p), integer(w.order)) for w in witnesses),
        one_witness=len(witnesses) == 1,
        multiple=integer(lcm(*(w.order for w in witnesses))),
    )
