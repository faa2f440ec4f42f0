"""Plain notation and LaTeX as one flat list of symbols.

Both tokenisers stop at the first thing that they cannot read and leave an
error symbol there, so that the parser reports whatever comes first in the text.
Limits (length, digits, depth, number of symbols) are tested here, before
anything is parsed.
"""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass, field
from enum import Enum, auto
from typing import NamedTuple

from certgen.claim import GREEK_LETTERS
from certgen.errors import ExpressionError
from certgen.notation.source import DEPTH_LIMIT, TOKENS_LIMIT, Source, describe_character

__all__ = ["Kind", "Token", "TokenList", "is_latex", "plain_tokens", "tokenise"]


class Kind(Enum):
    """The kinds of symbols."""

    NUMBER = auto()
    NAME = auto()
    OPERATOR = auto()  # + - * / ^ =
    OPEN = auto()
    CLOSE = auto()
    PRIME = auto()
    FRACTION = auto()  # \frac, \dfrac, \tfrac
    ROOT = auto()  # sqrt, \sqrt
    DERIVATIVE = auto()  # dy/dx, or d/dx and D in front of the function
    ERROR = auto()
    END = auto()


class Token(NamedTuple):
    """One symbol, text[start:end] of the source.

    `value` is the letter, the digits, the operator or the bracket; `word` the
    whole run of letters in which a letter of plain notation stands.
    """

    kind: Kind
    value: str
    start: int
    end: int
    word: str = ""
    error: ExpressionError | None = None

    def is_operator(self, *values: str) -> bool:
        return self.kind is Kind.OPERATOR and self.value in values


CLOSING = {"(": ")", "[": "]", "{": "}", "\\left(": "\\right)", "\\left[": "\\right]"}


@dataclass(slots=True)
class TokenList:
    """The symbols read so far; `add` keeps the limits."""

    source: Source
    latex: bool
    tokens: list[Token] = field(default_factory=list)
    depth: int = 0

    def add(self, kind: Kind, value: str, start: int, end: int, word: str = "") -> None:
        if len(self.tokens) >= TOKENS_LIMIT:
            raise self.source.limit(
                start, f"more than {TOKENS_LIMIT} symbols; this is the limit"
            )
        if kind is Kind.OPEN:
            self.depth += 1
            if self.depth > DEPTH_LIMIT:
                raise self.source.limit(
                    start, f"nested more than {DEPTH_LIMIT} deep; this is the limit"
                )
        elif kind is Kind.CLOSE:
            self.depth -= 1
        elif value in ("+", "-") and self.tokens and self.tokens[-1].is_operator("+", "-"):
            self.fail(start, end, "a repeated sign",
                      "write one sign, or put the second in parentheses")
            return
        self.tokens.append(Token(kind, value, start, end, word))

    def fail(self, start: int, end: int, message: str, hint: str | None = None) -> None:
        """Put an error symbol here."""
        error = self.source.error(start, end, message, hint)
        self.tokens.append(Token(Kind.ERROR, "", start, end, error=error))

    def character(self, start: int) -> None:
        """Put the error of an unexpected character here."""
        self.fail(start, start + 1, *describe_character(self.source.text[start]))

    @property
    def failed(self) -> bool:
        return bool(self.tokens) and self.tokens[-1].kind is Kind.ERROR

    def finish(self) -> list[Token]:
        end = len(self.source.text)
        self.tokens.append(Token(Kind.END, "", end, end))
        return self.tokens


SIMPLE: dict[str, Kind] = {
    **dict.fromkeys("+-*/^=", Kind.OPERATOR),
    **dict.fromkeys("([", Kind.OPEN),
    **dict.fromkeys(")]", Kind.CLOSE),
    "'": Kind.PRIME,
}


def is_digit(c: str) -> bool:
    """Whether this is one ASCII digit."""
    return "0" <= c <= "9" and len(c) == 1


def is_latex(text: str) -> bool:
    """Whether the text is read as LaTeX: it contains a backslash, { } or $."""
    return any(c in text for c in "\\{}$")


