"""Recursive descent over the flat list of symbols: one parser for both notations.

    equation  =  sum "=" sum
    sum       =  [sign] product { sign product }
    product   =  power { ("*" | "/" | nothing) power }
    power     =  primary [ "^" exponent ]
    primary   =  number | letter | y ["'"] ["(" x ")"] | dy/dx | (d/dx | D) y
              |  "(" sum ")" | \\frac arg arg | \\sqrt["["n"]"] arg | sqrt "(" sum ")"

What people read in two ways is refused: a sign after an operator, a product
without a sign after a division (1/2x), a number after a factor (x 2), a number
before a numerical \\frac, a chain of powers, x^23 in LaTeX, D y*x, x^1/2, and what
only braces hold together, which are not printed.
"""

from __future__ import annotations

from certgen.notation.ambiguous import braces_hide, is_argument, visible
from certgen.notation.cursor import Cursor, Names
from certgen.notation.letters import word_place
from certgen.notation.tokens import CLOSING, Kind, Token
from certgen.notation.tree import (
    Derivative,
    Name,
    Node,
    Number,
    Power,
    Product,
    Root,
    Sum,
    has_function,
)

__all__ = ["Names", "Parser"]

_STARTS = (Kind.NUMBER, Kind.NAME, Kind.OPEN, Kind.FRACTION, Kind.ROOT, Kind.DERIVATIVE)
_INDEX_DIGITS = 9


