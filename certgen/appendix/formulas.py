"""Pieces of LaTeX that the context builders share."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction

from certgen.claim import Power
from certgen.notation.latex_writer import (
    Latex,
    escape,
    integer,
    polynomial,
    power_product,
)
from certgen.polynomial import Polynomial, write_integer, write_polynomial

__all__ = [
    "EXPONENT_DIGITS",
    "FACTORS_LIMIT",
    "INLINE",
    "LINE",
    "TERMS_LIMIT",
    "TEXT_LIMIT",
    "WRITTEN_LINES",
    "Printer",
    "cell_width",
    "in_product",
    "is_long",
    "is_long_exponent",
    "is_omitted",
    "join_numbers",
    "lines_of",
    "listing",
    "prose",
    "show",
    "signed_factor",
    "signed_sum",
    "symbolic_product",
    "typewriter",
]

TERMS_LIMIT = 400
"""A polynomial with more terms is not printed; it stays in the stored file."""

TEXT_LIMIT = 20_000
"""A formula whose text is longer than this many characters is not printed."""

FACTORS_LIMIT = 60
"""More bases or factors than this are not listed one by one."""

WRITTEN_LINES = 12
"""Identities are written out when they take at most this many display lines."""

LINE = 60
"""Characters of strict notation that make about one display line."""

EXPONENT_DIGITS = 20
"""An exponent with more digits cannot stand as one: TeX breaks no superscript."""

INLINE = 36
"""Formulas stand in the sentence up to this many characters of strict notation."""

_SHORT_END = re.compile(r" ?\\certgenbreak (?=[+-] [0-9a-z]{1,3}$)")
_BREAK = r"\certgenhere "


def is_omitted(value: Polynomial) -> bool:
    """Whether `value` is beyond the size that an appendix prints."""
    terms = sum(1 for c in value.numerators if c)
    return terms > TERMS_LIMIT or len(write_polynomial(value)) > TEXT_LIMIT


def lines_of(values: Iterable[Polynomial]) -> int:
    """About how many display lines these polynomials take, each on its own line."""
    return sum(1 + len(write_polynomial(value)) // LINE for value in values)


@dataclass(frozen=True, slots=True)
class Printer:
    """Prints polynomials in one letter; what is too long refers to `file`."""

    letter: str
    file: str

    def polynomial(self, name: str, value: Polynomial, letter: str | None = None) -> Latex:
        """Return the tagged formula, or its size when it is beyond the limits."""
        if is_omitted(value):
            return self._omitted(value)
        return _tag(name, _keep_end(polynomial(value, letter or self.letter)))

    def power(self, name: str, base: Polynomial, exponent: int) -> Latex:
        """Return base^exponent as one tagged formula, or the size of the base."""
        if is_omitted(base):
            return Latex(f"{self._omitted(base)}, to the power ${integer(exponent)}$")
        return _tag(name, power_product([Power(base=base, exponent=Fraction(exponent))],
                                        self.letter))

    def value(self, name: str, value: Fraction | int) -> Latex:
        """Return a tagged rational number with a slash, for running text."""
        return _tag(name, _inline(Fraction(value)))

    def product(self, powers: Sequence[Power]) -> Latex | None:
        """Return a product of powers written out, or None when that is long."""
        text = sum(len(write_polynomial(power.base)) for power in powers)
        if text > 5 * LINE or any(is_omitted(power.base) for power in powers):
            return None
        if any(is_long_exponent(power.exponent) for power in powers):
            return None
        return Latex(f"${power_product(tuple(powers), self.letter)}$")

    def _omitted(self, value: Polynomial) -> Latex:
        terms = sum(1 for c in value.numerators if c)
        largest = max((abs(c) for c in value.numerators), default=0)
        digits = max(len(write_integer(largest)), len(write_integer(value.denominator)))
        return Latex(
            rf"\certgenomitted{{{value.degree}}}{{{terms}}}{{{digits}}}"
            f"{{{typewriter(self.file)}}}"
        )


def show(*values: Polynomial) -> Latex:
    r"""Return `inline` or `display`: the macro (after \\certgen) for these formulas."""
    return Latex("display" if is_long(*values) else "inline")


def is_long(*values: Polynomial) -> bool:
    """Whether these formulas are too long to stand in a sentence."""
    return sum(len(write_polynomial(value)) for value in values) > INLINE


def cell_width(texts: Iterable[str], least: float) -> float:
    """About how many em the widest of these formulas in strict notation takes."""
    return max(least, 1 + 0.5 * max((len(text) for text in texts), default=0))


def listing(items: Sequence[str]) -> Latex:
    """Return `A`, `A and B`, or `A, B and C`."""
    if len(items) < 2:
        return Latex("".join(items))
    return Latex(", ".join(items[:-1]) + " and " + items[-1])


def in_product(text: Latex, value: Polynomial) -> Latex:
    """Return the printed `value` as a factor: sums and negative ones in parentheses."""
    plain = sum(1 for c in value.numerators if c) == 1 and value.numerators[-1] > 0
    return text if plain else Latex(f"$(${text}$)$")


def _keep_end(text: Latex) -> Latex:
    """Without the break before a last short term, which would stand alone on a line."""
    return Latex(_SHORT_END.sub(" ", text))


def _tag(name: str, content: str) -> Latex:
    return Latex(rf"\certgenformula{{{name}}}{{{content}}}")


def signed_factor(value: int) -> Latex:
    """Return an integer as a factor in a product: negative ones in parentheses."""
    return Latex(integer(value) if value >= 0 else f"({integer(value)})")


def signed_sum(values: Sequence[int]) -> Latex:
    """Return the sum of integers as written, unevaluated."""
    pieces = [str(integer(values[0]))]
    for value in values[1:]:
        sign = "-" if value < 0 else "+"
        pieces.append(rf"\certgenbreak {sign}{integer(abs(value))}")
    return Latex("".join(pieces))


def join_numbers(values: Sequence[int]) -> Latex:
    """Return `$2$, $3$ and $5$`."""
    return listing([f"${integer(value)}$" for value in values])


def is_long_exponent(value: Fraction) -> bool:
    """Whether `value` is too long for a superscript."""
    return len(_inline(value)) > EXPONENT_DIGITS


def symbolic_product(symbol: str, exponents: Sequence[Fraction], name: str) -> Latex:
    """Return symbol_1^e_1 symbol_2^e_2 ..., without a factor where e is 0.

    A long exponent is called by its `name`, with the index for `_i` in it.
    """
    one = len(exponents) == 1
    pieces = []
    for k, exponent in enumerate(exponents, 1):
        if exponent:
            subscript = "" if one else f"_{{{k}}}"
            long = is_long_exponent(exponent)
            text = name.replace("_i", subscript) if long else _inline(exponent)
            power = "" if exponent == 1 else f"^{{{text}}}"
            pieces.append(f"{symbol}{subscript}{power}")
    return Latex(r"\,\certgenbreak ".join(pieces) or "1")


def _inline(value: Fraction) -> str:
    """n/d on one line."""
    text = str(integer(value.numerator))
    return text if value.denominator == 1 else f"{text}/{integer(value.denominator)}"


# --------------------------------------------------------------------------
# text


_TOKEN = re.compile(r"(?:\\?[A-Za-z0-9.]+|.)[)\]}]*")


def _pieces(word: str, size: int) -> list[str]:
    return [word[k : k + size] for k in range(0, len(word), size)]


def typewriter(text: str) -> Latex:
    """Return text in typewriter type, breakable between words, names and signs."""
    words = []
    for word in text.split():
        tokens = [piece for token in _TOKEN.findall(word) for piece in _pieces(token, 12)]
        words.append(_BREAK.join(_in_typewriter(token) for token in tokens))
    return Latex(r"\texttt{" + " ".join(words) + "}")


def _in_typewriter(text: str) -> str:
    """Escaped; the old font encoding has these signs in typewriter type only by number."""
    return "".join(rf"\char{ord(c)}{{}}" if c in "\\{}<>|" else escape(c) for c in text)


def prose(text: str) -> Latex:
    """Return the author's text, escaped, with places to break very long words."""
    words = []
    for word in re.split(r"\s+", text.strip()):
        size = 8 if len(word) > 16 else len(word) or 1
        words.append(_BREAK.join(escape(piece) for piece in _pieces(word, size)))
    return Latex(" ".join(words))
