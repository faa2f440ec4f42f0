"""The context of an `AlgebraicSolution`, shared with `ClosedFormDisagrees`."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

from certgen.appendix.bezout import BezoutShown, build_bezout
from certgen.appendix.common import Head, build_head, printer_of
from certgen.appendix.formulas import (
    FACTORS_LIMIT,
    LINE,
    Printer,
    is_long_exponent,
    listing,
    show,
    symbolic_product,
)
from certgen.appendix.identity import Spot, Written, build_spot, build_written, is_by_hand
from certgen.appendix.integrality import Integrality, build_integrality
from certgen.appendix.residues import Residues, build_residues
from certgen.appendix.strip import Strip, build_strip
from certgen.appendix.symbols import Symbols
from certgen.appendix.values import derivative, fits, value_at
from certgen.certificate import AlgebraicSolution
from certgen.checker import CheckedCertificate
from certgen.checker.facts import AlgebraicFacts
from certgen.claim import FirstOrderClaim, Power
from certgen.errors import DefectError
from certgen.notation.latex_writer import Latex, integer
from certgen.polynomial import Polynomial, write_polynomial

__all__ = ["Algebraic", "Base", "build_algebraic", "build_algebraic_parts"]

NUMERATORS_LISTED = 6
CLAIMED_TERMS = 4


@dataclass(frozen=True, slots=True, kw_only=True)
class Base:
    """One base v_i of the solution with its exponent rho_i = n_i/N."""

    index: Latex
    polynomial: Latex
    exponent: Latex
    show: Latex
    is_long: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class ClaimedSpot:
    """The logarithmic derivative of the claimed product at one point, and a/b there."""

    point: Latex
    terms: Latex
    total: Latex


@dataclass(frozen=True, slots=True, kw_only=True)
class Algebraic:
    """Everything the steps of an algebraic solution print."""

    zero: bool
    rational: bool
    one_base: bool
    degree: Latex
    degree_power: Latex
    beta: Latex
    beta_is_one: bool
    numerators: Latex | None
    count: Latex
    bases: tuple[Base, ...]
    residues: Residues
    factors_are_bases: bool
    residues_by_hand: bool
    written: Written | None
    by_hand: bool
    spot: Spot | None
    solution: Latex
    numerator: Latex
    denominator: Latex
    has_numerator: bool
    has_denominator: bool
    one_root: bool
    linear: bool
    squarefree_how: str
    squarefree_prime: Latex
    squarefree: BezoutShown | None
    integrality: Integrality | None
    claimed_is_solution: bool
    claimed_spot: ClaimedSpot | None
    strip: Strip


def build_algebraic(checked: CheckedCertificate) -> tuple[Head, Algebraic]:
    """Return the contexts of a certificate whose proof is an AlgebraicSolution."""
    proof, facts = checked.certificate.proof, checked.facts
    if not (isinstance(proof, AlgebraicSolution) and isinstance(facts, AlgebraicFacts)):
        raise DefectError("the facts do not belong to the proof")
    return build_head(checked), build_algebraic_parts(checked, proof, facts)


def build_algebraic_parts(
    checked: CheckedCertificate, proof: AlgebraicSolution, facts: AlgebraicFacts
) -> Algebraic:
    """Return the context of the steps, for the proof object or a part of it."""
    printer, head = printer_of(checked), build_head(checked)
    claim, sym = checked.certificate.claim, head.sym
    equation = claim.equation
    exponents = [power.exponent for power in proof.solution]
    top = _integer_powers(proof.solution, proof.minimal_polynomial.numerator)
    bottom = _integer_powers(proof.solution, proof.minimal_polynomial.denominator)
    linear = len(proof.partial_fractions) <= FACTORS_LIMIT and all(
        term.factor.degree == 1 for term in proof.partial_fractions
    )
    symbolic = Latex(f"${_symbolic(sym, exponents, f'{sym.rho}_i')}$")
    written_out = printer.product(proof.solution)
    squarefree = _squarefree(printer, sym, claim, facts)
    written = build_written(printer, facts)
    return Algebraic(
        zero=not proof.solution,
        rational=proof.degree == 1,
        one_base=len(proof.solution) == 1,
        degree=integer(facts.degree),
        degree_power=sym.N if is_long_exponent(Fraction(facts.degree))
        else integer(facts.degree),
        beta=integer(facts.beta),
        beta_is_one=facts.beta == 1,
        numerators=_numerators(sym, facts),
        count=integer(len(proof.solution)),
        bases=_bases(printer, proof.solution),
        residues=build_residues(printer, equation, proof, facts),
        factors_are_bases=[t.factor for t in proof.partial_fractions]
        == [power.base for power in proof.solution],
        residues_by_hand=all(
            len(write_polynomial(q)) <= LINE for q in (equation.numerator, equation.denominator)
        ),
        written=written,
        by_hand=written is not None and is_by_hand(facts),
        spot=build_spot(printer, facts),
        solution=written_out or symbolic,
        numerator=_side(printer, proof.minimal_polynomial.numerator, written_out)
        or Latex(f"${_symbolic(sym, top, f'{sym.n}_i', f'_{{{sym.n}_i>0}}')}$"),
        denominator=_side(printer, proof.minimal_polynomial.denominator, written_out)
        or Latex(f"${_symbolic(sym, bottom, f'-{sym.n}_i', f'_{{{sym.n}_i<0}}')}$"),
        has_numerator=any(top),
        has_denominator=any(bottom),
        one_root=facts.squarefree_degree <= 1,
        linear=linear,
        squarefree_how="by sight" if linear
        else squarefree.how if squarefree is not None else "by machine",
        squarefree_prime=integer(proof.squarefree_prime),
        squarefree=squarefree,
        integrality=build_integrality(printer, sym, proof),
        claimed_is_solution=claim.solution == proof.solution,
        claimed_spot=_claimed_spot(claim, facts),
        strip=build_strip(facts.strip),
    )


def _numerators(sym: Symbols, facts: AlgebraicFacts) -> Latex | None:
    """`n_1 = 3` and so on, when they are few and short."""
    values = facts.numerators
    if len(values) > NUMERATORS_LISTED or not fits(*values):
        return None
    if len(values) == 1:
        return Latex(f"${sym.n} = {integer(values[0])}$")
    return listing([f"${sym.n}_{{{k}}} = {integer(n)}$" for k, n in enumerate(values, 1)])


def _symbolic(
    sym: Symbols, exponents: Sequence[Fraction], exponent: str, condition: str = ""
) -> str:
    """v_1^e_1 v_2^e_2 ..., or one product sign when there are too many."""
    if len(exponents) <= FACTORS_LIMIT:
        return symbolic_product(sym.v, exponents, exponent)
    text = rf"\prod{condition} {sym.v}_i^{{{exponent}}}"
    return text.replace("_i", f"_{sym.i}")


def _side(
    printer: Printer, side: Sequence[Power], written_out: Latex | None
) -> Latex | None:
    """A side of the minimal equation, in v_i wherever the solution is."""
    return None if written_out is None else printer.product(side)


def _integer_powers(bases: Sequence[Power], side: Sequence[Power]) -> list[Fraction]:
    exponent = {power.base: power.exponent for power in side}
    return [exponent.get(power.base, Fraction(0)) for power in bases]


def _bases(printer: Printer, solution: Sequence[Power]) -> tuple[Base, ...]:
    if len(solution) > FACTORS_LIMIT:
        return ()
    return tuple(
        Base(
            index=integer(k),
            polynomial=printer.polynomial(f"base-{k}", power.base),
            exponent=printer.value(f"exponent-{k}", power.exponent),
            show=show(power.base),
            is_long=is_long_exponent(power.exponent),
        )
        for k, power in enumerate(solution, 1)
    )


def _squarefree(
    printer: Printer, sym: Symbols, claim: FirstOrderClaim, facts: AlgebraicFacts
) -> BezoutShown | None:
    """The Bezout line of V and V'; V is b/beta."""
    b, slope = claim.equation.denominator, facts.b_derivative
    if facts.bezout is None or slope is None:
        return None
    name = sym.v if len(facts.numerators) == 1 else sym.V
    factors = (
        Polynomial.from_coefficients(c / facts.beta for c in b.coefficients),
        Polynomial.from_coefficients(c / facts.beta for c in slope.coefficients),
    )
    return build_bezout(printer, "squarefree", facts.bezout, (name, f"{name}'"), factors)


