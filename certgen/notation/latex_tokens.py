"""LaTeX as a flat list of symbols; pylatexenc says what a macro is.

Only the macros named here are read; everything else is refused with its place.
Arguments of macros are taken by the parser, which checks all brackets.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

from pylatexenc.latexwalker import LatexWalker, LatexWalkerError
from pylatexenc.macrospec import LatexContextDb

from certgen.claim import GREEK_LETTERS
from certgen.notation.source import Source
from certgen.notation.tokens import SIMPLE, Kind, Token, TokenList, read_point, read_underscore

__all__ = ["latex_tokens"]

_SPACES = frozenset(
    [",", ";", ":", "!", ">", " ", "\n", "quad", "qquad", "thinspace", "displaystyle",
     "textstyle", "allowbreak", "certgenbreak"]
)
_TIMES = frozenset(["cdot", "times", "ast"])
_FRACTIONS = frozenset(["frac", "dfrac", "tfrac"])
_HINTS = {
    "over": "write \\frac{numerator}{denominator}",
    "atop": "write \\frac{numerator}{denominator}",
    "div": "write \\frac{numerator}{denominator}",
    "dot": "write y'",
    "ddot": "an equation of first order has y' and y",
    "partial": "write \\frac{dy}{dx} or y'",
    "prime": "write y' or y^{\\prime}",
    "big": "write \\left( and \\right)",
    "bigl": "write \\left( and \\right)",
    "bigr": "write \\left( and \\right)",
    "Big": "write \\left( and \\right)",
    "\\": "give one equation, without line breaks or alignment",
    "mathrm": "only \\mathrm{d} and \\mathrm{D} are read",
    "operatorname": "only \\operatorname{d} and \\operatorname{D} are read",
}
_SUPPORTED = (
    "read are \\frac, \\sqrt, \\cdot, \\times, \\left( \\right), Greek letters and spaces"
)
_CLOSES = {"$": "$", "$$": "$$", "\\(": "\\)", "\\[": "\\]"}

_SPACE = re.compile(r"[ \t\r\n~]+")
_NUMBER = re.compile(r"[0-9]+(?:\\certgendigits\s*[0-9]+)*(?![0-9])")
_PRIMES = re.compile(r"\^\s*(?:\{\s*((?:\\prime\s*)+)\}|(\\prime)(?![A-Za-z]))")
_UPRIGHT = re.compile(r"\\(?:mathrm|operatorname)\s*\{\s*([dD])\s*\}")
_EMPTY = re.compile(r"\{\}(?=\s*[-+*/=])")
_SCIENTIFIC = re.compile(r"[eE](?=[0-9])")


@dataclass(slots=True)
class _Mathematics:
    """Which math delimiter is open, and whether there was one."""

    opened: str = ""
    seen: bool = False
    braces: int = 0


def latex_tokens(source: Source) -> list[Token]:
    """The symbols of a LaTeX formula, with or without $ $, \\( \\) or \\[ \\]."""
    out, state = TokenList(source, latex=True), _Mathematics()
    walker = LatexWalker(
        source.text, latex_context=LatexContextDb(), tolerant_parsing=False
    )
    parsing_state = walker.make_parsing_state()
    position = 0
    while position < len(source.text) and not out.failed:
        step = _read_character(out, state, position)
        if step is None:
            try:
                token = walker.get_token(position, parsing_state=parsing_state)
            except LatexWalkerError:
                out.fail(position, position + 1, "this is not LaTeX")
                break
            step = _read_token(out, state, token.tok, token.arg, token.pos, token.len)
        position = step
    if state.opened and not out.failed:
        end = len(source.text)
        out.fail(end, end, f"'{state.opened}' is never closed")
    return out.finish()


def _inside(out: TokenList, state: _Mathematics, start: int) -> bool:
    if state.seen and not state.opened:
        out.fail(start, start + 1, "text outside of the formula",
                 "give the formula alone")
        return False
    return True


def _read_character(out: TokenList, state: _Mathematics, start: int) -> int | None:
    """Read what needs no knowledge of LaTeX; return where it ends, else None."""
    text = out.source.text
    c = text[start]
    if c in " \t\r\n~":
        match = _SPACE.match(text, start)
        return match.end() if match else start + 1
    if c in "\\$%":
        upright = _UPRIGHT.match(text, start)
        if upright and _inside(out, state, start):
            out.add(Kind.NAME, upright[1], start, upright.end(), upright[1])
            return upright.end()
        return None
    if not _inside(out, state, start):
        return start
    if c.isascii() and c.isalpha():
        out.add(Kind.NAME, c, start, start + 1, c)
        return start + 1
    if c.isascii() and c.isdigit():
        return _read_number(out, start)
    return _read_sign(out, state, start, c)


def _read_number(out: TokenList, start: int) -> int:
    text = out.source.text
    match = _NUMBER.match(text, start)
    end = match.end() if match else start + 1
    digits = re.sub(r"[^0-9]+", "", re.sub(r"\\certgendigits", "", text[start:end]))
    out.source.check_digits(start, len(digits))
    out.add(Kind.NUMBER, digits, start, end)
    if _SCIENTIFIC.match(text, end):
        out.fail(end, end + 2, f"'{text[end]}' after a number: scientific notation "
                 "is not read", "write 10^5 for 1e5")
    return end


def _read_sign(out: TokenList, state: _Mathematics, start: int, c: str) -> int:
    text = out.source.text
    end = start + 1
    if c == "^" and (primes := _PRIMES.match(text, start)):
        for _ in range((primes[1] or primes[2]).count("\\prime")):
            out.add(Kind.PRIME, "'", start, primes.end())
        end = primes.end()
    elif c == "{" and (empty := _EMPTY.match(text, start)):
        end = empty.end()
    elif c in "{}":
        state.braces += 1 if c == "{" else -1
        out.add(Kind.OPEN if c == "{" else Kind.CLOSE, c, start, end)
    elif c in SIMPLE:
        out.add(SIMPLE[c], c, start, end)
    elif c == ".":
        read_point(out, start)
    elif c == "_":
        read_underscore(out, start)
    elif c == "&":
        out.fail(start, end, "unexpected character '&'",
                 "give one equation, without line breaks or alignment")
    else:
        out.character(start)
    return end


def _read_token(
    out: TokenList, state: _Mathematics, kind: str, arg: str, start: int, length: int
) -> int:
    """Read a macro, a comment or a math delimiter; return where it ends."""
    end = start + length
    if kind == "comment":
        return end
    if kind.startswith("mathmode"):
        _read_delimiter(out, state, arg, start, end)
    elif kind == "macro":
        if arg in _SPACES:
            return end
        if _inside(out, state, start):
            return _read_macro(out, arg, start, start + 1 + len(arg))
    else:
        out.fail(start, end, "environments are not read", "give the formula alone")
    return end


def _read_delimiter(
    out: TokenList, state: _Mathematics, arg: str, start: int, end: int
) -> None:
    misplaced = (
        _CLOSES[state.opened] != arg if state.opened
        else arg not in _CLOSES or (bool(out.tokens) and not state.seen)
    )
    if misplaced or state.braces:
        out.fail(start, end, f"'{arg}' is misplaced: mathematics begins or ends here",
                 "give one formula, such as $y' = x y$")
    state.opened = "" if state.opened else arg
    state.seen = True


def _read_macro(out: TokenList, name: str, start: int, end: int) -> int:
    if name in _TIMES:
        out.add(Kind.OPERATOR, "*", start, end)
    elif name in _FRACTIONS:
        out.add(Kind.FRACTION, "\\" + name, start, end)
    elif name == "sqrt":
        out.add(Kind.ROOT, "\\sqrt", start, end)
    elif name == "pi" or name in GREEK_LETTERS:
        out.add(Kind.NAME, name, start, end, "\\" + name)
    elif name in ("left", "right"):
        return _read_paired(out, name, start, end)
    else:
        out.fail(start, end, f"the macro \\{name} is not supported",
                 _HINTS.get(name, _SUPPORTED))
    return end


def _read_paired(out: TokenList, name: str, start: int, end: int) -> int:
    r"""Read the delimiter of \left or \right: ( [ and ) ]."""
    text = out.source.text
    while text[end : end + 1].isspace():
        end += 1
    delimiter = text[end : end + 1]
    if delimiter and delimiter in ("([" if name == "left" else ")]"):
        kind = Kind.OPEN if name == "left" else Kind.CLOSE
        out.add(kind, f"\\{name}{delimiter}", start, end + 1)
    else:
        out.fail(start, end + 1, f"\\{name} is followed by an unsupported delimiter",
                 "write \\left( and \\right)")
    return end + 1
