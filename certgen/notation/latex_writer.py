r"""Exact objects and user text as LaTeX: pure ASCII, amsmath or less.

Formulas are inline mathematics that TeX may break at the macros of
LATEX_MACROS only: `\certgenbreak` before each + - = and product sign, and
`\certgendigits` after every five digits of long integers.  What is printed here
is read back by `certgen.notation`.
"""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Iterable
from fractions import Fraction

from certgen.claim import Letters, Power
from certgen.polynomial import Polynomial, write_integer

__all__ = [
    "LATEX_MACROS",
    "Latex",
    "equation",
    "escape",
    "fraction",
    "inline",
    "integer",
    "letter",
    "long_formula",
    "polynomial",
    "power_product",
    "rational",
    "wrap_source",
]

LATEX_MACROS = r"""\providecommand{\certgenbreak}{\allowbreak}
\providecommand{\certgendigits}{\mkern1mu\penalty50\relax}
"""
r"""Definitions that every document needs before our formulas.

The \relax ends the number of \penalty, which would take the digits that follow.
"""

LONG_DIGITS = 12
"""Longer integers get places to break."""

FRACTION_LENGTH = 60
"""A fraction is built up with \\frac when both sides have at most this length."""

TERMS_PER_PIECE = 50
"""A formula of more terms is closed and opened again after this many."""

LINE_LENGTH = 78


class Latex(str):
    """A string that is safe LaTeX; everything else must go through `escape`."""

    __slots__ = ()


# --------------------------------------------------------------------------
# formulas


def integer(n: int) -> Latex:
    """Return an integer, with places to break when it is long."""
    sign, digits = ("-", write_integer(-n)) if n < 0 else ("", write_integer(n))
    if len(digits) > LONG_DIGITS:
        groups = (digits[k : k + 5] for k in range(0, len(digits), 5))
        digits = r"\certgendigits ".join(groups)
    return Latex(sign + digits)


def rational(q: Fraction | int) -> Latex:
    r"""Return a rational number; \frac when it is short, (n/d) when it is long."""
    q = Fraction(q)
    if q.denominator == 1:
        return integer(q.numerator)
    sign = "-" if q < 0 else ""
    top, bottom = integer(abs(q.numerator)), integer(q.denominator)
    if max(len(top), len(bottom)) <= LONG_DIGITS:
        return Latex(rf"{sign}\frac{{{top}}}{{{bottom}}}")
    return Latex(f"{sign}({top}/{bottom})")


def letter(name: str) -> Latex:
    """Return a letter or the Greek letter of this name, safe before any letter."""
    return Latex(name if len(name) == 1 else f"\\{name} ")


def polynomial(p: Polynomial, variable: str) -> Latex:
    """Return a polynomial, terms by descending degree."""
    pieces: list[str] = []
    for k in range(p.degree, -1, -1):
        if p.numerators[k]:
            pieces.append(_term(p.coefficient(k), k, variable, not pieces))
    return Latex("".join(pieces) or "0")


def _term(c: Fraction, k: int, variable: str, first: bool) -> str:
    sign = "-" if c < 0 else "" if first else "+"
    if not first:
        sign = rf" \certgenbreak {sign} "
    power = "" if k == 0 else letter(variable) + ("" if k == 1 else f"^{{{k}}}")
    size = "" if abs(c) == 1 and power else rational(abs(c))
    return (sign + size + power).rstrip(" ")


def _factor(p: Polynomial, variable: str) -> str:
    """A polynomial as a factor: in parentheses when it has several terms."""
    text = polynomial(p, variable)
    return text if sum(1 for c in p.numerators if c) == 1 else f"({text})"


def _exponent(q: Fraction) -> str:
    if q == 1:
        return ""
    top = write_integer(q.numerator)
    return f"^{{{top}}}" if q.denominator == 1 else f"^{{{top}/{write_integer(q.denominator)}}}"


