"""Exact polynomials in one variable over Q, and the strict notation.

`Polynomial` is the neutral type that travels between the rooms: it holds data
and no arithmetic.  The strict notation is the single spelling in which numbers
and polynomials are stored:

* an integer: decimal, no leading zero, no sign but a leading `-`, never `-0`;
* a rational: an integer, or `n/d` in lowest terms with d > 1;
* a polynomial: terms by descending degree, joined by ` + ` and ` - `, each
  `c`, `c*x`, `c*x^k`, `x` or `x^k` with c > 0 (c = 1 not written) and k >= 2;
  a leading `-` without a space; the zero polynomial is `0`.

Everything else is refused, so that equal values are equal texts.
"""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass
from fractions import Fraction
from math import gcd, lcm

from certgen.errors import LimitError, MalformedError, shorten

__all__ = [
    "DEGREE_LIMIT",
    "DIGITS_LIMIT",
    "Polynomial",
    "read_integer",
    "read_natural",
    "read_polynomial",
    "read_rational",
    "write_integer",
    "write_polynomial",
    "write_rational",
]

DIGITS_LIMIT = 20_000
"""The largest number of decimal digits of one stored integer."""

DEGREE_LIMIT = 10_000
"""The largest degree of one stored polynomial."""

# int() and str() refuse long numbers beyond a process-wide setting that is
# never below 640 digits; chunks of 500 make us independent of it.
_CHUNK = 500
_CHUNK_BITS = 1600


