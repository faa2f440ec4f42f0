"""Step 2 of an algebraic solution: the identities written out, and at one point."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from certgen.appendix.formulas import (
    FACTORS_LIMIT,
    INLINE,
    WRITTEN_LINES,
    Printer,
    is_omitted,
    lines_of,
    show,
    signed_factor,
    signed_sum,
)
from certgen.appendix.values import fits
from certgen.checker.facts import AlgebraicFacts, IdentitySpot
from certgen.notation.latex_writer import Latex, integer
from certgen.polynomial import Polynomial, write_integer, write_polynomial

__all__ = ["Spot", "Written", "build_spot", "build_written", "is_by_hand"]

BY_HAND_DEGREE = 8
BY_HAND_BASES = 4
BY_HAND_DIGITS = 6
SENTENCE_ROWS = 2
SENTENCE_DIGITS = 6
SHORT = 16


@dataclass(frozen=True, slots=True, kw_only=True)
class Written:
    """Both sides of the second identity, term by term; `compact`: one display each."""

    compact: bool
    products: tuple[Latex, ...]
    derivatives: tuple[Latex, ...]
    identity: Latex
    show_derivative: Latex
    show_identity: Latex


@dataclass(frozen=True, slots=True, kw_only=True)
class SpotRow:
    """v_i, v_i' and the term of the sum, with the index i."""

    index: Latex
    base: Latex
    derivative: Latex
    term: Latex


@dataclass(frozen=True, slots=True, kw_only=True)
class Spot:
    """The identities at one point; `product` and `sum`, not evaluated, begin with `=`."""

    point: Latex
    a: Latex
    b: Latex
    product: Latex
    sum: Latex
    tabular: bool
    rows: tuple[SpotRow, ...]
    width: Latex


def build_written(printer: Printer, facts: AlgebraicFacts) -> Written | None:
    """Both sides of the identity when they take at most WRITTEN_LINES lines."""
    if facts.products is None or facts.identity is None:
        return None
    printed = (*facts.products, *facts.derivatives, facts.identity)
    if lines_of(printed) > 2 * WRITTEN_LINES or any(map(is_omitted, printed)):
        return None
    if lines_of((*facts.products, facts.identity)) > WRITTEN_LINES:
        return None
    one = len(facts.derivatives) == 1
    return Written(
        compact=sum(len(write_polynomial(f)) for f in facts.products) <= 2 * INLINE,
        products=_numbered(printer, "product", facts.products),
        derivatives=_numbered(printer, "derivative", facts.derivatives),
        identity=printer.polynomial("identity", facts.identity),
        show_derivative=show(*facts.derivatives) if one else Latex("display"),
        show_identity=show(facts.identity),
    )


def _numbered(
    printer: Printer, name: str, values: Sequence[Polynomial]
) -> tuple[Latex, ...]:
    return tuple(
        printer.polynomial(f"{name}-{k}", value) for k, value in enumerate(values, 1)
    )


def is_by_hand(facts: AlgebraicFacts) -> bool:
    """Whether a reader multiplies the identity out without effort."""
    products = facts.products or ()
    digits = max(
        (len(write_integer(abs(c))) for q in products for c in q.numerators), default=0
    )
    return (
        facts.squarefree_degree <= BY_HAND_DEGREE
        and len(products) <= BY_HAND_BASES
        and digits <= BY_HAND_DIGITS
    )


def build_spot(printer: Printer, facts: AlgebraicFacts) -> Spot | None:
    """The values at the checker's point, where they fit a pocket calculator."""
    spot = facts.spot
    if spot is None or len(spot.bases) > FACTORS_LIMIT or not _is_small(facts, spot):
        return None
    many = len(spot.bases) > 1
    beta = "" if facts.beta == 1 and many else rf"{integer(facts.beta)}\cdot "
    total = signed_sum(spot.terms) if many else signed_factor(spot.terms[0])
    digits = max(len(write_integer(v)) for v in (*spot.bases, *spot.derivatives, *spot.terms))
    a = printer.value("spot-a", spot.a)
    return Spot(
        point=printer.value("spot-point", spot.point),
        a=Latex(f"$(${a}$)$") if spot.a < 0 and facts.degree > 1 else a,
        b=printer.value("spot-b", spot.b),
        product=_equals(
            beta + r"\certgenbreak\cdot ".join(signed_factor(v) for v in spot.bases)
        ),
        sum=_equals(f"{beta}({total})" if beta and many else f"{beta}{total}"),
        tabular=len(spot.bases) > SENTENCE_ROWS or digits > SENTENCE_DIGITS,
        rows=_rows(printer, spot),
        width=Latex(f"{max(4.0, 0.52 * digits + 1.2):.2f}em"),
    )


def _equals(text: str) -> Latex:
    """= text, on a new line where need be, but not for a few characters."""
    return Latex(f" = {text}" if len(text) <= SHORT else rf"\certgenbreak = {text}")


def _is_small(facts: AlgebraicFacts, spot: IdentitySpot) -> bool:
    both_sides = facts.degree * spot.a, facts.beta
    return fits(spot.b, *both_sides, *spot.bases, *spot.derivatives, *spot.terms)


def _rows(printer: Printer, spot: IdentitySpot) -> tuple[SpotRow, ...]:
    values = zip(spot.bases, spot.derivatives, spot.terms, strict=True)
    return tuple(
        SpotRow(
            index=integer(k),
            base=printer.value(f"spot-base-{k}", base),
            derivative=printer.value(f"spot-derivative-{k}", derivative),
            term=printer.value(f"spot-term-{k}", term),
        )
        for k, (base, derivative, term) in enumerate(values, 1)
    )
