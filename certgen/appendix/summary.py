"""One appendix for several certificates, and one line for a notebook."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass

from certgen.appendix.common import build_head
from certgen.appendix.formulas import lines_of, typewriter
from certgen.certificate import (
    AlgebraicSolution,
    ClosedFormDisagrees,
    NoAlgebraicSolution,
)
from certgen.checker import CheckedCertificate
from certgen.notation.latex_writer import Latex, equation, integer, letter, power_product

__all__ = ["SummaryRow", "build_summary", "latex_summary", "summary_width"]

NARROW_ID = 14


@dataclass(frozen=True, slots=True, kw_only=True)
class SummaryRow:
    """One certificate in the table: the claim, the verdict, the main number."""

    id: Latex
    equation: Latex
    shows_equation: bool
    every: bool
    algebraic: bool
    has_closed_form: bool
    proved: bool
    degree: Latex | None
    counter_prime: Latex | None


def summary_width(checked: Sequence[CheckedCertificate]) -> Latex | None:
    """The width of the column of ids; None where they are too long for one."""
    longest = max(len(item.certificate.claim.id) for item in checked)
    return Latex(f"{0.55 * longest + 1:.2f}em") if longest <= NARROW_ID else None


def build_summary(checked: CheckedCertificate) -> SummaryRow:
    """Return the row of one certificate."""
    claim, proof = checked.certificate.claim, checked.certificate.proof
    actual = proof.actual if isinstance(proof, ClosedFormDisagrees) else proof
    sides = (claim.equation.numerator, claim.equation.denominator)
    return SummaryRow(
        id=typewriter(claim.id),
        equation=build_head(checked).equation,
        shows_equation=lines_of(sides) <= 4,
        every=claim.subject == "every solution",
        algebraic=claim.asserts == "algebraic",
        has_closed_form=claim.solution is not None,
        proved=checked.certificate.verdict == "proved",
        degree=integer(actual.degree) if isinstance(actual, AlgebraicSolution) else None,
        counter_prime=integer(actual.counter_prime.p)
        if isinstance(actual, NoAlgebraicSolution)
        else None,
    )


def latex_summary(checked: CheckedCertificate) -> str:
    """Return one displayed formula: the equation and what was found about it."""
    claim, proof = checked.certificate.claim, checked.certificate.proof
    actual = proof.actual if isinstance(proof, ClosedFormDisagrees) else proof
    shown: str = equation(claim.equation.numerator, claim.equation.denominator, claim.letters)
    if isinstance(actual, AlgebraicSolution):
        y, product = letter(claim.letters.function), ""
        if actual.solution:
            product = rf"\,{power_product(actual.solution, claim.letters.variable)}"
        found = rf"\text{{algebraic of degree }}{integer(actual.degree)}:\ {y} = c{product}"
    else:
        found = rf"\text{{transcendental, counter-prime }}{integer(actual.counter_prime.p)}"
    text = rf"$\displaystyle {shown};\quad {found}$"
    return re.sub(r"\\certgen(break|digits) ?", "", text)
