"""Claims from their parts, and claims from TOML files.

A file of claims is an array of tables `[[claim]]` with the keys `id`,
`equation`, `asserts`, `subject`, `solution`, `title` and `note`; only
`equation` is required.
"""

from __future__ import annotations

import difflib
import os
import re
import tomllib
from typing import Any, cast

from certgen.claim import Asserts, FirstOrderClaim, Letters, Power, Subject, default_id
from certgen.errors import CertgenError, ClaimError, ExpressionError, LimitError, shorten
from certgen.files import read_bytes
from certgen.notation import EquationAsRead, read_closed_form, read_equation

__all__ = ["FILE_LIMIT", "make_claim", "read_claims"]

FILE_LIMIT = 16 * 1024 * 1024
"""The largest size of a file of claims, in bytes."""

_RESERVED = re.compile(r"con|prn|aux|nul|(?:com|lpt)[0-9]")

_KEYS = ("id", "equation", "asserts", "subject", "solution", "title", "note")


def make_claim(
    *,
    equation: str,
    id: str | None = None,
    asserts: str = "algebraic",
    subject: str = "every solution",
    solution: str | None = None,
    title: str | None = None,
    note: str | None = None,
    where: str = "",
) -> FirstOrderClaim:
    """Return the claim about an equation in plain notation or LaTeX.

    `solution` is read in the letters of the equation; without `id` the claim
    gets one from its canonical form.  `where` stands before every message.
    Raises ExpressionError, ClaimError and LimitError that name the key.

    >>> str(make_claim(equation="u'(t) = u(t)/(2t)", solution="sqrt(t)").equation)
    "(2*x)*y' = (1)*y"
    """
    read = _read_equation(equation, where)
    powers = _read_solution(solution, read.letters, where)
    if id is None:
        id = default_id(read.equation, asserts, subject, powers)
    if _RESERVED.fullmatch(id):
        raise ClaimError(
            f"{where}the id '{id}' is a reserved file name on some machines; choose another"
        )
    try:
        return FirstOrderClaim(
            id=id,
            equation=read.equation,
            as_written=equation,
            letters=read.letters,
            asserts=cast(Asserts, asserts),
            subject=cast(Subject, subject),
            solution=powers,
            solution_as_written=solution,
            title=title,
            note=note,
        )
    except (ClaimError, LimitError) as error:
        kind = LimitError if isinstance(error, LimitError) else ClaimError
        raise kind(f"{where}{error}") from None


def _read_equation(text: str, where: str) -> EquationAsRead:
    try:
        return read_equation(text)
    except CertgenError as error:
        raise _named(error, f"{where}equation") from None


def _read_solution(
    text: str | None, letters: Letters, where: str
) -> tuple[Power, ...] | None:
    if text is None:
        return None
    try:
        return read_closed_form(text, letters)
    except CertgenError as error:
        raise _named(error, f"{where}solution") from None


def _named(error: CertgenError, key: str) -> CertgenError:
    """Return the same error with the key in front."""
    if isinstance(error, ExpressionError):
        return ExpressionError(
            error.message, line=error.line, column=error.column,
            fragment=error.fragment, hint=error.hint, where=key)
    return type(error)(f"{key}: {error}")


# --------------------------------------------------------------------------
# files


def read_claims(path: str | os.PathLike[str]) -> list[FirstOrderClaim]:
    """Return the claims of a TOML file, at least one, in their order.

    Raises FileError for a file that cannot be read, LimitError for one beyond
    FILE_LIMIT, and ClaimError or ExpressionError, naming file, claim and key, for
    everything inside that is not right.
    """
    name = shorten(os.fspath(path), 200)
    tables = _tables(_parse(_decode(read_bytes(path, FILE_LIMIT), name), name), name)
    claims: list[FirstOrderClaim] = []
    numbers: dict[str, int] = {}
    for number, table in enumerate(tables, 1):
        claim = _read_table(table, f"{name}: claim {number}")
        if claim.id in numbers:
            raise ClaimError(
                f"{name}: claim {number}: the id '{claim.id}' is already that of claim "
                f"{numbers[claim.id]}; give each claim its own id")
        numbers[claim.id] = number
        claims.append(claim)
    return claims


def _decode(data: bytes, name: str) -> str:
    try:
        text = data.decode("utf-8")
    except UnicodeDecodeError as error:
        raise ClaimError(
            f"{name}: the file is not UTF-8 (byte {error.start + 1}); save it as UTF-8"
        ) from None
    if text.startswith("\ufeff"):
        raise ClaimError(f"{name}: the file begins with a byte order mark; remove it")
    return text


def _parse(text: str, name: str) -> dict[str, Any]:
    try:
        return tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise ClaimError(f"{name}: this is not TOML: {shorten(error, 200)}") from None
    except ValueError:  # an integer beyond the process-wide limit of digits
        raise ClaimError(f"{name}: a number in the file is too long; claims are texts in "
                         "quotes") from None
    except RecursionError:
        raise ClaimError(f"{name}: the file is nested too deep; claims are tables "
                         "[[claim]] of texts") from None


def _tables(document: dict[str, Any], name: str) -> list[dict[str, Any]]:
    for key in document:
        if key != "claim":
            raise ClaimError(
                f"{name}: unknown key '{shorten(key)}' outside of a claim; every claim is a "
                "table that begins with [[claim]]")
    tables = document.get("claim", [])
    if isinstance(tables, dict):
        raise ClaimError(f"{name}: 'claim' is one table; write [[claim]], not [claim]")
    if not isinstance(tables, list) or not all(isinstance(t, dict) for t in tables):
        raise ClaimError(f"{name}: 'claim' is not an array of tables; write [[claim]]")
    if not tables:
        raise ClaimError(f"{name}: the file has no claim; a claim begins with [[claim]]")
    return tables


def _read_table(table: dict[str, Any], where: str) -> FirstOrderClaim:
    id_ = table.get("id")
    if isinstance(id_, str):
        where += f" ('{shorten(id_)}')"
    for key, value in table.items():
        if key not in _KEYS:
            near = difflib.get_close_matches(key, _KEYS, n=1)
            hint = f"did you mean '{near[0]}'?" if near else f"known are {', '.join(_KEYS)}"
            raise ClaimError(f"{where}: unknown key '{shorten(key)}'; {hint}")
        if not isinstance(value, str):
            raise ClaimError(
                f"{where}: {key} must be a text in quotes, not {_type(value)}")
    if "equation" not in table:
        raise ClaimError(f"{where}: the key 'equation' is missing")
    return make_claim(**table, where=f"{where}: ")


def _type(value: object) -> str:
    names = {bool: "a boolean", int: "an integer", float: "a decimal number",
             list: "an array", dict: "a table"}
    return names.get(type(value), "a date or time")
