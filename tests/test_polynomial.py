"""Polynomials over Q and the strict notation."""

from __future__ import annotations

import sys
from fractions import Fraction
from math import gcd

import pytest
from hypothesis import given
from hypothesis import strategies as st

from certgen.errors import LimitError, MalformedError
from certgen.polynomial import (
    DEGREE_LIMIT,
    DIGITS_LIMIT,
    Polynomial,
    read_integer,
    read_natural,
    read_polynomial,
    read_rational,
    write_integer,
    write_polynomial,
    write_rational,
)

RATIONALS = st.fractions(max_denominator=50) | st.fractions()
COEFFICIENTS = st.lists(RATIONALS, max_size=8)
INTEGERS = st.integers() | st.builds(
    lambda exponent, rest: 7**exponent + rest, st.integers(0, 3000), st.integers()
)

SPELLINGS = {
    "0": [],
    "5": [5],
    "-1/2": [Fraction(-1, 2)],
    "x": [0, 1],
    "-x": [0, -1],
    "x^2 - x + 1": [1, -1, 1],
    "-3/4*x^10 + 2*x - 7": [-7, 2, 0, 0, 0, 0, 0, 0, 0, 0, Fraction(-3, 4)],
}


@pytest.mark.parametrize("text", SPELLINGS)
def test_the_strict_notation_by_hand(text: str) -> None:
    """These texts mean these coefficients, in both directions."""
    value = Polynomial.from_coefficients(SPELLINGS[text])
    assert read_polynomial(text) == value
    assert str(value) == text


@pytest.mark.parametrize(
    "text",
    [
        "", " ", "+x", "x ", " x", "x+1", "x +1", "1 + x", "x + x", "x^2 + x^2", "x + 0",
        "0*x", "1*x", "2x", "2*x^1", "x^0", "x^01", "02", "-0", "2/4", "4/2*x", "1/0", "1/0*x",
        "1/1", "x^2 + -x", "--x", "x - -1", "x*2", "2*", "2*y", "X", "x^-1", "x^1/2", "1.5",
        "(x)", "x^2\n", "\u0663", "x\u00b2", "1e3", "x^2 - ", "x^2 + + x", "1_000", "3 - 2",
        "0 + x", "x - 0", "- x", "*x", "/2", "1/-2", "x^", "x^x", "xx",
    ],
)  # fmt: skip
def test_every_other_spelling_is_malformed(text: str) -> None:
    """One value, one text: everything else is refused, with its path."""
    with pytest.raises(MalformedError) as caught:
        read_polynomial(text, path="$.here")
    assert caught.value.path == "$.here"


@given(COEFFICIENTS)
def test_reading_inverts_writing(coefficients: list[Fraction]) -> None:
    """read(write(f)) = f, and the coefficients are those that were given."""
    f = Polynomial.from_coefficients(coefficients)
    assert read_polynomial(write_polynomial(f)) == f
    while coefficients and coefficients[-1] == 0:
        coefficients.pop()
    assert list(f.coefficients) == coefficients
    assert [f.coefficient(k) for k in range(f.degree + 1)] == coefficients


@given(st.text(alphabet="x^*+-/ 0123y", max_size=14))
def test_what_is_read_is_written_alike(text: str) -> None:
    """A text is refused or is the one spelling of its value."""
    try:
        f = read_polynomial(text)
    except (MalformedError, LimitError):
        return
    assert write_polynomial(f) == text


@given(COEFFICIENTS, st.integers(-5, 5))
def test_the_text_means_its_value(coefficients: list[Fraction], point: int) -> None:
    """The text, read term by term as arithmetic, has the polynomial's values."""
    f = Polynomial.from_coefficients(coefficients)
    total = Fraction(0)
    for term in write_polynomial(f).replace("- ", "-").replace("+ ", "").split(" "):
        product = Fraction(-1 if term.startswith("-") else 1)
        for factor in term.lstrip("-").split("*"):
            base, _, exponent = factor.partition("^")
            value = Fraction(point) if base == "x" else Fraction(base)
            product *= value ** int(exponent or 1)
        total += product
    assert total == sum(c * point**k for k, c in enumerate(coefficients))


def test_another_letter_is_for_people() -> None:
    """The letter of the variable can be chosen when writing."""
    assert write_polynomial(read_polynomial("x^2 - 3*x"), "t") == "t^2 - 3*t"


# --------------------------------------------------------------------------
# numbers


@given(INTEGERS)
def test_integers_round_trip(value: int) -> None:
    """write_integer agrees with Python's digits where Python can tell."""
    text = write_integer(value)
    assert read_integer(text) == value
    assert value.bit_length() > 2000 or text == str(value)


@pytest.mark.parametrize("exponent", [499, 500, 501, 999, 1000, 4300, 19_999])
def test_powers_of_ten_have_their_zeros(exponent: int) -> None:
    """10^n is a one and n zeros, 10^n - 1 is n nines: around every chunk border."""
    assert write_integer(10**exponent) == "1" + "0" * exponent
    assert write_integer(-(10**exponent)) == "-1" + "0" * exponent
    assert write_integer(10**exponent - 1) == "9" * exponent
    assert read_natural("9" * exponent) == 10**exponent - 1


