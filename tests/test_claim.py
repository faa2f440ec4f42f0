"""Claims: what their types admit."""

from __future__ import annotations

import re
from fractions import Fraction
from typing import Any

import pytest

from certgen.claim import (
    NOTE_LIMIT,
    TITLE_LIMIT,
    FirstOrderClaim,
    FirstOrderEquation,
    Letters,
    Power,
    check_id,
    default_id,
)
from certgen.errors import ClaimError, ExpressionError, InvariantError, LimitError
from certgen.polynomial import read_polynomial as P


def equation(b: str, a: str) -> FirstOrderEquation:
    return FirstOrderEquation(numerator=P(a), denominator=P(b))


def power(base: str, exponent: str) -> Power:
    return Power(base=P(base), exponent=Fraction(exponent))


def claim(**more: Any) -> FirstOrderClaim:
    values = {
        "id": "ferry", "equation": equation("x", "1"), "as_written": "xy' = y",
        "letters": Letters(), **more,
    }  # fmt: skip
    return FirstOrderClaim(**values)


@pytest.mark.parametrize(
    ("b", "a", "code"),
    [
        ("0", "1", "vacuous"),
        ("0", "0", "vacuous"),
        ("1/2*x", "1", "not-canonical"),
        ("x", "1/2", "not-canonical"),
        ("-x", "1", "not-canonical"),
        ("2*x", "4", "not-canonical"),
        ("x", "0", "not-canonical"),
        ("2", "0", "not-canonical"),
    ],
)
def test_equations_are_canonical(b: str, a: str, code: str) -> None:
    """b is not 0, integers, lc(b) > 0, no common integer factor, y' = 0 one way only."""
    with pytest.raises(InvariantError) as caught:
        equation(b, a)
    assert caught.value.code == code


def test_the_text_of_an_equation() -> None:
    """The canonical text is always in x and y."""
    assert str(equation("5*x", "-1")) == "(5*x)*y' = (-1)*y"
    assert str(equation("1", "0")) == "(1)*y' = (0)*y"


@pytest.mark.parametrize(
    ("base", "exponent", "code"),
    [
        ("2", "1/7", "vacuous"), ("0", "1", "vacuous"), ("x", "0", "vacuous"),
        ("2*x", "1", "not-canonical"), ("-x", "1", "not-canonical"),
        ("1/2*x", "1", "not-canonical"),
    ],
)  # fmt: skip
def test_powers_say_something(base: str, exponent: str, code: str) -> None:
    """A constant base or a zero exponent would forge degrees."""
    with pytest.raises(InvariantError) as caught:
        power(base, exponent)
    assert caught.value.code == code


@pytest.mark.parametrize(
    ("variable", "function"),
    [("x", "x"), ("xx", "y"), ("", "y"), ("1", "y"), ("x", "\u00e9"), ("pi", "y"), ("x", "y'")],
)
def test_letters_are_two_different_letters(variable: str, function: str) -> None:
    """One ASCII letter or a Greek name each; pi is a number."""
    with pytest.raises(ClaimError):
        Letters(variable=variable, function=function)


def test_greek_names_are_letters() -> None:
    """theta and phi are fine."""
    assert Letters(variable="theta", function="phi").function == "phi"


@pytest.mark.parametrize(
    "text", ["", "-a", "A", "a b", "a_b", "a" * 65, "../a", "a\n", "\u00e9"]
)
def test_ids_are_safe_file_names(text: str) -> None:
    """1 to 64 of a-z, 0-9 and '-', not beginning with '-'."""
    with pytest.raises(ClaimError, match="not valid"):
        check_id(text)


@pytest.mark.parametrize(
    ("more", "message"),
    [
        ({"asserts": "rational"}, "'algebraic' or 'transcendental'"),
        ({"subject": "most solutions"}, "'every solution' or 'some solution'"),
        ({"solution": ()}, "go together"),
        ({"solution_as_written": "x"}, "go together"),
        ({"asserts": "transcendental", "solution": (), "solution_as_written": "1"},
         "cannot name a closed form"),
        ({"title": "a\nb"}, "U+000A"),
        ({"note": "a\x00b"}, "U+0000"),
        ({"note": "a\x85b"}, "U+0085"),
        ({"as_written": "\ud800"}, "U+D800"),
    ],
)  # fmt: skip
def test_claims_say_one_thing(more: dict[str, Any], message: str) -> None:
    """Words of the vocabulary, a solution with its text, no control characters."""
    with pytest.raises(ClaimError, match=re.escape(message)):
        claim(**more)


def test_long_texts_meet_a_limit() -> None:
    """Title and note have limits that the message names."""
    with pytest.raises(LimitError, match=str(TITLE_LIMIT)):
        claim(title="a" * (TITLE_LIMIT + 1))
    with pytest.raises(LimitError, match=str(NOTE_LIMIT)):
        claim(note="a" * (NOTE_LIMIT + 1))
    assert claim(title="a" * TITLE_LIMIT, note="tab\tand\nline").note == "tab\tand\nline"


@pytest.mark.parametrize("bases", [("x + 1", "x"), ("x", "x")])
def test_the_bases_of_a_closed_form_are_sorted_and_distinct(bases: tuple[str, str]) -> None:
    """One order, no repetition."""
    with pytest.raises(InvariantError, match="sorted and distinct"):
        claim(solution=tuple(power(b, "1") for b in bases), solution_as_written="?")


def test_default_ids_tell_claims_apart() -> None:
    """The id depends on everything that is claimed and on nothing else."""
    e, s = equation("x", "1"), (power("x", "1"),)
    ids = {
        default_id(e, "algebraic", "every solution", None),
        default_id(e, "algebraic", "every solution", s),
        default_id(e, "algebraic", "some solution", None),
        default_id(e, "transcendental", "every solution", None),
        default_id(equation("x", "2"), "algebraic", "every solution", None),
    }
    assert len(ids) == 5
    for identifier in ids:
        check_id(identifier)
        assert re.fullmatch(r"eq-[0-9a-f]{8}", identifier)


def test_an_expression_error_says_what_it_knows() -> None:
    """Where, line, column, message, fragment and hint, each only if it is known."""
    assert str(ExpressionError("message")) == "message"
    assert str(ExpressionError("message", column=3)) == "line 1, column 3: message"
    assert str(ExpressionError("m", where="key", column=3, fragment="y", hint="hint")) == (
        "key, line 1, column 3: m (at 'y'); hint"
    )