@dataclass(frozen=True, slots=True)
class Polynomial:
    """A polynomial over Q: `numerators[k] / denominator` is the coefficient of x^k.

    Canonical: no trailing zero numerator, denominator >= 1, and no common
    factor of the denominator with all numerators.  The zero polynomial has no
    numerators and degree -1.  Equality and hashing are those of the value.
    """

    numerators: tuple[int, ...]
    denominator: int = 1

    def __post_init__(self) -> None:
        if self.denominator < 1:
            raise ValueError("the denominator must be positive")
        if self.numerators and self.numerators[-1] == 0:
            raise ValueError("the leading coefficient must not be zero")
        if self.denominator != 1 and gcd(self.denominator, *self.numerators) != 1:
            raise ValueError("numerators and denominator must have no common factor")

    @classmethod
    def from_coefficients(cls, coefficients: Iterable[int | Fraction]) -> Polynomial:
        """Return the polynomial with these ascending rational coefficients."""
        values = [Fraction(c) for c in coefficients]
        while values and values[-1] == 0:
            values.pop()
        denominator = lcm(*(c.denominator for c in values)) if values else 1
        return cls(
            tuple(c.numerator * (denominator // c.denominator) for c in values),
            denominator,
        )

    @classmethod
    def from_integers(cls, coefficients: Iterable[int]) -> Polynomial:
        """Return the polynomial with these ascending integer coefficients."""
        values = list(coefficients)
        while values and values[-1] == 0:
            values.pop()
        return cls(tuple(int(c) for c in values))

    @property
    def degree(self) -> int:
        """The degree; -1 for the zero polynomial."""
        return len(self.numerators) - 1

    @property
    def is_zero(self) -> bool:
        return not self.numerators

    @property
    def is_constant(self) -> bool:
        return len(self.numerators) <= 1

    @property
    def is_integral(self) -> bool:
        """Whether all coefficients are integers."""
        return self.denominator == 1

    @property
    def content(self) -> int:
        """The greatest common divisor of the numerators (0 for zero)."""
        return gcd(*self.numerators)

    @property
    def leading_coefficient(self) -> Fraction:
        return self.coefficient(self.degree)

    @property
    def is_primitive(self) -> bool:
        """Whether it lies in Z[x] with content 1 and positive leading coefficient."""
        return (
            bool(self.numerators)
            and self.denominator == 1
            and self.numerators[-1] > 0
            and self.content == 1
        )

    @property
    def sort_key(self) -> tuple[int, tuple[int | Fraction, ...]]:
        """The stated order of lists: by degree, then coefficients from the top."""
        values = self.numerators if self.denominator == 1 else self.coefficients
        return self.degree, values[::-1]

    @property
    def coefficients(self) -> tuple[Fraction, ...]:
        """The ascending coefficients."""
        return tuple(Fraction(n, self.denominator) for n in self.numerators)

    def coefficient(self, k: int) -> Fraction:
        """The coefficient of x^k (0 beyond the degree)."""
        if 0 <= k < len(self.numerators):
            return Fraction(self.numerators[k], self.denominator)
        return Fraction(0)

    def __str__(self) -> str:
        return write_polynomial(self)


# --------------------------------------------------------------------------
# integers


def read_natural(digits: str) -> int:
    """Return the natural number with these ASCII digits, however many there are."""
    if len(digits) <= _CHUNK:
        return int(digits)
    low = len(digits) // 2
    shift: int = 10**low
    return read_natural(digits[:-low]) * shift + read_natural(digits[-low:])


def write_integer(value: int) -> str:
    """Return the decimal text of an integer, however long."""
    if value < 0:
        return "-" + write_integer(-value)
    if value.bit_length() <= _CHUNK_BITS:
        return str(value)
    low = value.bit_length() * 3 // 20  # a little under half of the digits
    high, rest = divmod(value, 10**low)
    return write_integer(high) + write_integer(rest).rjust(low, "0")


_INTEGER = re.compile(r"-?(?:0|[1-9][0-9]*)")


def read_integer(text: str, *, path: str = "$") -> int:
    """Read an integer in strict notation.

    Raises MalformedError for any other spelling and LimitError beyond
    DIGITS_LIMIT digits, before the conversion.
    """
    if not _INTEGER.fullmatch(text) or text == "-0":
        raise MalformedError(
            f"'{shorten(text)}' is not an integer in strict notation", path=path
        )
    _check_digits(len(text.lstrip("-")), path)
    return -read_natural(text[1:]) if text[0] == "-" else read_natural(text)


def _check_digits(count: int, path: str) -> None:
    if count > DIGITS_LIMIT:
        raise LimitError(
            f"{path}: an integer of {count} digits; the limit is {DIGITS_LIMIT}"
        )


# --------------------------------------------------------------------------
# rationals


def read_rational(text: str, *, path: str = "$") -> Fraction:
    """Read a rational number in strict notation (errors as `read_integer`)."""
    top, slash, bottom = text.partition("/")
    numerator = read_integer(top, path=path)
    if not slash:
        return Fraction(numerator)
    denominator = read_integer(bottom, path=path)
    if denominator < 2 or gcd(numerator, denominator) != 1:
        raise MalformedError(
            f"'{shorten(text)}' is not a rational in lowest terms", path=path
        )
    return Fraction(numerator, denominator)


def write_rational(value: Fraction | int) -> str:
    """Write a rational number in strict notation."""
    value = Fraction(value)
    if value.denominator == 1:
        return write_integer(value.numerator)
    return f"{write_integer(value.numerator)}/{write_integer(value.denominator)}"


# --------------------------------------------------------------------------
# polynomials

_TERM = re.compile(
    r"(?P<sign>\A-?| [+-] )"
    r"(?:(?P<num>[0-9]+)(?:/(?P<den>[0-9]+))?(?P<star>\*(?=x))?)?"
    r"(?P<x>x(?:\^(?P<exp>[0-9]+))?)?"
)


def read_polynomial(text: str, *, path: str = "$") -> Polynomial:
    """Read a polynomial in strict notation, in the variable x.

    Raises MalformedError unless `text` is exactly what `write_polynomial`
    writes, and LimitError for a degree above DEGREE_LIMIT or an integer above
    DIGITS_LIMIT digits, before anything of that size is built.
    """
    coefficients: list[int | Fraction] = []
    common = 1
    for k, c in _read_terms(text, path):
        coefficients = coefficients or [0] * (k + 1)
        if k >= len(coefficients) or coefficients[k]:
            raise MalformedError("the terms are not in descending order", path=path)
        coefficients[k] = c
        common = lcm(common, c.denominator)
        _check_digits(common.bit_length() * 3 // 10, path)
    result = Polynomial.from_coefficients(coefficients)
    if write_polynomial(result) != text:
        raise MalformedError(
            f"'{shorten(text)}' is not a polynomial in strict notation "
            f"(canonical: '{shorten(write_polynomial(result))}')",
            path=path,
        )
    return result


def _read_terms(text: str, path: str) -> Iterable[tuple[int, Fraction]]:
    end = 0
    while end < len(text):
        match = _TERM.match(text, end) if end else _TERM.match(text)
        if match is None or match.end() == end or not (match["num"] or match["x"]):
            raise MalformedError(
                f"'{shorten(text[end:])}' does not continue a polynomial in strict "
                f"notation (character {end + 1})",
                path=path,
            )
        end = match.end()
        yield _read_exponent(match, path), _read_coefficient(match, path)
    if not text:
        raise MalformedError("an empty text is not a polynomial", path=path)


def _read_exponent(match: re.Match[str], path: str) -> int:
    if match["x"] is None:
        return 0
    digits = match["exp"] or "1"
    if len(digits) > 9 or int(digits) > DEGREE_LIMIT:
        raise LimitError(
            f"{path}: degree {shorten(digits, 30)}; the limit is {DEGREE_LIMIT}"
        )
    return int(digits)


def _read_coefficient(match: re.Match[str], path: str) -> Fraction:
    numerator, denominator = match["num"] or "1", match["den"] or "1"
    _check_digits(len(numerator), path)
    _check_digits(len(denominator), path)
    bottom = read_natural(denominator)
    if bottom == 0:
        raise MalformedError("a coefficient has denominator 0", path=path)
    value = Fraction(read_natural(numerator), bottom)
    return -value if "-" in match["sign"] else value


def write_polynomial(polynomial: Polynomial, letter: str = "x") -> str:
    """Write a polynomial in strict notation (in another letter for people)."""
    pieces: list[str] = []
    for k in range(polynomial.degree, -1, -1):
        if polynomial.numerators[k]:
            pieces.append(_write_term(polynomial.coefficient(k), k, letter, not pieces))
    return "".join(pieces) or "0"


def _write_term(c: Fraction, k: int, letter: str, first: bool) -> str:
    sign = ("-" if c < 0 else "") if first else (" - " if c < 0 else " + ")
    power = "" if k == 0 else letter if k == 1 else f"{letter}^{k}"
    if abs(c) == 1 and power:
        return sign + power
    return sign + write_rational(abs(c)) + ("*" if power else "") + power
