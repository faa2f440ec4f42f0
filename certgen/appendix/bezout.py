"""Bezout lines: two polynomials have no common factor modulo a prime."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from certgen.appendix.formulas import LINE, Printer, show
from certgen.appendix.values import value_at
from certgen.checker.facts import Bezout
from certgen.errors import DefectError
from certgen.notation.latex_writer import Latex, integer
from certgen.polynomial import Polynomial, write_polynomial

__all__ = ["BezoutShown", "build_bezout"]

HAND_PRIME = 97
HAND_DEGREE = 6
SPOT_PRIME = 10**4


@dataclass(frozen=True, slots=True, kw_only=True)
class BezoutShown:
    """left*f + right*g = 1 modulo p: the `line`, or its values at one point.

    Where `line` is None it is too long to print; where `values` is None the prime
    is too large for a spot check.
    """

    how: str
    line: Latex | None
    show: Latex
    point: Latex
    values: Latex | None

    @property
    def has_numbers(self) -> bool:
        """Whether anything is printed that a reader can recompute."""
        return self.line is not None or self.values is not None


def build_bezout(
    printer: Printer,
    name: str,
    value: Bezout | None,
    names: tuple[str, str],
    factors: tuple[Polynomial, Polynomial],
) -> BezoutShown | None:
    """Return what is printed of a line, None where the checker gives none.

    `names` are the symbols of the two polynomials `factors`, over the integers.
    """
    if value is None:
        return None
    sides = (value.left, value.right)
    short = sum(len(write_polynomial(side)) for side in sides) <= 2 * LINE - 20
    point = _point(value, factors)
    numbers = _values(value, factors, point)
    hand = short and value.p <= HAND_PRIME and factors[0].degree <= HAND_DEGREE
    return BezoutShown(
        how="by hand" if hand else "by machine",
        line=_line(printer, name, sides, names) if short else None,
        show=show(*sides),
        point=printer.value(f"{name}-point", point),
        values=_sum(numbers) if value.p <= SPOT_PRIME else None,
    )


def _line(
    printer: Printer, name: str, sides: Sequence[Polynomial], names: Sequence[str]
) -> Latex:
    terms = [
        _term(printer.polynomial(f"{name}-{place}", side), side, symbol)
        for place, side, symbol in zip(("left", "right"), sides, names, strict=True)
        if not side.is_zero
    ]
    plus = "${}+{}$" if sides[1].numerators == (1,) else r"\certgenbreak ${}+{}$"
    return Latex(plus.join(terms) + r"${}\equiv 1$")


def _term(text: str, side: Polynomial, symbol: str) -> str:
    if side.numerators == (1,):
        return f"${symbol}$"
    if sum(1 for c in side.numerators if c) == 1:
        return rf"{text}$\,{symbol}$"
    return rf"$(${text}$)\,{symbol}$"


def _point(value: Bezout, factors: tuple[Polynomial, Polynomial]) -> int:
    """A point where no number is 0, if there is one among the first."""
    for point in range(1, min(value.p, 50)):
        if all(all(pair) for pair in _values(value, factors, point)):
            return point
    return 1


def _values(
    value: Bezout, factors: tuple[Polynomial, Polynomial], point: int
) -> list[tuple[int, int]]:
    pairs = []
    for side, factor in zip((value.left, value.right), factors, strict=True):
        numbers = value_at(side, point), value_at(factor, point)
        pairs.append((numbers[0].numerator % value.p, numbers[1].numerator % value.p))
    if (sum(s * f for s, f in pairs) - 1) % value.p:
        raise DefectError("a Bezout line fails")
    return pairs


def _sum(pairs: Sequence[tuple[int, int]]) -> Latex:
    terms = [rf"{integer(s)}\cdot {integer(f)}" for s, f in pairs]
    total = integer(sum(s * f for s, f in pairs))
    end = "" if total == "1" else r" \certgenbreak \equiv 1"
    return Latex(r" \certgenbreak + ".join(terms) + rf" \certgenbreak = {total}{end}")