def power_product(powers: Iterable[Power], variable: str) -> Latex:
    """Return a product of powers side by side; 1 for the empty product."""
    pieces = []
    for power in powers:
        base, exponent = power.base, _exponent(power.exponent)
        bare = base.numerators == (0, 1) or (not exponent and _is_monomial(base))
        text = polynomial(base, variable) if bare else f"({polynomial(base, variable)})"
        pieces.append(text + exponent)
    return Latex(r" \certgenbreak ".join(pieces) or "1")


def _is_monomial(p: Polynomial) -> bool:
    return sum(1 for c in p.numerators if c) == 1


def fraction(num: Polynomial, den: Polynomial, variable: str) -> Latex:
    r"""Return num/den: \frac when both sides are short, else (num)/(den)."""
    top, bottom = polynomial(num, variable), polynomial(den, variable)
    if den.numerators == (1,) and den.denominator == 1:
        return top
    if max(len(_plain(top)), len(_plain(bottom))) <= FRACTION_LENGTH:
        return Latex(rf"\frac{{{_plain(top)}}}{{{_plain(bottom)}}}")
    return Latex(rf"({top}) \certgenbreak /({bottom})")


def _plain(formula: str) -> str:
    """A formula without places to break, as it can stand inside a fraction."""
    return formula.replace(r"\certgenbreak ", "").replace(r"\certgendigits ", "")


def equation(a: Polynomial, b: Polynomial, letters: Letters) -> Latex:
    """Return b*y' = a*y in the author's letters (y' = 0 for a = 0)."""
    function = letter(letters.function)
    left = _coefficient(b, letters.variable) + f"{function}'"
    right = "0" if a.is_zero else _coefficient(a, letters.variable) + function
    return Latex(rf"{left} \certgenbreak = {right}".rstrip(" "))


def _coefficient(p: Polynomial, variable: str) -> str:
    if p.denominator == 1 and p.numerators in ((1,), (-1,)):
        return "" if p.numerators == (1,) else "-"
    return _factor(p, variable) + r"\,"


def long_formula(formula: str) -> Latex:
    r"""Return `$...$`, closed and opened again after every 50 terms.

    A new piece begins at a \certgenbreak outside of all braces, and its sign
    keeps the space of a binary operator.
    """
    pieces: list[list[str]] = [[]]
    depth = breaks = 0
    for part in formula.split(r"\certgenbreak "):
        if pieces[-1] and depth == 0 and breaks >= TERMS_PER_PIECE:
            pieces.append([])
            breaks = 0
        pieces[-1].append(part)
        breaks += 1
        depth += part.count("{") - part.count("}")
    texts = [r"\certgenbreak ".join(parts).strip(" ") for parts in pieces]
    return Latex("\\certgenbreak\n".join(
        f"${text}$" if k == 0 or text[0] not in "+-=/" else f"${{}}{text}$"
        for k, text in enumerate(texts)))


def inline(parts: Iterable[Latex]) -> Latex:
    """Return one inline formula made of these parts, side by side."""
    return long_formula(" ".join(parts))


# --------------------------------------------------------------------------
# user text

# After these a {} follows, so that TeX sees no ligature and no optional argument.
_LIGATURES = "-'`!?,"

_ESCAPED = {
    "\\": r"\textbackslash{}",
    "{": r"\{",
    "}": r"\}",
    "$": r"\$",
    "&": r"\&",
    "#": r"\#",
    "%": r"\%",
    "_": r"\_",
    "^": r"\textasciicircum{}",
    "~": r"\textasciitilde{}",
    "<": r"\textless{}",
    ">": r"\textgreater{}",
    "|": r"\textbar{}",
    '"': r"{\ttfamily\char34 }",
    "[": "{[}",
    "]": "{]}",
    "*": "{*}",
    "\n": " ",
    "\t": " ",
    "\u00a0": "~",
    "\u00df": r"\ss{}",
    "\u00e6": r"\ae{}",
    "\u00c6": r"\AE{}",
    "\u0153": r"\oe{}",
    "\u0152": r"\OE{}",
    "\u00f8": r"\o{}",
    "\u00d8": r"\O{}",
    "\u0142": r"\l{}",
    "\u0141": r"\L{}",
    "\u0131": r"\i{}",
    **{c: c + "{}" for c in _LIGATURES},
}

