"""The Eisenstein constant: why the power series has integer coefficients."""

from __future__ import annotations

from dataclasses import dataclass
from math import prod

from certgen.appendix.formulas import Printer, in_product, lines_of
from certgen.appendix.symbols import Symbols
from certgen.appendix.values import fits, quotient_of, shifted, value_at
from certgen.certificate import AlgebraicSolution, Eisenstein
from certgen.claim import Power
from certgen.notation.latex_writer import Latex, integer
from certgen.polynomial import Polynomial

__all__ = ["Expansion", "Integrality", "build_integrality"]

EXPANDED_DEGREE = 40
EXPANDED_LINES = 4
SMALL = 1000


@dataclass(frozen=True, slots=True, kw_only=True)
class Expansion:
    """v_i(x0 + L*t) = value * (1 + scale * series), the series a polynomial in t.

    Where the value is not 1, `value` ends with a parenthesis that `close` closes.
    """

    index: Latex
    value: Latex
    scale: Latex
    series: Latex
    close: Latex


@dataclass(frozen=True, slots=True, kw_only=True)
class Integrality:
    """The constant L at x0; `expansions` is empty where they are long."""

    point: Latex
    constant: Latex
    shift: Latex
    expansions: tuple[Expansion, ...]


def build_integrality(
    printer: Printer, sym: Symbols, proof: AlgebraicSolution
) -> Integrality | None:
    """Return the constant with the expansions that prove it, None without one."""
    value = proof.eisenstein
    if value is None:
        return None
    shift = f"{integer(value.point)} + " if value.point else ""
    return Integrality(
        point=integer(value.point),
        constant=printer.value("eisenstein-constant", value.constant),
        shift=Latex(f"{shift}{sym.L}\\,{sym.t}"),
        expansions=_expansions(printer, sym, proof.solution, value),
    )


def _expansions(
    printer: Printer, sym: Symbols, solution: tuple[Power, ...], value: Eisenstein
) -> tuple[Expansion, ...]:
    denominators = [power.exponent.denominator for power in solution]
    small = fits(value.constant, value.point) and max(denominators, default=1) <= SMALL
    if not small or sum(power.base.degree for power in solution) > EXPANDED_DEGREE:
        return ()
    parts = [_parts(power, value) for power in solution]
    shown = lines_of(series for _, _, series in parts) <= EXPANDED_LINES and all(
        fits(*series.numerators) for _, _, series in parts
    )
    if not shown or not fits(*(number for part in parts for number in part[:2])):
        return ()
    return tuple(
        Expansion(
            index=integer(k),
            value=_value(start),
            scale=_scale(scale, series),
            series=_series(printer.polynomial(f"expansion-{k}", series, str(sym.t)),
                           scale, series),
            close=Latex("" if start == 1 else "$)$"),
        )
        for k, (start, scale, series) in enumerate(parts, 1)
    )


def _value(start: int) -> Latex:
    if start in (1, -1):
        return Latex("" if start == 1 else "-(")
    return Latex(rf"{integer(start)}\certgenbreak (")


def _scale(scale: int, series: Polynomial) -> Latex:
    """The scale as a factor, with a dot before a number."""
    if scale == 1:
        return Latex("")
    dot = r" \cdot " if _is_plain(series) and series.numerators[-1] != 1 else ""
    return Latex(f"{integer(scale)}{dot}")


def _series(text: Latex, scale: int, series: Polynomial) -> Latex:
    """The series after `1 + scale`; a sum after the scale 1 needs no parentheses."""
    if scale == 1 and series.numerators[-1] > 0:
        return text
    return in_product(text, series)


def _is_plain(series: Polynomial) -> bool:
    return sum(1 for c in series.numerators if c) == 1 and series.numerators[-1] > 0


def _parts(power: Power, value: Eisenstein) -> tuple[int, int, Polynomial]:
    """v(x0), the denominator d of the exponent times its primes, and the series."""
    start = value_at(power.base, value.point)
    d = power.exponent.denominator
    scale = d * prod(q for q in range(2, d + 1) if d % q == 0 and _is_prime(q))
    moved = shifted(power.base, value.point, value.constant)
    series = [quotient_of(c, start * scale) for c in moved.coefficients[1:]]
    return start.numerator, scale, Polynomial.from_coefficients([0, *series])


def _is_prime(q: int) -> bool:
    return all(q % k for k in range(2, int(q**0.5) + 1))
