"""One appendix for several certificates, and one line for a notebook."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass

from certgen.appendix.common import build_head
from certgen.appendix.formulas import prose, typewriter
from certgen.certificate import (
    AlgebraicSolution,
    ClosedFormDisagrees,
    NoAlgebraicSolution,
)
from certgen.checker import CheckedCertificate
from certgen.notation.latex_writer import Latex, equation, integer, letter, power_product

__all__ = ["Summary", "SummaryRow", "build_summary", "latex_summary"]

NARROW_ID = 16


@dataclass(frozen=True, slots=True, kw_only=True)
class SummaryRow:
    """One certificate in the table: the claim, the verdict, the main number."""

    id: Latex
    title: Latex | None
    equation: Latex
    shows_equation: bool
    every: bool
    algebraic: bool
    has_closed_form: bool
    proved: bool
    degree: Latex | None
    counter_prime: Latex | None


@dataclass(frozen=True, slots=True, kw_only=True)
class Summary:
    """The table; `width` of the column of ids, None where they are too long for one."""

    rows: tuple[SummaryRow, ...]
    width: Latex | None
    row_width: Latex
    has_degree: bool
    has_prime: bool


def build_summary(checked: Sequence[CheckedCertificate]) -> Summary:
    """Return the table of these certificates."""
    rows = tuple(_row(item) for item in checked)
    longest = max(len(item.certificate.claim.id) for item in checked)
    width = max(5.5, 0.55 * longest + 1)
    return Summary(
        rows=rows,
        width=Latex(f"{width:.2f}em") if longest <= NARROW_ID else None,
        row_width=Latex(f"{width + 11:.2f}em"),
        has_degree=any(row.degree is not None for row in rows),
        has_prime=any(row.degree is None for row in rows),
    )


def _row(checked: CheckedCertificate) -> SummaryRow:
    """Return the row of one certificate."""
    claim, proof = checked.certificate.claim, checked.certificate.proof
    actual = proof.actual if isinstance(proof, ClosedFormDisagrees) else proof
    head = build_head(checked)
    return SummaryRow(
        id=typewriter(claim.id),
        title=prose(claim.title) if claim.title else None,
        equation=head.equation,
        shows_equation=not head.is_long,
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
