"""The context of an `AlgebraicSolution`, shared with `ClosedFormDisagrees`."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

from certgen.appendix.common import Head, build_head, printer_of
from certgen.appendix.formulas import (
    DIGITS_PER_CELL,
    FACTORS_LIMIT,
    LINE,
    WRITTEN_LINES,
    Printer,
    is_long_exponent,
    is_omitted,
    lines_of,
    signed_factor,
    signed_sum,
    symbolic_product,
)
from certgen.appendix.strip import StripItem, build_strip
from certgen.appendix.symbols import Symbols
from certgen.certificate import AlgebraicSolution, PartialFraction
from certgen.checker import CheckedCertificate
from certgen.checker.facts import AlgebraicFacts, IdentitySpot
from certgen.claim import Power
from certgen.errors import DefectError
from certgen.notation.latex_writer import Latex, integer
from certgen.polynomial import Polynomial, write_integer, write_polynomial

__all__ = ["Algebraic", "Base", "Factor", "Spot", "Written", "build_algebraic",
           "build_algebraic_parts", "coefficient"]

BY_HAND_DEGREE = 8
BY_HAND_BASES = 4
BY_HAND_DIGITS = 6


@dataclass(frozen=True, slots=True, kw_only=True)
class Base:
    """One base v_i of the solution with its exponent rho_i = n_i/N."""

    index: Latex
    polynomial: Latex
    exponent: Latex


@dataclass(frozen=True, slots=True, kw_only=True)
class Factor:
    """A displayed factor f of b with residue top/bottom: bottom*a = top*b' mod f."""

    index: Latex
    polynomial: Latex
    residue: Latex
    top: Latex
    bottom: Latex


@dataclass(frozen=True, slots=True, kw_only=True)
class Written:
    """The two sides of the second identity, term by term."""

    products: tuple[Latex, ...]
    derivatives: tuple[Latex, ...]
    identity: Latex


@dataclass(frozen=True, slots=True, kw_only=True)
class Spot:
    """The identities at one point; `rows` are v_i, v_i', term; unevaluated sums."""

    point: Latex
    a: Latex
    b: Latex
    product: Latex
    sum: Latex
    tabular: bool
    rows: tuple[tuple[Latex, ...], ...]
    width: Latex
    term_width: Latex


@dataclass(frozen=True, slots=True, kw_only=True)
class Algebraic:
    """Everything the steps of an algebraic solution print."""

    zero: bool
    rational: bool
    one_base: bool
    degree: Latex
    degree_as_exponent: Latex
    beta: Latex
    beta_is_one: bool
    weight_is_one: bool
    count: Latex
    bases: tuple[Base, ...]
    factor_count: Latex
    factors: tuple[Factor, ...]
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
    eisenstein_point: Latex | None
    eisenstein_constant: Latex
    shift: Latex
    base_name: Latex
    claimed_is_solution: bool
    strip: tuple[StripItem, ...]


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
    written = _written(printer, facts)
    linear = len(proof.partial_fractions) <= FACTORS_LIMIT and all(
        term.factor.degree == 1 for term in proof.partial_fractions
    )
    symbolic = Latex(f"${_symbolic(sym, exponents, f'{sym.rho}_i')}$")
    return Algebraic(
        zero=not proof.solution,
        rational=proof.degree == 1,
        one_base=len(proof.solution) == 1,
        degree=integer(facts.degree),
        degree_as_exponent=sym.N if is_long_exponent(Fraction(facts.degree))
        else integer(facts.degree),
        beta=integer(facts.beta),
        beta_is_one=facts.beta == 1,
        weight_is_one=facts.numerators == (1,),
        count=integer(len(proof.solution)),
        bases=_bases(printer, proof.solution),
        factor_count=integer(len(proof.partial_fractions)),
        factors=_factors(printer, proof),
        factors_are_bases=[t.factor for t in proof.partial_fractions]
        == [power.base for power in proof.solution],
        residues_by_hand=all(
            len(write_polynomial(q)) <= LINE for q in (equation.numerator, equation.denominator)
        ),
        written=written,
        by_hand=written is not None and _is_by_hand(facts),
        spot=_spot(facts),
        solution=printer.product(proof.solution) or symbolic,
        numerator=printer.product(proof.minimal_polynomial.numerator)
        or Latex(f"${_symbolic(sym, top, f'{sym.n}_i', f'_{{{sym.n}_i>0}}')}$"),
        denominator=printer.product(proof.minimal_polynomial.denominator)
        or Latex(f"${_symbolic(sym, bottom, f'-{sym.n}_i', f'_{{{sym.n}_i<0}}')}$"),
        has_numerator=any(top),
        has_denominator=any(bottom),
        one_root=facts.squarefree_degree <= 1,
        linear=linear,
        squarefree_how="by sight" if linear else "by machine",
        squarefree_prime=integer(proof.squarefree_prime),
        eisenstein_point=integer(proof.eisenstein.point) if proof.eisenstein else None,
        eisenstein_constant=integer(proof.eisenstein.constant if proof.eisenstein else 1),
        shift=_shift(proof),
        base_name=Latex(sym.v if len(proof.solution) == 1 else f"{sym.v}_{sym.i}"),
        claimed_is_solution=claim.solution == proof.solution,
        strip=build_strip(facts.strip),
    )


