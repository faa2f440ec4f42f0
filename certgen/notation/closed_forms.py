"""Closed forms: a product of powers with rational exponents, up to a constant.

Products, quotients, powers and roots are split into their factors, so
(x*(x-1))^(1/2) is x^(1/2)*(x-1)^(1/2), and a sum is one base as it was written:
(x^2-x)^(1/2) keeps the base x^2 - x.  A sum that is a rational function gives
two bases, its numerator and its denominator in lowest terms.  Equal bases are
merged; different bases are never cancelled against each other.
"""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from certgen.claim import Letters, Power
from certgen.errors import ExpressionError
from certgen.exact.rational_functions import RationalFunction
from certgen.notation.ambiguous import is_argument
from certgen.notation.evaluate import Evaluator
from certgen.notation.parser import Names, Parser
from certgen.notation.source import Source, without_full_stop
from certgen.notation.tokens import Kind, Token, tokenise
from certgen.notation.tree import Name, Node, Number, Product, Root, Sum, fold
from certgen.notation.tree import Power as PowerNode
from certgen.polynomial import Polynomial, read_natural

__all__ = ["EXPONENT_BITS_LIMIT", "read_closed_form"]

EXPONENT_BITS_LIMIT = 256
"""The largest number of bits of numerator and denominator of an exponent."""

_Powers = dict[Polynomial, Fraction]
_X = Polynomial((0, 1))


def read_closed_form(text: str, letters: Letters) -> tuple[Power, ...]:
    """Read a product of powers; constants (numbers, pi, a letter C or c) are dropped.

    `y = ` or `y(x) = ` may stand before it.  Returns powers of distinct
    primitive bases, sorted by Polynomial.sort_key, no exponent zero; empty for a
    constant.  Raises ExpressionError with the place, and LimitError.

    >>> read_closed_form("3*sqrt(4*x)", Letters())
    (Power(base=Polynomial(numerators=(0, 1), denominator=1), exponent=Fraction(1, 2)),)
    """
    source = Source(without_full_stop(text))
    if not text.strip():
        raise ExpressionError("the closed form is empty", column=1,
                              hint="write a product, such as x^(1/2)*(x^2-1)^(1/2)")
    constants = frozenset({"pi", "C", "c"}) - {letters.variable, letters.function}
    tokens = _without_function(tokenise(source), letters)
    node = Parser(source, tokens, Names(letters.variable, None, constants)).expression()
    powers = _Reader(source, letters.variable).read(node)
    return tuple(
        Power(base=base, exponent=powers[base])
        for base in sorted(powers, key=lambda p: p.sort_key) if powers[base]
    )


def _without_function(tokens: list[Token], letters: Letters) -> list[Token]:
    """Drop a leading `y =` or `y(x) =`."""
    if tokens[0].kind is Kind.NAME and tokens[0].value == letters.function:
        applied = is_argument(tokens, 1, letters.variable) and "(" in tokens[1].value
        length = 5 if applied else 2
        if len(tokens) > length and tokens[length - 1].is_operator("="):
            return tokens[length:]
    return tokens


class _Reader:
    def __init__(self, source: Source, variable: str) -> None:
        self.source = source
        self.variable = variable
        self.evaluator = Evaluator(
            source, variable,
            "a closed form is one product of powers; sums are read inside a base only")

    def read(self, root: Node) -> _Powers:
        return fold(root, self._combine, _parts)

    def _combine(self, node: Node, values: Sequence[_Powers]) -> _Powers:
        match node:
            case Name(name=name):
                return {_X: Fraction(1)} if name == self.variable else {}
            case Product():
                return self._product(node, values)
            case PowerNode():
                exponent = self.evaluator.constant(node)
                return self._scale(values[0], exponent, node)
            case Root():
                index = read_natural(node.index.digits)
                return self._scale(values[0], Fraction(1, index), node)
            case Sum() if values:
                return values[0]
        return self._bases(node)

    def _bases(self, node: Node) -> _Powers:
        """The bases of a number or of a sum, which is a rational function."""
        value: RationalFunction = self.evaluator.evaluate(node)
        if value.is_zero:
            raise self.source.error(node.start, node.end, "a factor is zero",
                                    "a solution is not the zero function")
        result: _Powers = {}
        for polynomial, exponent in ((value.numerator(), 1), (value.denominator(), -1)):
            if not polynomial.is_constant:
                result[_primitive(polynomial)] = Fraction(exponent)
        return result

    def _product(self, node: Product, values: Sequence[_Powers]) -> _Powers:
        result: _Powers = {}
        for (_, place), powers in zip(node.factors, values, strict=True):
            for base, exponent in powers.items():
                signed = exponent if place is None else -exponent
                result[base] = result.get(base, Fraction(0)) + signed
                self._check(result[base], node)
        return result

    def _scale(self, powers: _Powers, factor: Fraction, node: Node) -> _Powers:
        self._check(factor, node)
        result = {base: exponent * factor for base, exponent in powers.items()}
        for exponent in result.values():
            self._check(exponent, node)
        return result

    def _check(self, exponent: Fraction, node: Node) -> None:
        bits = max(exponent.numerator.bit_length(), exponent.denominator.bit_length())
        if bits > EXPONENT_BITS_LIMIT:
            raise self.source.limit(
                node.start, f"an exponent of {bits} bits; the limit is {EXPONENT_BITS_LIMIT}")


def _primitive(polynomial: Polynomial) -> Polynomial:
    content = polynomial.content
    if polynomial.numerators[-1] < 0:
        content = -content
    return Polynomial(tuple(c // content for c in polynomial.numerators))


def _parts(node: Node) -> tuple[Node, ...]:
    """What is read as a product of powers: everything but the terms of a sum."""
    match node:
        case Product(factors=factors):
            return tuple(factor for factor, _ in factors)
        case PowerNode(base=base) | Root(base=base):
            return (base,)
        case Sum(terms=((_, term),)) if not isinstance(term, Number):
            return (term,)
    return ()
