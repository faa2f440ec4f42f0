"""The text that is read, the places in it, and the limits of reading."""

from __future__ import annotations

import re
import unicodedata
from dataclasses import dataclass

from certgen.errors import ExpressionError, LimitError
from certgen.polynomial import DIGITS_LIMIT

__all__ = [
    "DEPTH_LIMIT",
    "LENGTH_LIMIT",
    "TOKENS_LIMIT",
    "WORK_LIMIT",
    "Source",
    "describe_character",
    "without_full_stop",
]

LENGTH_LIMIT = 4_000_000
"""The largest number of characters of one expression (printed formulas are long)."""

TOKENS_LIMIT = 300_000
"""The largest number of symbols of one expression (a number is one symbol)."""

DEPTH_LIMIT = 100
"""The deepest nesting of parentheses and braces."""

WORK_LIMIT = 1_000_000_000
"""The largest total size, in bits, of all intermediate results of one expression."""


@dataclass(frozen=True, slots=True)
class Source:
    """A text; makes the errors that point into it (offsets count from 0)."""

    text: str

    def __post_init__(self) -> None:
        if len(self.text) > LENGTH_LIMIT:
            raise LimitError(
                f"the expression has {len(self.text)} characters; "
                f"the limit is {LENGTH_LIMIT}"
            )

    def place(self, start: int) -> tuple[int, int]:
        """Return line and column, both counted from 1, of an offset."""
        before = self.text[:start]
        return before.count("\n") + 1, start - (before.rfind("\n") + 1) + 1

    def error(
        self, start: int, end: int, message: str, hint: str | None = None
    ) -> ExpressionError:
        """Return the error about text[start:end]."""
        line, column = self.place(start)
        return ExpressionError(
            message,
            line=line,
            column=column,
            fragment=self.text[start:end] or None,
            hint=hint,
        )

    def limit(self, start: int, message: str) -> LimitError:
        line, column = self.place(start)
        return LimitError(f"line {line}, column {column}: {message}")

    def check_digits(self, start: int, count: int) -> None:
        """Raise LimitError for an integer of more than DIGITS_LIMIT digits."""
        if count > DIGITS_LIMIT:
            raise self.limit(
                start, f"an integer of {count} digits; the limit is {DIGITS_LIMIT}"
            )


_HINTS = {
    "\x08": "is it a \\b of LaTeX in double quotes? TOML needs '...'",
    "\x0c": "is it a \\f of LaTeX in double quotes? TOML needs '...'",
    "\u2212": "it is no ASCII minus (copied from a PDF?): write '-'",
    "\u2010": "write '-'",
    "\u2011": "write '-'",
    "\u2013": "write '-'",
    "\u2014": "write '-'",
    "\u00b7": "write '*'",
    "\u22c5": "write '*'",
    "\u2219": "write '*'",
    "\u00d7": "write '*'",
    "\u2217": "write '*'",
    "\u00f7": "write '/'",
    "\u2215": "write '/'",
    "\u2044": "write '/'",
    "\u2032": "write y' with the ASCII apostrophe",
    "\u2019": "write y' with the ASCII apostrophe",
    "\u221a": "write sqrt(...)",
    "\u03c0": "write pi",
}

_LOOKALIKES = dict(zip("\u0430\u0435\u043e\u0440\u0441\u0443\u0445\u0456\u0458\u0455"
                       "\u0410\u0412\u0415\u041a\u041c\u041d\u041e\u0420\u0421\u0422\u0425"
                       "\u03bf\u0391\u0392\u0395\u0396\u0397\u0399\u039a\u039c\u039d\u039f"
                       "\u03a1\u03a4\u03a5\u03a7",
                       "aeopcyxijsABEKMHOPCTXoABEZHIKMNOPTYX", strict=True))


def _hint(c: str, name: str) -> str:
    if c in _HINTS:
        return _HINTS[c]
    if c in _LOOKALIKES:
        return f"it looks like the letter {_LOOKALIKES[c]}; write the ASCII letter"
    if name.startswith("SUPERSCRIPT"):
        return "write x^2 for a power"
    if unicodedata.decimal(c, None) is not None:
        return "write the digits 0-9"
    if unicodedata.category(c) in ("Cf", "Cc", "Co", "Cs"):
        return "remove this invisible control character"
    if name.startswith("GREEK SMALL LETTER ") and name.count(" ") == 3:
        return f"write {name.split()[-1].lower()}"
    return "only ASCII is read"


def describe_character(c: str) -> tuple[str, str | None]:
    """Return message and hint for a character that is not part of the notation."""
    if " " < c <= "~":
        return f"unexpected character '{c}'", None
    name = unicodedata.name(c, "")
    return f"unexpected character U+{ord(c):04X} {name}".rstrip(), _hint(c, name)


_FULL_STOP = re.compile(r"(?<!\\)[.,;](\s*(?:\$\$?|\\\)|\\\])?\s*)\Z")


def without_full_stop(text: str) -> str:
    """Return the text with the punctuation mark that ends a display as a space.

    One full stop, comma or semicolon, at the very end or before a closing `$`,
    `\\)` or `\\]`; places in the text stay what they are.
    """
    return text[:-20] + _FULL_STOP.sub(r" \1", text[-20:])