def tokenise(source: Source, *, latex: bool | None = None) -> list[Token]:
    """Return the symbols of a text, ending in one of kind END."""
    if latex is None:
        latex = is_latex(source.text)
    if not latex:
        return plain_tokens(source)
    from certgen.notation.latex_tokens import latex_tokens  # pylatexenc: on demand

    return latex_tokens(source)


# --------------------------------------------------------------------------
# plain notation

_PIECE = re.compile(
    r"(?P<space>[ \t\r\n]+)|(?P<number>[0-9]+)|(?P<word>[A-Za-z]+)|(?P<power>\*\*)"
    r"|(?P<simple>[-+*/^=()\[\]'])"
)


def plain_tokens(source: Source) -> list[Token]:
    """The symbols of a text in plain notation."""
    out = TokenList(source, latex=False)
    position = 0
    while position < len(source.text) and not out.failed:
        match = _PIECE.match(source.text, position)
        if match is None:
            _unexpected(out, position)
            break
        _READERS[str(match.lastgroup)](out, match.start(), match.end())
        position = match.end()
    return out.finish()


def _unexpected(out: TokenList, start: int) -> None:
    c = out.source.text[start]
    if c == ".":
        read_point(out, start)
    elif c == "_":
        read_underscore(out, start)
    else:
        out.character(start)


def read_point(out: TokenList, start: int) -> None:
    """A '.' is never read: not as a decimal point, not as a full stop."""
    before, after = out.source.text[:start][-1:], out.source.text[start + 1 : start + 2]
    if is_digit(before) or is_digit(after):
        out.fail(start, start + 1, "a decimal point is not read",
                 "write an exact fraction, such as 1/10 for 0.1")
    else:
        out.fail(start, start + 1, "unexpected character '.'",
                 "only the formula itself is read, without a full stop")


def read_underscore(out: TokenList, start: int) -> None:
    before = out.source.text[:start][-1:]
    hint = "write the digits without separators" if is_digit(before) else (
        "subscripts are not supported: a variable or function is one letter")
    out.fail(start, start + 1, "unexpected character '_'", hint)


def _read_space(out: TokenList, start: int, end: int) -> None:
    pass


def read_number(out: TokenList, start: int, end: int) -> None:
    """A run of digits; `1e5` is refused here."""
    out.source.check_digits(start, end - start)
    text = out.source.text
    out.add(Kind.NUMBER, text[start:end], start, end)
    if text[end : end + 1] in ("e", "E") and is_digit(text[end + 1 : end + 2]):
        out.fail(end, end + 2, f"'{text[end]}' after a number: scientific notation "
                 "is not read", "write 10^5 for 1e5")


def _read_word(out: TokenList, start: int, end: int) -> None:
    text = out.source.text
    word = text[start:end]
    if is_digit(text[end : end + 1]):
        stop = end
        while is_digit(text[stop : stop + 1]):
            stop += 1
        out.fail(start, stop, f"unknown name '{text[start : min(stop, start + 40)]}'",
                 "a name is one letter; write a product with * and a power with ^")
    elif word == "sqrt":
        out.add(Kind.ROOT, word, start, end)
    elif word == "pi" or word in GREEK_LETTERS:
        out.add(Kind.NAME, word, start, end, word)
    elif word[0] == "d" and word[1:] in GREEK_LETTERS:
        out.add(Kind.NAME, "d", start, start + 1, word)
        out.add(Kind.NAME, word[1:], start + 1, end, word)
    else:
        _read_letters(out, start, word)


def _read_letters(out: TokenList, start: int, word: str) -> None:
    """Letters side by side: dy, dx, xy'; the parser refuses unknown ones by word."""
    if len(word) > 40:
        out.fail(start, start + len(word), "unknown name", "a name is one letter")
        return
    for k, letter in enumerate(word):
        out.add(Kind.NAME, letter, start + k, start + k + 1, word)


def _read_power(out: TokenList, start: int, end: int) -> None:
    out.add(Kind.OPERATOR, "^", start, end)


def _read_simple(out: TokenList, start: int, end: int) -> None:
    c = out.source.text[start]
    out.add(SIMPLE[c], c, start, end)


_READERS: dict[str, Callable[[TokenList, int, int], None]] = {
    "space": _read_space,
    "number": read_number,
    "word": _read_word,
    "power": _read_power,
    "simple": _read_simple,
}