def _claimed_spot(claim: FirstOrderClaim, facts: AlgebraicFacts) -> ClaimedSpot | None:
    """sum of exponent*w'/w at the checker's point, against a/b there."""
    powers, spot = claim.solution or (), facts.spot
    if spot is None or not 1 <= len(powers) <= CLAIMED_TERMS:
        return None
    terms = []
    for power in powers:
        value = value_at(power.base, spot.point)
        if value == 0:
            return None
        slope = value_at(derivative(power.base), spot.point)
        terms.append((power.exponent, slope, value))
    total = Fraction(spot.a, spot.b)
    if not fits(total, *(number for term in terms for number in term)):
        return None
    if sum(e * slope / value for e, slope, value in terms) != total:
        return None
    return ClaimedSpot(
        point=integer(spot.point),
        terms=Latex(r" \certgenbreak + ".join(_quotient(*term) for term in terms)),
        total=Latex(rf"{integer(spot.a)}/{integer(spot.b)}"
                    if spot.b > 0 else rf"{integer(-spot.a)}/{integer(-spot.b)}"),
    )  # fmt: skip


def _quotient(exponent: Fraction, slope: Fraction, value: Fraction) -> str:
    factor = f"{integer(exponent.numerator)}"
    if exponent.denominator != 1:
        factor = rf"\tfrac{{{factor}}}{{{integer(exponent.denominator)}}}"
    if exponent < 0:
        factor = f"({factor})"
    ratio = slope / value
    text = f"{integer(ratio.numerator)}"
    if ratio.denominator != 1:
        text = rf"\tfrac{{{integer(slope.numerator)}}}{{{integer(value.numerator)}}}"
    return rf"{factor}\cdot {text if ratio >= 0 else f'({text})'}"
