"""Claims from their parts and from TOML files: what is read, what is refused."""

from __future__ import annotations

import os
from fractions import Fraction
from pathlib import Path

import pytest

from certgen.claim import Letters, Power, default_id
from certgen.claims_file import FILE_LIMIT, make_claim, read_claims
from certgen.errors import (
    CertgenError,
    ClaimError,
    ExpressionError,
    FileError,
    LimitError,
    UnusableInputError,
)
from certgen.polynomial import Polynomial

GOOD = r"""
# two claims about an invented counting problem
[[claim]]
id = "towers"
equation = "F'(z) = F(z)/(2z)"
solution = "z^(1/2)"
title = "Towers of blocks"
note = '''
counted by height'''

[[claim]]
equation = '\frac{dy}{dx} = x\,y'
asserts = "transcendental"
subject = "some solution"
"""


def write(folder: Path, text: str | bytes) -> Path:
    path = folder / "claims.toml"
    path.write_bytes(text if isinstance(text, bytes) else text.encode())
    return path


def refused(folder: Path, text: str | bytes) -> CertgenError:
    with pytest.raises(UnusableInputError) as caught:
        read_claims(write(folder, text))
    assert str(caught.value).count("claims.toml") == 1 or isinstance(
        caught.value, ExpressionError)
    return caught.value


def test_a_file_gives_its_claims_in_order(tmp_path: Path) -> None:
    """All keys arrive; what is not given has its default."""
    first, second = read_claims(write(tmp_path, GOOD))
    assert (first.id, first.title, first.note) == (
        "towers", "Towers of blocks", "counted by height")
    assert str(first.equation) == "(2*x)*y' = (1)*y"
    assert first.letters == Letters(variable="z", function="F")
    assert first.as_written == "F'(z) = F(z)/(2z)"
    assert first.solution == (Power(base=Polynomial((0, 1)), exponent=Fraction(1, 2)),)
    assert first.solution_as_written == "z^(1/2)"
    assert (first.asserts, first.subject) == ("algebraic", "every solution")
    assert (second.asserts, second.subject) == ("transcendental", "some solution")
    assert (second.title, second.note, second.solution) == (None, None, None)


def test_without_an_id_the_claim_gets_one_from_its_canonical_form() -> None:
    """The same claim in another form has the same id, another claim another."""
    one = make_claim(equation="y' = y/(2*x)")
    same = make_claim(equation=r"\frac{dF}{dz} = \frac{F}{2z}")
    other = make_claim(equation="y' = y/(2*x)", subject="some solution")
    assert one.id == same.id == default_id(one.equation, "algebraic", "every solution", None)
    assert one.id != other.id


@pytest.mark.parametrize(
    ("keys", "message"),
    [
        ({"equation": "y' = 1/0*y"}, "equation, line 1, column 7: division by zero"),
        ({"equation": "y' = y", "solution": "x^"}, "solution, line 1, column 3: "),
        ({"equation": "y' = y", "solution": "z"}, "column 1: unknown name 'z'"),
        ({"equation": "y' = y", "id": "../x"}, "the id '../x' is not valid"),
        ({"equation": "y' = y", "asserts": "true"}, "asserts is 'true'"),
        ({"equation": "y' = y", "subject": "all"}, "subject is 'all'"),
        ({"equation": "y' = y", "title": "a\nb"}, "the title contains the control character"),
        ({"equation": "y' = y", "asserts": "transcendental", "solution": "x"},
         "a claim of transcendence cannot name a closed form"),
    ],
)  # fmt: skip
def test_a_claim_that_cannot_be_stated_is_refused(keys: dict[str, str], message: str) -> None:
    """The error names the key, and what is given as `where`."""
    with pytest.raises(UnusableInputError) as caught:
        make_claim(**keys)
    assert message in str(caught.value)
    with pytest.raises(UnusableInputError) as caught:
        make_claim(**keys, where="here: ")
    assert "here: " in str(caught.value)


def test_limits_name_the_key() -> None:
    """A title, an equation and a closed form beyond the limits: status 3."""
    for keys, message in (
        ({"equation": "y' = y", "title": "A" * 201}, "the title has 201 characters"),
        ({"equation": "y' = x^99999*y"}, "equation: line 1, column 6: degree 99999"),
        ({"equation": "y' = y", "solution": "x^(1/9^9999)"}, "solution: line 1, column 1: an"),
    ):
        with pytest.raises(LimitError) as caught:
            make_claim(**keys)
        assert message in str(caught.value)