def _shift(proof: AlgebraicSolution) -> Latex:
    """`x0 +` as it stands before L*t; nothing at the origin."""
    point = proof.eisenstein.point if proof.eisenstein else 0
    return Latex(f"{integer(point)} +" if point else "")


def _symbolic(
    sym: Symbols, exponents: Sequence[Fraction], exponent: str, condition: str = ""
) -> str:
    """v_1^e_1 v_2^e_2 ..., or one product sign when there are too many."""
    if len(exponents) <= FACTORS_LIMIT:
        return symbolic_product(sym.v, exponents, exponent)
    text = rf"\prod{condition} {sym.v}_i^{{{exponent}}}"
    return text.replace("_i", f"_{sym.i}")


def _integer_powers(bases: Sequence[Power], side: Sequence[Power]) -> list[Fraction]:
    exponent = {power.base: power.exponent for power in side}
    return [exponent.get(power.base, Fraction(0)) for power in bases]


def _listed(values: Sequence[Polynomial]) -> bool:
    return len(values) <= FACTORS_LIMIT


def _bases(printer: Printer, solution: Sequence[Power]) -> tuple[Base, ...]:
    if not _listed([power.base for power in solution]):
        return ()
    return tuple(
        Base(
            index=integer(k),
            polynomial=printer.polynomial(f"base-{k}", power.base),
            exponent=printer.number(f"exponent-{k}", power.exponent),
        )
        for k, power in enumerate(solution, 1)
    )


def _factors(printer: Printer, proof: AlgebraicSolution) -> tuple[Factor, ...]:
    terms: tuple[PartialFraction, ...] = proof.partial_fractions
    if not _listed([term.factor for term in terms]):
        return ()
    return tuple(
        Factor(
            index=integer(k),
            polynomial=printer.polynomial(f"factor-{k}", term.factor),
            residue=printer.number(f"residue-{k}", term.residue),
            top=coefficient(term.residue.numerator),
            bottom=coefficient(term.residue.denominator),
        )
        for k, term in enumerate(terms, 1)
    )


def coefficient(value: int) -> Latex:
    """An integer as the coefficient before a letter: 1 is not written."""
    if value in (1, -1):
        return Latex("-" if value < 0 else "")
    return Latex(rf"{integer(value)}\,")


def _written(printer: Printer, facts: AlgebraicFacts) -> Written | None:
    """Both sides of the identity when they take at most WRITTEN_LINES lines."""
    if facts.products is None or facts.identity is None:
        return None
    printed = (*facts.products, *facts.derivatives, facts.identity)
    if lines_of(printed) > 2 * WRITTEN_LINES or any(map(is_omitted, printed)):
        return None
    if lines_of((*facts.products, facts.identity)) > WRITTEN_LINES:
        return None
    return Written(
        products=_numbered(printer, "product", facts.products),
        derivatives=_numbered(printer, "derivative", facts.derivatives),
        identity=printer.polynomial("identity", facts.identity),
    )


def _numbered(
    printer: Printer, name: str, values: Sequence[Polynomial]
) -> tuple[Latex, ...]:
    return tuple(
        printer.polynomial(f"{name}-{k}", value) for k, value in enumerate(values, 1)
    )


def _is_by_hand(facts: AlgebraicFacts) -> bool:
    products = facts.products or ()
    digits = max(
        (len(write_integer(abs(c))) for q in products for c in q.numerators), default=0
    )
    return (
        facts.squarefree_degree <= BY_HAND_DEGREE
        and len(products) <= BY_HAND_BASES
        and digits <= BY_HAND_DIGITS
    )


def _spot(facts: AlgebraicFacts) -> Spot | None:
    spot = facts.spot
    if spot is None:
        return None
    rows = list(zip(spot.bases, spot.derivatives, spot.terms, strict=True))
    digits = _digits(spot)
    if len(rows) > FACTORS_LIMIT or digits * 3 * len(rows) > 2 * WRITTEN_LINES * LINE:
        return None
    beta = "" if facts.beta == 1 and len(rows) > 1 else rf"{integer(facts.beta)}\cdot "
    total = signed_sum(spot.terms)
    return Spot(
        point=integer(spot.point),
        a=signed_factor(spot.a),
        b=integer(spot.b),
        product=Latex(
            beta + r"\certgenbreak\cdot ".join(signed_factor(v) for v in spot.bases)
        ),
        sum=Latex(f"{beta}({total})" if beta and len(rows) > 1 else f"{beta}{total}"),
        tabular=digits <= DIGITS_PER_CELL // 2 and len(rows) > 1,
        rows=tuple(tuple(integer(v) for v in row) for row in rows),
        width=Latex(f"{max(2.5, 0.52 * digits + 1):.2f}em"),
        term_width=Latex(f"{max(7.5, 0.52 * digits + 1):.2f}em"),
    )


def _digits(spot: IdentitySpot) -> int:
    values = (*spot.bases, *spot.derivatives, *spot.terms)
    return max(len(write_integer(value)) for value in values)