def test_long_integers_need_no_setting_of_the_interpreter() -> None:
    """20,000 digits are read and written under the smallest limit Python knows."""
    before = sys.get_int_max_str_digits()
    sys.set_int_max_str_digits(640)
    try:
        text = "7" * DIGITS_LIMIT
        assert write_integer(read_integer(text)) == text
        assert write_polynomial(read_polynomial(f"{text}*x - {text}/2")).endswith("7/2")
    finally:
        sys.set_int_max_str_digits(before)


@pytest.mark.parametrize(
    "text", ["", "-", "+3", "03", "-0", "-03", " 3", "3 ", "3\n", "\u0663", "0x3", "3.0", "1e2"]
)
def test_other_integers_are_malformed(text: str) -> None:
    """Exactly one spelling per integer."""
    with pytest.raises(MalformedError):
        read_integer(text)


@pytest.mark.parametrize(
    "text", ["3/6", "1/-2", "1/0", "2/1", "0/2", "1/02", "1/2/3", "/2", "1/", "-1/-2", "1 /2"]
)
def test_other_rationals_are_malformed(text: str) -> None:
    """Lowest terms, a denominator of at least 2, no second spelling."""
    with pytest.raises(MalformedError):
        read_rational(text)


@given(st.fractions())
def test_rationals_round_trip(value: Fraction) -> None:
    """Strict rationals are what Fraction writes."""
    assert write_rational(value) == str(value)
    assert read_rational(str(value)) == value


# --------------------------------------------------------------------------
# limits


@pytest.mark.parametrize(
    "text",
    [
        f"x^{DEGREE_LIMIT + 1}",
        "x^1000000000",
        "x^" + "9" * 5000,
        "1" * (DIGITS_LIMIT + 2),
        "1/" + "1" * (DIGITS_LIMIT + 2),
        "x + 1/" + "3" * 12_000 + " ",
    ],
)
def test_sizes_are_bounded_before_anything_is_built(text: str) -> None:
    """Degree and digits beyond the limits: an error that names the limit, or malformed."""
    with pytest.raises((LimitError, MalformedError)):
        read_polynomial(text)


def test_the_common_denominator_is_bounded() -> None:
    """Small coefficients whose common denominator grows are stopped on the way."""
    primes = [10**300 + k for k in range(1, 400, 2)]
    terms = " + ".join(f"1/{p}*x^{200 - i}" for i, p in enumerate(primes))
    with pytest.raises(LimitError, match="20000"):
        read_polynomial(terms)


def test_the_largest_degree_is_read() -> None:
    """The limit itself is allowed."""
    assert read_polynomial(f"x^{DEGREE_LIMIT}").degree == DEGREE_LIMIT
    with pytest.raises(LimitError, match=str(DEGREE_LIMIT)):
        read_polynomial(f"x^{DEGREE_LIMIT + 1}")
    with pytest.raises(LimitError, match=str(DIGITS_LIMIT)):
        read_integer("1" * (DIGITS_LIMIT + 2))


# --------------------------------------------------------------------------
# the type


def test_the_type_admits_only_canonical_values() -> None:
    """Trailing zeros, a denominator below 1, a common factor: refused."""
    for numerators, denominator in (((1, 0), 1), ((1,), 0), ((1,), -1), ((2, 4), 2), ((), 2)):
        with pytest.raises(ValueError):
            Polynomial(numerators, denominator)


@given(COEFFICIENTS)
def test_properties_agree_with_their_definitions(coefficients: list[Fraction]) -> None:
    """degree, content, primitivity and the rest, from the list of coefficients."""
    f = Polynomial.from_coefficients(coefficients)
    c = list(f.coefficients)
    assert f.degree == len(c) - 1
    assert f.is_zero == (not c)
    assert f.is_constant == (len(c) <= 1)
    assert f.is_integral == all(x.denominator == 1 for x in c)
    assert f.leading_coefficient == (c[-1] if c else 0)
    assert f.coefficient(-1) == f.coefficient(99) == 0
    assert f.is_primitive == (
        bool(c) and f.is_integral and c[-1] > 0 and gcd(*(int(x) for x in c)) == 1
    )
    assert f.content == gcd(*(int(x * f.denominator) for x in c))


def test_equal_values_are_equal_objects() -> None:
    """Equality and hash are those of the value, however it was made."""
    f = Polynomial.from_integers([0, 2, 0])
    assert f == Polynomial.from_coefficients([0, Fraction(4, 2)]) == read_polynomial("2*x")
    assert len({f, read_polynomial("2*x"), read_polynomial("x")}) == 2


def test_the_stated_order() -> None:
    """Lists are sorted by degree, then by the coefficients from the top."""
    order = ["x - 2", "x", "x + 1", "2*x - 5", "x^2 - x", "x^2 + 1", "2*x^2"]
    values = [read_polynomial(text) for text in order]
    shuffled = [values[k] for k in (3, 6, 0, 5, 2, 4, 1)]
    assert sorted(shuffled, key=lambda f: f.sort_key) == values
