"""The place in the list of symbols, and what is refused because it reads in two ways."""

from __future__ import annotations

from dataclasses import dataclass

from certgen.claim import Letters
from certgen.errors import ExpressionError
from certgen.notation.ambiguous import is_argument, looks_like_a_root, visible
from certgen.notation.source import Source
from certgen.notation.tokens import Kind, Token, is_latex
from certgen.notation.tree import Derivative, Name, Node, Number, has_function

__all__ = ["Cursor", "Names"]


@dataclass(frozen=True, slots=True)
class Names:
    """The names that may occur; no function in an expression without one."""

    variable: str
    function: str | None = None
    constants: frozenset[str] = frozenset()

    @classmethod
    def of(cls, letters: Letters) -> Names:
        return cls(letters.variable, letters.function)


class Cursor:
    """Where the parser stands; every method raises ExpressionError."""

    def __init__(
        self, source: Source, tokens: list[Token], names: Names, *, latex: bool | None = None
    ) -> None:
        self.source = source
        self.tokens = list(tokens)
        self.names = names
        self.latex = is_latex(source.text) if latex is None else latex
        self.position = 0
        self.applied = -1  # where the argument of the function ended, as in y(x)
        self.bare = -1  # where the operand of d/dx or D ended, if not in parentheses

    # -- moving on, and errors

    @property
    def token(self) -> Token:
        return self.tokens[self.position]

    def advance(self) -> Token:
        token = self.token
        if token.error is not None:
            raise token.error
        self.position += 1
        return token

    def error(self, token: Token, message: str, hint: str | None = None) -> ExpressionError:
        return self.source.error(token.start, token.end, message, hint)

    def unexpected(self, token: Token, wanted: str) -> ExpressionError:
        """The error for a symbol that cannot stand here."""
        if token.error is not None:
            return token.error
        if token.kind is Kind.END:
            where = "is empty" if self.position == 0 else "ends too early"
            return self.error(token, f"the expression {where}", f"expected {wanted}")
        if token.kind is Kind.PRIME:
            return self.error(
                token, "a prime is only read as the derivative mark of the unknown function",
                "write y' or y'(x)")
        return self.error(
            token, f"unexpected '{self.source.text[token.start : token.end][:40]}'",
            f"expected {wanted}")

    # -- what reads in two ways

    def _refuse_sign(self, sign: Token) -> None:
        if self.token.is_operator("+", "-"):
            raise self.error(self.token, f"a sign after '{sign.value}'",
                             "put the signed factor in parentheses")

    def _refuse_root(self, sign: Token, before: Node) -> None:
        """Refuse x^1/2, and x^3/2 in a plain closed form: most mean x^(3/2)."""
        closed_form = bool(self.names.constants) and not self.latex
        bare = self.tokens[self.position - 2].kind is Kind.NUMBER
        if (bare and sign.value == "/" and self.token.kind is Kind.NUMBER
                and looks_like_a_root(before, any_exponent=closed_form)):
            raise self.error(sign, "a division right after a power is ambiguous",
                             "write x^(1/2) for a root, (x^3)/2 for a division")

    def _check_reach(self) -> None:
        if self.bare == self.position:
            raise self.error(self.token, "it is not clear what is differentiated",
                             "put the function in parentheses, such as D(y)*x or d/dx(y)*x")

    def _check_argument(self, before: Node) -> None:
        """Refuse (y)(x), y[x] and {y}(x+1): an argument or a product?"""
        opened = self.tokens[visible(self.tokens, self.position)]
        if (not isinstance(before, Name | Derivative) or not has_function(before)
                or opened.kind is not Kind.OPEN or self.applied == self.position):
            return
        braces = "{" in self.token.value or "}" in self.tokens[self.position - 1].value
        k = visible(self.tokens, self.position)
        if braces or is_argument(self.tokens, k, self.names.variable):
            f = self.names.function
            raise self.error(opened, f"the argument of {f}, or a product",
                             f"write {f}({self.names.variable}), or a product with '*'")

    def _refuse_fraction(self, first: int) -> None:
        if self.tokens[visible(self.tokens, first)].kind is Kind.FRACTION:
            raise self.error(self.token, "a power of a fraction without parentheses",
                             "put the fraction in parentheses")

    def _refuse_order(self, base: Node, place: int, exponent: Node) -> None:
        """Refuse y^{(1)}, which is the derivative for some; y^1 is a power."""
        one = isinstance(exponent, Number) and exponent.digits == "1"
        if one and has_function(base) and self.source.text.startswith(("(", "{("), place):
            raise self.source.error(base.start, exponent.end, "a power or a derivative",
                                    "write y' for the derivative")
