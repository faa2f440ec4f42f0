"""The rational function that an expression denotes, with limits before the work.

Sizes are estimated before every product and power; the sum of the sizes of all
results is bounded by WORK_LIMIT, so that no short text can run for long.
Sums and products of many parts are combined in balanced order, and monomials
are collected without any polynomial arithmetic.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import lcm
from typing import TypeVar

from certgen.errors import CertgenError
from certgen.exact.rational_functions import RationalFunction
from certgen.notation.source import WORK_LIMIT, Source
from certgen.notation.tree import (
    Name,
    Node,
    Number,
    Power,
    Product,
    Root,
    Sum,
    children,
    fold,
)
from certgen.polynomial import DEGREE_LIMIT, DIGITS_LIMIT, Polynomial, read_natural

__all__ = ["Evaluator", "balanced"]

_BITS_LIMIT = 4 * DIGITS_LIMIT  # a little above DIGITS_LIMIT digits
_WORD = 64

T = TypeVar("T")


def balanced(values: Sequence[T], combine: Callable[[T, T], T]) -> T:
    """Combine values, at least one, in neighbouring pairs until one is left."""
    layer = list(values)
    while len(layer) > 1:
        pairs = [combine(a, b) for a, b in zip(layer[::2], layer[1::2], strict=False)]
        layer = pairs + layer[len(pairs) * 2 :]
    return layer[0]


@dataclass(slots=True)
class Evaluator:
    """Evaluates the trees of one text; `reason` is the hint for roots in them."""

    source: Source
    variable: str
    reason: str = "only rational functions are read here"
    work: int = 0

    # -- exact arithmetic with limits

    def add(self, a: RationalFunction, b: RationalFunction, node: Node) -> RationalFunction:
        if not (a.is_polynomial and b.is_polynomial):
            self._bound(a, b, node)
        self._spend(a.addition_cost(b), node)
        return self._paid(a + b, node)

    def multiply(
        self, a: RationalFunction, b: RationalFunction, node: Node
    ) -> RationalFunction:
        self._bound(a, b, node)
        self._spend(a.multiplication_cost(b), node)
        return self._paid(a * b, node)

    def divide(
        self, a: RationalFunction, b: RationalFunction, node: Node, place: int
    ) -> RationalFunction:
        """Return a/b; the error of a division by zero points at `place`."""
        if b.is_zero:
            raise self.source.error(
                place, place + 1,
                "division by zero: the denominator is the zero polynomial")
        return self.multiply(a, b.inverse(), node)

    def power(self, base: RationalFunction, exponent: int, node: Power) -> RationalFunction:
        if base.is_zero and exponent <= 0:
            if exponent < 0:
                raise self.source.error(
                    node.place, node.place + 1,
                    "division by zero: a negative power of the zero polynomial")
            raise self.source.error(node.start, node.end, "0^0 is not defined")
        size = abs(exponent)
        if base.degree and base.degree * size > DEGREE_LIMIT:
            raise self._degree(base.degree * size, node)
        length = max(base.num.length(), base.den.length())
        if size * (base.height_bits + length.bit_length() - 1) > _BITS_LIMIT:
            raise self._digits(node)
        self._spend(size * base.degree * base.height_bits, node)
        return self._paid(base**exponent, node)

    def _degree(self, degree: int, node: Node) -> CertgenError:
        return self.source.limit(
            node.start, f"degree {degree} before any cancellation; the limit is {DEGREE_LIMIT}")

    def _digits(self, node: Node) -> CertgenError:
        return self.source.limit(
            node.start, f"integers of more than {DIGITS_LIMIT} digits, or nearly; "
            "this is the limit")

    def _bound(self, a: RationalFunction, b: RationalFunction, node: Node) -> None:
        if a.degree + b.degree > DEGREE_LIMIT:
            raise self._degree(a.degree + b.degree, node)
        terms = min(a.degree, b.degree) + 1
        if a.height_bits + b.height_bits + terms.bit_length() > _BITS_LIMIT:
            raise self._digits(node)
        self._spend((a.degree + b.degree) * (a.height_bits + b.height_bits), node)

    def _spend(self, amount: int, node: Node) -> None:
        self.work += amount
        if self.work > WORK_LIMIT:
            raise self.source.limit(
                node.start, "the expression takes too much work to multiply out; "
                f"the limit is {WORK_LIMIT} bits of intermediate results")

    def _paid(self, value: RationalFunction, node: Node) -> RationalFunction:
        if value.height_bits > _BITS_LIMIT:
            raise self._digits(node)
        size = value.num.length() + value.den.length()
        self._spend(size * (_WORD + value.height_bits), node)
        return value

    # -- trees

    def evaluate(self, root: Node) -> RationalFunction:
        """Return the value of a tree without the unknown function."""
        return fold(root, self._combine, _parts(self.variable))

    def constant(self, node: Power) -> Fraction:
        """Return the exponent of a power, which must be a rational number."""
        value = self.evaluate(node.exponent)
        if not value.is_constant:
            raise self.source.error(node.place, node.end, "the exponent is not a number",
                                    "write a number, such as x^2 or x^(1/2)")
        return value.constant

    def _combine(self, node: Node, values: Sequence[RationalFunction]) -> RationalFunction:
        match node:
            case Number(digits=digits):
                return RationalFunction.integer(read_natural(digits))
            case Name(name=name) if name == self.variable:
                return RationalFunction.variable()
            case Sum():
                return self._sum(node, values)
            case Product():
                return self.product(node, values)
            case Power():
                return self._power(node, values)
            case Root():
                raise self.source.error(node.start, node.end, "a root", self.reason)
        raise self.source.error(
            node.start, node.end,
            f"'{self.source.text[node.start : node.end][:40]}' may only be a factor")

    def _sum(self, node: Sum, values: Sequence[RationalFunction]) -> RationalFunction:
        monomials: list[tuple[int, Fraction]] = []
        signed: list[RationalFunction] = []
        rest = iter(values)
        for minus, term in node.terms:
            monomial = _monomial(term, self.variable)
            if monomial is None:
                value = next(rest)
                signed.append(-value if minus else value)
            else:
                k, c = monomial
                monomials.append((k, -c if minus else c))
        if monomials:
            signed.append(self._polynomial(monomials, node))
        return balanced(signed, lambda a, b: self.add(a, b, node))

    def _polynomial(
        self, monomials: list[tuple[int, Fraction]], node: Node
    ) -> RationalFunction:
        coefficients: list[int | Fraction] = [0] * (max(k for k, _ in monomials) + 1)
        common = 1
        for k, c in monomials:
            coefficients[k] += c
            common = lcm(common, coefficients[k].denominator)
            if common.bit_length() > _BITS_LIMIT:
                raise self._digits(node)
        value = Polynomial.from_coefficients(coefficients)
        return self._paid(RationalFunction.polynomial(value), node)

    def product(self, node: Product, values: Sequence[RationalFunction]) -> RationalFunction:
        """Return the product of the values of the factors of a node."""
        pieces = list(zip(node.factors, values, strict=True))
        top = balanced([v for (_, place), v in pieces if place is None],
                       lambda a, b: self.multiply(a, b, node))
        below = []
        for (_, place), value in pieces:
            if place is not None:
                below.append(self.divide(RationalFunction.integer(1), value, node, place))
        if not below:
            return top
        return self.multiply(
            top, balanced(below, lambda a, b: self.multiply(a, b, node)), node)

    def _power(self, node: Power, values: Sequence[RationalFunction]) -> RationalFunction:
        base, exponent = values
        if not exponent.is_constant:
            raise self.source.error(node.place, node.end,
                                    "the exponent is not a number",
                                    "write an integer, such as x^2")
        if exponent.constant.denominator != 1:
            raise self.source.error(node.place, node.end,
                                    "the exponent is not an integer", self.reason)
        return self.power(base, exponent.constant.numerator, node)


# --------------------------------------------------------------------------
# monomials: the terms of a printed polynomial


def _parts(variable: str) -> Callable[[Node], tuple[Node, ...]]:
    """The parts of a node that must be evaluated: all but monomial terms of sums."""

    def parts(node: Node) -> tuple[Node, ...]:
        below = children(node)
        if isinstance(node, Sum):
            return tuple(part for part in below if _monomial(part, variable) is None)
        return below

    return parts


def _monomial(node: Node, variable: str) -> tuple[int, Fraction] | None:
    """Return (k, c) for a node that is plainly c*x^k, else None."""
    match node:
        case Product(factors=factors) if len(factors) <= 4:
            return _monomial_product(factors, variable)
    return _monomial_factor(node, variable)


def _monomial_factor(node: Node, variable: str) -> tuple[int, Fraction] | None:
    match node:
        case Number(digits=digits):
            return 0, Fraction(read_natural(digits))
        case Name(name=name) if name == variable:
            return 1, Fraction(1)
        case Power(base=Name(name=name), exponent=Number(digits=digits)):
            if name == variable and len(digits) < 6 and int(digits) <= DEGREE_LIMIT:
                return int(digits), Fraction(1)
        case Product(factors=((Number(digits=top), None), (Number(digits=low), int()))):
            if low.strip("0"):
                return 0, Fraction(read_natural(top), read_natural(low))
    return None


def _monomial_product(
    factors: tuple[tuple[Node, int | None], ...], variable: str
) -> tuple[int, Fraction] | None:
    degree, coefficient = 0, Fraction(1)
    for factor, place in factors:
        monomial = _monomial_factor(factor, variable)
        if monomial is None or (place is not None and (monomial[0] or not monomial[1])):
            return None
        degree += monomial[0]
        coefficient = (coefficient * monomial[1] if place is None
                       else coefficient / monomial[1])
    return (degree, coefficient) if degree <= DEGREE_LIMIT else None
