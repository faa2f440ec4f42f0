"""The exceptions of certgen and the exit status each one stands for.

    CertgenError
    |-- UnusableInputError          2   the input cannot be used at all
    |   |-- ExpressionError             an expression or equation, with its place
    |   |-- ClaimError                  a claim, or a file of claims
    |   |   `-- InvariantError            a value that its type does not admit
    |   |-- MalformedError              stored text, with its JSON path
    |   `-- FileError                   a file or folder that cannot be read or written
    |-- RejectedError               1   a stored statement is false or unsupported by its proof
    |-- LimitError                  3   a documented limit was reached: no verdict
    |-- UnsupportedVersionError     4   a format, claim kind or proof kind of another version
    `-- DefectError                 3   certgen contradicts itself: please report it

Every message is one that a person can act on: what, where, and what would be
right.  Nothing below quotes more than a short fragment of the input.
"""

from __future__ import annotations

__all__ = [
    "CertgenError",
    "ClaimError",
    "DefectError",
    "ExpressionError",
    "FileError",
    "InvariantError",
    "LimitError",
    "MalformedError",
    "RejectedError",
    "UnsupportedVersionError",
    "UnusableInputError",
    "shorten",
]


def shorten(text: object, limit: int = 60) -> str:
    """Return `text` as printable ASCII of at most about `limit` characters."""
    raw = str(text)
    cut = raw if len(raw) <= limit else raw[: limit - 20] + " ... " + raw[-12:]
    return "".join(
        c if " " <= c <= "~" else f"[U+{ord(c):04X}]" for c in cut
    )


class CertgenError(Exception):
    """Base of all errors that certgen raises on purpose."""

    status = 2


class UnusableInputError(CertgenError):
    """The input cannot be used: malformed, missing, contradictory, unwritable."""

    status = 2


class ExpressionError(UnusableInputError):
    """An expression or equation that cannot be read, with its place.

    `line` and `column` count from 1 and point into the text that was given;
    `fragment` is the offending piece, `hint` says what would be right, `where`
    names the text (a file, a claim, a key).
    """

    def __init__(
        self,
        message: str,
        *,
        line: int = 1,
        column: int | None = None,
        fragment: str | None = None,
        hint: str | None = None,
        where: str | None = None,
    ) -> None:
        self.message = message
        self.line = line
        self.column = column
        self.fragment = fragment
        self.hint = hint
        self.where = where
        super().__init__(message, line, column, fragment, hint, where)

    def __str__(self) -> str:
        places = [] if self.where is None else [self.where]
        if self.column is not None:
            places.append(f"line {self.line}, column {self.column}")
        place = f"{', '.join(places)}: " if places else ""
        piece = "" if self.fragment is None else f" (at '{shorten(self.fragment)}')"
        hint = "" if self.hint is None else f"; {self.hint}"
        return f"{place}{self.message}{piece}{hint}"


class ClaimError(UnusableInputError):
    """A claim that cannot be stated, or a file of claims that cannot be read."""


class InvariantError(ClaimError):
    """A mathematical value that its type does not admit.

    `code` is "vacuous" (a zero exponent, a constant base, degree 0: values that
    would make an identity say nothing) or "not-canonical" (order, repetition,
    lowest terms).  In stored text it is a rejection with this code.
    """

    def __init__(self, code: str, message: str) -> None:
        self.code = code
        super().__init__(message)


class MalformedError(UnusableInputError):
    """Stored text that is not in the canonical form of the format.

    `path` is the JSON path of the offending value (`$` is the whole text).
    """

    def __init__(self, message: str, *, path: str = "$") -> None:
        self.message = message
        self.path = path
        super().__init__(message, path)

    def __str__(self) -> str:
        return f"{self.path}: {self.message}"


class FileError(UnusableInputError):
    """A file or folder that cannot be read or written; says which and why."""


class RejectedError(CertgenError):
    """A stored certificate says something that its proof does not prove.

    `code` is one of `certgen.checker.codes.CODES`, `path` the JSON path of the
    offending value, `expected` and `found` say what the checker wanted and saw.
    """

    status = 1

    def __init__(self, code: str, path: str, expected: str, found: str) -> None:
        self.code = code
        self.path = path
        self.expected = expected
        self.found = found
        super().__init__(code, path, expected, found)

    def __str__(self) -> str:
        return (
            f"{self.code} at {self.path}: expected {self.expected}; "
            f"found {self.found}"
        )


class LimitError(CertgenError):
    """A documented limit was reached; the message names the limit."""

    status = 3


class UnsupportedVersionError(CertgenError):
    """A format, claim kind or proof kind that this version does not know."""

    status = 4


class DefectError(CertgenError):
    """certgen contradicts itself; nothing was written."""

    status = 3
