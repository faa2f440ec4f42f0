"""Exact rational functions over Q in one variable, on FLINT.

A rational function is n/d with n, d in Z[x], gcd(n, d) = 1 in Z[x] (so no prime
divides both contents) and lc(d) > 0: the normal form of `FirstOrderEquation`.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from flint import fmpz_poly

from certgen.polynomial import Polynomial

__all__ = ["RationalFunction", "from_fmpz_poly", "to_fmpz_poly"]


def to_fmpz_poly(polynomial: Polynomial) -> fmpz_poly:
    """Return the numerators of `polynomial` as a FLINT polynomial."""
    return fmpz_poly(list(polynomial.numerators))


def from_fmpz_poly(value: fmpz_poly, denominator: int = 1) -> Polynomial:
    """Return value/denominator, denominator >= 1, as a neutral polynomial."""
    numerators = [int(c) for c in value.coeffs()]
    if denominator == 1:
        return Polynomial.from_integers(numerators)
    return Polynomial.from_coefficients(Fraction(n, denominator) for n in numerators)


def _quotient(value: fmpz_poly, divisor: fmpz_poly) -> fmpz_poly:
    return value if divisor.is_one() else value // divisor  # exact: divisor | value


def _gcd_cost(first: fmpz_poly, second: fmpz_poly) -> int:
    if first.length() <= 1 or second.length() <= 1:
        return 0
    bits = max(abs(first.height_bits()), abs(second.height_bits()))
    return int(first.length() * second.length() * (1 + bits // 64))


@dataclass(frozen=True, slots=True, eq=False)
class RationalFunction:
    """num/den in lowest terms over Z[x] with lc(den) > 0 (zero is 0/1).

    Build values with `make`, `integer` and `variable`; the constructor trusts
    its arguments.  Division raises ZeroDivisionError.
    """

    num: fmpz_poly
    den: fmpz_poly

    @classmethod
    def make(cls, num: fmpz_poly, den: fmpz_poly) -> RationalFunction:
        """Return num/den in lowest terms; ZeroDivisionError when den = 0."""
        if den.is_zero():
            raise ZeroDivisionError("the denominator is the zero polynomial")
        if num.is_zero():
            return cls(num, fmpz_poly([1]))
        common = num.gcd(den)
        if den.leading_coefficient() < 0:
            common = -common
        return cls(_quotient(num, common), _quotient(den, common))

    @classmethod
    def integer(cls, value: int) -> RationalFunction:
        return cls(fmpz_poly([value]), fmpz_poly([1]))

    @classmethod
    def variable(cls) -> RationalFunction:
        return cls(fmpz_poly([0, 1]), fmpz_poly([1]))

    @classmethod
    def polynomial(cls, value: Polynomial) -> RationalFunction:
        return cls.make(to_fmpz_poly(value), fmpz_poly([value.denominator]))

    @property
    def is_zero(self) -> bool:
        return bool(self.num.is_zero())

    @property
    def is_polynomial(self) -> bool:
        return bool(self.den.length() == 1)

    @property
    def is_constant(self) -> bool:
        return self.num.length() <= 1 and self.den.length() <= 1

    @property
    def constant(self) -> Fraction:
        """The value of a constant."""
        top = int(self.num[0]) if self.num.length() else 0
        return Fraction(top, int(self.den[0]))

    @property
    def degree(self) -> int:
        """The larger degree of numerator and denominator (0 for constants)."""
        return max(self.num.length(), self.den.length(), 1) - 1

    @property
    def height_bits(self) -> int:
        """The bit length of the largest coefficient."""
        return max(abs(self.num.height_bits()), abs(self.den.height_bits()))

    def addition_cost(self, other: RationalFunction) -> int:
        """About how many machine words the gcd in a sum has to touch."""
        return _gcd_cost(self.den, other.den)

    def multiplication_cost(self, other: RationalFunction) -> int:
        """About how many machine words the gcds in a product have to touch."""
        return _gcd_cost(self.num, other.den) + _gcd_cost(other.num, self.den)

    def __eq__(self, other: object) -> bool:
        if not isinstance(other, RationalFunction):
            return NotImplemented
        return bool(self.num == other.num and self.den == other.den)

    def __hash__(self) -> int:
        return hash((str(self.num), str(self.den)))

    def __neg__(self) -> RationalFunction:
        return RationalFunction(-self.num, self.den)

    def __add__(self, other: RationalFunction) -> RationalFunction:
        common = self.den.gcd(other.den)
        left, right = _quotient(self.den, common), _quotient(other.den, common)
        num = self.num * right + other.num * left
        if num.is_zero():
            return RationalFunction(num, fmpz_poly([1]))
        rest = common if common.is_one() else num.gcd(common)  # Henrici
        return RationalFunction(_quotient(num, rest), left * _quotient(other.den, rest))

    def __sub__(self, other: RationalFunction) -> RationalFunction:
        return self + (-other)

    def __mul__(self, other: RationalFunction) -> RationalFunction:
        if self.is_zero or other.is_zero:
            return RationalFunction.integer(0)
        first, second = self.num.gcd(other.den), other.num.gcd(self.den)
        return RationalFunction(
            _quotient(self.num, first) * _quotient(other.num, second),
            _quotient(self.den, second) * _quotient(other.den, first),
        )

    def inverse(self) -> RationalFunction:
        """Return 1/self; ZeroDivisionError for zero."""
        if self.is_zero:
            raise ZeroDivisionError("the denominator is the zero polynomial")
        if self.num.leading_coefficient() < 0:
            return RationalFunction(-self.den, -self.num)
        return RationalFunction(self.den, self.num)

    def __truediv__(self, other: RationalFunction) -> RationalFunction:
        return self * other.inverse()

    def __pow__(self, exponent: int) -> RationalFunction:
        if exponent < 0:
            return self.inverse() ** -exponent
        return RationalFunction(self.num**exponent, self.den**exponent)

    def numerator(self) -> Polynomial:
        return from_fmpz_poly(self.num)

    def denominator(self) -> Polynomial:
        return from_fmpz_poly(self.den)