class Parser(Cursor):
    """One pass over the symbols of a text; every method raises ExpressionError."""

    # -- the grammar

    def equation(self) -> tuple[Node, Node]:
        left = self.sum()
        if not self.token.is_operator("="):
            if self.token.kind is Kind.END:
                raise self.source.error(
                    0, min(len(self.source.text), 40), "not an equation: write ... = ...")
            raise self.unexpected(self.token, "an operator or '='")
        self.advance()
        right = self.sum()
        self.end()
        return left, right

    def expression(self) -> Node:
        node = self.sum()
        self.end()
        return node

    def end(self) -> None:
        if self.token.kind is not Kind.END:
            raise self.unexpected(self.token, "an operator or the end")

    def sum(self) -> Node:
        start = self.token.start
        terms: list[tuple[bool, Node]] = []
        while not terms or self.token.is_operator("+", "-"):
            minus = self._sign()
            terms.append((minus, self.product()))
        if len(terms) == 1 and not terms[0][0]:
            return terms[0][1]
        return Sum(tuple(terms), start, self.tokens[self.position - 1].end,
                   any(has_function(term) for _, term in terms))

    def _sign(self) -> bool:
        if not self.token.is_operator("+", "-"):
            return False
        return self.advance().value == "-"

    def product(self) -> Node:
        start, first = self.token.start, self.token
        factors: list[tuple[Node, int | None]] = [(self.power(), None)]
        operator = "*"
        while self.token.is_operator("*", "/") or self.token.kind in _STARTS:
            self._check_reach()
            if self.token.is_operator("*", "/"):
                sign = self.advance()
                operator = sign.value
                place = sign.start if operator == "/" else None
                self._refuse_sign(sign)
                self._refuse_root(sign, factors[-1][0])
                first = self.token
            else:
                self._check_implicit(operator, first, factors[-1][0])
                place = None
            factors.append((self.power(), place))
        if len(factors) == 1:
            return factors[0][0]
        return Product(tuple(factors), start, self.tokens[self.position - 1].end,
                       any(has_function(factor) for factor, _ in factors))

    def _check_implicit(self, operator: str, first: Token, before: Node) -> None:
        """Refuse products without a sign that can be read in two ways."""
        token = self.token
        if operator == "/":
            function = token.kind is Kind.DERIVATIVE or (
                token.kind is Kind.NAME and token.value == self.names.function)
            if not (first.kind is Kind.OPEN and first.value != "{" and function):
                raise self.error(
                    token, "a product without a sign after a division is ambiguous",
                    "write (1/2)*x or 1/(2*x) for 1/2x")
        self._check_argument(before)
        token = self.tokens[visible(self.tokens, self.position)]
        if token.kind is Kind.NUMBER:
            two = isinstance(before, Number)
            raise self.error(
                token, "two numbers side by side" if two else "a number after a factor",
                "write a product with '*'" + ("" if two else ", a power with '^'"))
        if token.kind is Kind.FRACTION and isinstance(before, Number):
            self._refuse_mixed(token)

    def _refuse_mixed(self, token: Token) -> None:
        """A number before a purely numerical fraction may mean the sum of both."""
        position = self.position
        self.position = visible(self.tokens, position)
        fraction = self.primary()
        self.position = position
        if isinstance(fraction, Product) and all(
            isinstance(factor, Number) for factor, _ in fraction.factors
        ):
            raise self.error(token, "a number before a fraction of numbers is ambiguous",
                             "write the product with '\\cdot' or the sum with '+'")

    def power(self) -> Node:
        first, start = self.position, self.token.start
        base = self.primary()
        if not self.token.is_operator("^"):
            return base
        self._refuse_fraction(first)
        self.advance()
        place = self.token.start
        exponent = self._exponent()
        self._refuse_order(base, place, exponent)
        if self.token.is_operator("^"):
            raise self.error(self.token, "a chain of powers",
                             "an exponent is one number; put a power of a power in "
                             "parentheses")
        return Power(base, exponent, place, start, self.tokens[self.position - 1].end,
                     has_function(base) or has_function(exponent))

    def _exponent(self) -> Node:
        token = self.token
        if self.latex:
            if token.kind is Kind.NUMBER and len(token.value) > 1:
                raise self.error(token, "TeX raises only the first digit",
                                 f"write ^{{{token.value[:40]}}}")
            if token.kind is Kind.NUMBER or (token.kind is Kind.OPEN and token.value == "{"):
                return self._number() if token.kind is Kind.NUMBER else self._group()
            raise self.unexpected(token, "an exponent in braces, such as x^{-1}")
        if token.is_operator("-"):
            self.advance()
            number = self._number()
            return Sum(((True, number),), token.start, number.end, False)
        if token.kind is Kind.OPEN:
            return self.primary()
        return self._number()

    def _number(self) -> Number:
        token = self.token
        if token.kind is not Kind.NUMBER:
            raise self.unexpected(token, "a number, such as x^2, x^-1 or x^(1/2)")
        self.advance()
        return Number(token.value, token.start, token.end)

    def primary(self) -> Node:
        token = self.token
        match token.kind:
            case Kind.NUMBER:
                return self._number()
            case Kind.OPEN:
                return self._braces() if token.value == "{" else self._group()
            case Kind.NAME:
                return self._name()
            case Kind.DERIVATIVE:
                return self._derivative()
            case Kind.FRACTION:
                return self._fraction()
            case Kind.ROOT:
                return self._root()
        if token.is_operator("+", "-"):
            raise self.error(token, "a sign in the middle", "put it in parentheses")
        raise self.unexpected(token, "a number, a letter or '('")

    def _braces(self) -> Node:
        first = self.position
        node = self._group()
        before = self.tokens[first - 1] if first else None
        inner = self.tokens[visible(self.tokens, first)]
        parentheses = inner.kind is Kind.OPEN and node.start > inner.start
        if not parentheses and braces_hide(node, before, self.token):
            raise self.source.error(
                self.tokens[first].start, self.tokens[self.position - 1].end,
                "braces hold together what is printed without them",
                "write \\left( and \\right)")
        return node

    def _group(self) -> Node:
        opened = self.advance()
        if self.token.kind is Kind.CLOSE:
            raise self.error(self.token, "empty parentheses", "write an expression inside")
        node = self.sum()
        self._close(opened)
        return node

    def _close(self, opened: Token) -> None:
        token = self.token
        if token.kind is Kind.CLOSE and token.value == CLOSING[opened.value]:
            self.advance()
        elif token.kind is Kind.END:
            raise self.error(opened, f"'{opened.value}' is never closed",
                             f"add '{CLOSING[opened.value]}'")
        else:
            raise self.unexpected(token, f"an operator or '{CLOSING[opened.value]}'")

    # -- letters

    def _name(self) -> Node:
        token = self.advance()
        primes = 0
        end = token.end
        while self.token.kind is Kind.PRIME:
            if token.value != self.names.function:
                self._known(token)
                raise self.unexpected(self.token, "")
            primes += 1
            end = self.advance().end
        if token.value == self.names.function:
            if primes > 1:
                raise self.source.error(token.start, end, "second order is not supported",
                                        "an equation of first order has y' and y")
            self._argument_of_function()
            if primes:
                return Derivative(token.value, token.start, end)
            return Name(token.value, token.start, end, True)
        self._known(token)
        if token.value in self.names.constants and is_argument(
                self.tokens, self.position, self.names.variable):
            raise self.error(token, f"'{token.value}' may be a function here",
                             f"write {token.value}*{self.names.variable} for a product")
        return Name(token.value, token.start, end)

    def _known(self, token: Token) -> None:
        """Raise ExpressionError for a letter that is no declared name."""
        if token.value == self.names.variable or token.value in self.names.constants:
            return
        word = token.word or token.value
        start = word_place(self.source, token)
        known = ", ".join(
            n for n in (self.names.variable, self.names.function) if n is not None)
        hint = f"known here: {known}; a name is one letter"
        if word in ("e", "i", "pi", "\\pi"):
            hint = "the coefficients are rational numbers"
        raise self.source.error(start, max(token.end, start + len(word)),
                                f"unknown name '{word}'", hint)

    def _argument_of_function(self) -> None:
        """Read (x) after the function; y(x+1) is refused."""
        opened = self.token
        if opened.kind is not Kind.OPEN or "(" not in opened.value:
            return
        self.advance()
        argument = self.token
        if argument.kind is Kind.NAME and argument.value == self.names.variable:
            self.advance()
            if self.token.kind is Kind.CLOSE:
                self._close(opened)
                self.applied = self.position
                return
        if argument.error is not None:
            raise argument.error
        raise self.error(
            argument, f"the function is read at {self.names.variable} only",
            f"write {self.names.function}({self.names.variable}), or a product with '*'")

    def _derivative(self) -> Node:
        token = self.advance()
        if token.value:
            self._check_function(token)
            if is_argument(self.tokens, self.position, self.names.variable) and (
                    "(" in self.token.value):
                self._argument_of_function()
            return Derivative(token.value, token.start, token.end)
        parentheses = self.token.kind is Kind.OPEN
        node = self.primary()
        if isinstance(node, Derivative):
            raise self.source.error(token.start, node.end, "second order is not supported",
                                    "an equation of first order has y' and y")
        if not (isinstance(node, Name) and node.is_function):
            raise self.error(token, "a derivative must stand before the unknown function",
                             "differentiate nothing but y itself")
        if not parentheses:
            self.bare = self.position
        return Derivative(node.name, token.start, node.end)

    def _check_function(self, token: Token) -> None:
        if token.value != self.names.function:
            raise self.error(token, f"the derivative of '{token.value}'",
                             f"the unknown function is {self.names.function}")

    # -- LaTeX

    def _fraction(self) -> Node:
        token = self.advance()
        top, bottom = self._argument(token), self._argument(token)
        return Product(((top, None), (bottom, token.start)), token.start,
                       self.tokens[self.position - 1].end,
                       has_function(top) or has_function(bottom))

    def _argument(self, macro: Token) -> Node:
        """Read one argument of a macro: a group, one digit or one letter."""
        token = self.token
        if token.kind is Kind.OPEN and token.value == "{":
            return self._group()
        if token.kind is Kind.NUMBER:
            if len(token.value) == 1:
                return self._number()
            middle = token.start + 1
            self.tokens[self.position] = token._replace(value=token.value[1:], start=middle)
            return Number(token.value[0], token.start, middle)
        if token.kind is Kind.NAME:
            self.advance()
            if token.value != self.names.function:
                self._known(token)
                return Name(token.value, token.start, token.end)
            return Name(token.value, token.start, token.end, True)
        raise self.unexpected(token, f"an argument of {macro.value} in braces")

    def _root(self) -> Node:
        token = self.advance()
        index = Number("2", token.start, token.end)
        if not self.latex:
            if self.token.kind is not Kind.OPEN or self.token.value != "(":
                raise self.unexpected(self.token, "sqrt(...); a cube root is x^(1/3)")
            base = self._group()
        else:
            if self.token.kind is Kind.OPEN and self.token.value == "[":
                index = self._index()
            base = self._argument(token)
        return Root(base, index, token.start, self.tokens[self.position - 1].end,
                    has_function(base))

    def _index(self) -> Number:
        opened = self.advance()
        index = self._number()
        self._close(opened)
        if not index.digits.strip("0"):
            raise self.source.error(index.start, index.end, "a root of order zero")
        if len(index.digits) > _INDEX_DIGITS:
            raise self.source.limit(
                index.start, f"the order of a root has more than {_INDEX_DIGITS} digits")
        return index