CLAIM = "[[claim]]\nequation = \"y' = y\"\n"


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("", "the file has no claim"),
        ("claim = []", "the file has no claim"),
        ("[claim]\nequation = \"y' = y\"", "write [[claim]], not [claim]"),
        ("claim = 3", "'claim' is not an array of tables"),
        ("claim = [3]", "'claim' is not an array of tables"),
        ("title = 'x'\n" + CLAIM, "unknown key 'title' outside of a claim"),
        (CLAIM + "[[claims]]", "unknown key 'claims' outside of a claim"),
        ("[[claim]]\nid = 'a'", "claim 1 ('a'): the key 'equation' is missing"),
        (CLAIM + "solutoin = 'x'", "claim 1: unknown key 'solutoin'; did you mean 'solution'?"),
        (CLAIM + "qqqq = 'x'", "claim 1: unknown key 'qqqq'; known are id, equation"),
        (CLAIM + "where = 'x'", "claim 1: unknown key 'where'"),
        (CLAIM + CLAIM + "id = 7", "claim 2: id must be a text in quotes, not an integer"),
        (CLAIM + "title = true", "title must be a text in quotes, not a boolean"),
        (CLAIM + "note = 1.5", "note must be a text in quotes, not a decimal number"),
        (CLAIM + "note = []", "note must be a text in quotes, not an array"),
        (CLAIM + "note = {}", "note must be a text in quotes, not a table"),
        (CLAIM + "note = 1999-01-01", "note must be a text in quotes, not a date or time"),
        (CLAIM + "id = 'a'\n" + CLAIM + "id = 'a'",
         "claim 2: the id 'a' is already that of claim 1"),
        (CLAIM + CLAIM, "is already that of claim 1"),
        (CLAIM + "id = '-a'", "claim 1 ('-a'): the id '-a' is not valid"),
        ("[[claim]]\nequation = y", "this is not TOML: Invalid value (at line 2, column 12)"),
        (CLAIM + "id = 'a'\nid = 'b'", "this is not TOML: Cannot overwrite a value"),
        ("x = " + "9" * 5000, "a number in the file is too long"),
        ("x = " + "[" * 5000, "the file is nested too deep"),
        (b"\xff\xfe", "the file is not UTF-8 (byte 1)"),
        ("\ufeff" + CLAIM, "byte order mark"),
        ("[[claim]]\nequation = \"y' = \\u0000y\"", "U+0000"),
    ],
)  # fmt: skip
def test_a_file_that_is_not_right_is_refused(
    tmp_path: Path, text: str | bytes, message: str
) -> None:
    """One error names the file, the claim and the key."""
    error = refused(tmp_path, text)
    assert message in str(error)
    assert error.status == 2


def test_an_expression_in_a_file_is_refused_with_claim_key_and_place(tmp_path: Path) -> None:
    """The message says the file, the claim by number and id, the key, and the column."""
    text = CLAIM + "[[claim]]\nid = 'b'\nequation = \"y' = y\"\nsolution = \"x +* 2\""
    error = refused(tmp_path, text)
    assert isinstance(error, ExpressionError)
    assert "claims.toml: claim 2 ('b'): solution, line 1, column 4: " in str(error)
    assert (error.line, error.column) == (1, 4)


def test_files_that_cannot_be_read(tmp_path: Path) -> None:
    """Missing files, folders and pipes; what is too long is a limit."""
    for path in (tmp_path / "none.toml", tmp_path):
        with pytest.raises(FileError, match="cannot read"):
            read_claims(path)
    os.mkfifo(tmp_path / "pipe")
    with pytest.raises(FileError, match="not a regular file"):
        read_claims(tmp_path / "pipe")
    long = tmp_path / "long.toml"
    with long.open("wb") as file:
        file.truncate(FILE_LIMIT + 1)
    with pytest.raises(LimitError, match="longer than the limit"):
        read_claims(long)


def test_the_errors_are_claim_errors(tmp_path: Path) -> None:
    """What is wrong with the table itself is a ClaimError."""
    with pytest.raises(ClaimError):
        read_claims(write(tmp_path, "[[claim]]"))
