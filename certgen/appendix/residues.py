"""The factors of b with their residues, and how each residue is checked."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from certgen.appendix.formulas import FACTORS_LIMIT, Printer, cell_width, show
from certgen.appendix.values import fits, multiply, quotient_of, value_at
from certgen.certificate import AlgebraicSolution, PartialFraction
from certgen.checker.facts import AlgebraicFacts, RootValues
from certgen.claim import FirstOrderEquation
from certgen.notation.latex_writer import Latex, integer
from certgen.polynomial import Polynomial, write_polynomial, write_rational

__all__ = ["Factor", "Residues", "build_residues", "coefficient"]

TABLE_WIDTH = 15.0
"""The first two columns make a table up to this many em; otherwise a list."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Factor:
    """A factor f with its residue top/bottom: bottom*a = top*b' mod f.

    `kind`: "root" (the values at the rational root show it), "equal"
    (bottom*a = top*b' as polynomials), "spot" (bottom*a - top*b' = f * an integer at
    one point), or "bare" (no number is printed).
    """

    kind: str
    polynomial: Latex
    residue: Latex
    top: Latex
    minus_top: Latex
    bottom: Latex
    point: Latex
    a: Latex
    derivative: Latex
    difference: Latex
    factor_value: Latex
    quotient: Latex


@dataclass(frozen=True, slots=True, kw_only=True)
class Residues:
    """The table of factors, or the list where its columns would be wide."""

    count: Latex
    one: bool
    factors: tuple[Factor, ...]
    narrow: bool
    factor_width: Latex
    residue_width: Latex
    row_width: Latex
    all_roots: bool
    derivative: Latex | None
    show_derivative: Latex
    spot_point: Latex | None
    spot_a: Latex
    spot_derivative: Latex


def coefficient(value: int) -> Latex:
    """An integer as the coefficient before a letter: 1 is not written."""
    if value in (1, -1):
        return Latex("-" if value < 0 else "")
    return Latex(rf"{integer(value)}\,")


def _sign(value: int) -> Latex:
    """An integer as the coefficient of a term that is not the first."""
    sign = "-" if value < 0 else "+"
    return Latex(f" {sign} {coefficient(abs(value))}")


def build_residues(
    printer: Printer,
    equation: FirstOrderEquation,
    proof: AlgebraicSolution,
    facts: AlgebraicFacts,
) -> Residues:
    """Return the factors of the proof with what a reader needs to check them."""
    terms = proof.partial_fractions
    listed = terms if len(terms) <= FACTORS_LIMIT else ()
    roots = facts.root_values or (None,) * len(terms)
    factors = tuple(
        _factor(printer, k, term, values, equation, facts)
        for k, (term, values) in enumerate(zip(listed, roots, strict=False), 1)
    )
    same = [t.factor for t in terms] == [power.base for power in proof.solution]
    first = cell_width((write_polynomial(term.factor) for term in listed), 4.5)
    second = cell_width((write_rational(term.residue) for term in listed), 4.5)
    derivative = facts.b_derivative
    point, a, slope = _spot_values(printer, equation, facts, factors)
    return Residues(
        count=integer(len(terms)),
        one=len(terms) == 1,
        factors=factors,
        narrow=first + second <= TABLE_WIDTH,
        factor_width=Latex(f"{first:.2f}em"),
        residue_width=Latex(f"{second:.2f}em"),
        row_width=Latex(f"{first + second + (2 if same else 0):.2f}em"),
        all_roots=all(factor.kind == "root" for factor in factors),
        derivative=None if derivative is None
        else printer.polynomial("b-derivative", derivative),
        show_derivative=show() if derivative is None else show(derivative),
        spot_point=point,
        spot_a=a,
        spot_derivative=slope,
    )


def _spot_values(
    printer: Printer,
    equation: FirstOrderEquation,
    facts: AlgebraicFacts,
    factors: tuple[Factor, ...],
) -> tuple[Latex | None, Latex, Latex]:
    """The point of the spot checks with a and b' there, None without such a check."""
    spot, derivative = facts.spot, facts.b_derivative
    used = any(factor.kind == "spot" for factor in factors)
    if not used or spot is None or derivative is None:
        return None, Latex(""), Latex("")
    point, a = spot.point, value_at(equation.numerator, spot.point)
    slope = value_at(derivative, point)
    return (
        printer.value("residue-spot-point", point),
        printer.value("residue-spot-a", a),
        printer.value("residue-spot-derivative", slope),
    )


def _factor(
    printer: Printer,
    k: int,
    term: PartialFraction,
    root: RootValues | None,
    equation: FirstOrderEquation,
    facts: AlgebraicFacts,
) -> Factor:
    kind, numbers = _check(term, root, equation, facts)
    names = ("point", "a", "derivative", "difference", "factor-value", "quotient")
    point, a, derivative, difference, value, quotient = (
        printer.value(f"residue-{name}-{k}", number)
        for name, number in zip(names, numbers, strict=True)
    )
    return Factor(
        kind=kind,
        polynomial=printer.polynomial(f"factor-{k}", term.factor),
        residue=printer.value(f"residue-{k}", term.residue),
        top=coefficient(term.residue.numerator),
        minus_top=_sign(-term.residue.numerator),
        bottom=coefficient(term.residue.denominator),
        point=point, a=a, derivative=derivative,
        difference=difference, factor_value=value,
        quotient=Latex(f"$(${quotient}$)$") if numbers[-1] < 0 else quotient,
    )  # fmt: skip


def _check(
    term: PartialFraction,
    root: RootValues | None,
    equation: FirstOrderEquation,
    facts: AlgebraicFacts,
) -> tuple[str, tuple[Fraction, ...]]:
    """The kind of the check, and point, a, b', difference, factor and quotient there."""
    zero = Fraction(0)
    if root is not None:
        values = (root.root, root.a, root.derivative)
        return ("root" if fits(*values) else "bare"), (*values, zero, zero, zero)
    b_derivative, a = facts.b_derivative, equation.numerator
    top, bottom = term.residue.numerator, term.residue.denominator
    if b_derivative is None or facts.spot is None:
        return "bare", (zero,) * 6
    if _times(a, bottom) == _times(b_derivative, top):
        return "equal", (zero,) * 6
    point = Fraction(facts.spot.point)
    value, slope = value_at(a, point), value_at(b_derivative, point)
    difference, factor = bottom * value - top * slope, value_at(term.factor, point)
    quotient = quotient_of(difference, factor)
    numbers = (point, value, slope, difference, factor, quotient)
    return ("spot" if fits(*numbers) else "bare"), numbers


def _times(f: Polynomial, scale: int) -> Polynomial:
    return multiply(f, Polynomial.from_integers([scale]))