# Combining characters that every font encoding of LaTeX has as an accent.
_ACCENTS = {
    "\u0300": "`", "\u0301": "'", "\u0302": "^", "\u0303": "~", "\u0304": "=",
    "\u0306": "u", "\u0307": ".", "\u0308": '"', "\u030a": "r", "\u030b": "H",
    "\u030c": "v", "\u0327": "c",
}  # fmt: skip


def escape(text: str) -> Latex:
    """Return user text as LaTeX that prints it, character by character.

    The result is pure ASCII: letters of Latin-1 and Latin Extended-A become
    accents, every other character that is not ASCII is shown as [U+XXXX].
    """
    return Latex("".join(map(_escape, unicodedata.normalize("NFC", text))))


def _escape(c: str) -> str:
    if c in _ESCAPED:
        return _ESCAPED[c]
    if " " <= c <= "~":
        return c
    parts = unicodedata.normalize("NFD", c)
    base, mark = parts[0], parts[1:]
    if ord(c) < 0x180 and base.isascii() and base.isalpha() and mark in _ACCENTS:
        return f"\\{_ACCENTS[mark]}{{{_dotless(base, mark)}}}"
    return f"{{[}}U+{ord(c):04X}{{]}}"


def _dotless(base: str, mark: str) -> str:
    return f"\\{base}" if base in "ij" and mark != "\u0327" else base


# --------------------------------------------------------------------------
# source lines

_COMMENT = re.compile(r"(?<!\\)(?:\\\\)*(%)")
_DOLLAR = re.compile(r"(?<!\\)(?:\\\\)*(\$)")
_JOINT = re.compile(r"(?<=[A-Za-z0-9)\]}])(?=[A-Za-z0-9(])")
_CONTROL_WORD = re.compile(r"\\[A-Za-z]*\Z")


def wrap_source(text: str) -> str:
    """Wrap TeX source at 78 columns without changing what TeX reads.

    Breaks stand at spaces, before + - = inside `$...$`, and for lack of both
    between two letters or digits outside of control words, with a % that hides
    the end of the line.  Comments are left alone.
    """
    lines: list[str] = []
    inside = False
    for line in text.split("\n"):
        comment = _COMMENT.search(line)
        code = line if comment is None else line[: comment.start(1)]
        inside = _wrap_line(line, len(code), inside, lines)
    return "\n".join(lines)


def _wrap_line(line: str, code: int, inside: bool, lines: list[str]) -> bool:
    """Append the wrapped line; `code` is where its comment begins."""
    start = 0
    while len(line) - start > LINE_LENGTH:
        window = line[start : min(start + LINE_LENGTH + 1, code)]
        end, skip, mark = _break(window, inside)
        if not end or not line[start + end : code].strip(" "):
            break
        lines.append(window[:end] + mark)
        inside ^= _is_odd(window[:end])
        start += end + skip
    lines.append(line[start:])
    return inside ^ _is_odd(line[start:code])


def _is_odd(code: str) -> bool:
    """Whether it opens or closes mathematics on balance."""
    return len(_DOLLAR.findall(code)) % 2 == 1


def _break(window: str, inside: bool) -> tuple[int, int, str]:
    """Where the line ends, how many characters to skip, and what to add."""
    first = len(window) - len(window.lstrip(" ")) + 1
    for k in range(len(window) - 1, first, -1):
        if window[k] == " " and window[k - 1] not in "\\ ":
            return k, 1, ""
        sign = window[k] in "+-=" and window[k - 1] not in "\\{^_"
        if sign and inside ^ _is_odd(window[:k]):
            return k, 0, ""
    for k in range(min(LINE_LENGTH - 1, len(window) - 1), first, -1):
        if _JOINT.match(window, k) and not _CONTROL_WORD.search(window[:k]):
            return k, 0, "%"
    return 0, 0, ""
