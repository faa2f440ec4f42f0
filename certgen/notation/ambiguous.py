"""What the source says one way and the printed formula another way.

Braces of LaTeX are not printed: `2{x+1}` looks like 2x+1, and `1/{2x}` like 1/2x.
"""

from __future__ import annotations

from certgen.notation.tokens import Kind, Token
from certgen.notation.tree import Node, Number, Power, Product, Sum

__all__ = ["braces_hide", "is_argument", "looks_like_a_root", "visible"]


def visible(tokens: list[Token], k: int) -> int:
    """The position of the first symbol from k on that is printed."""
    while tokens[k].kind is Kind.OPEN and tokens[k].value == "{":
        k += 1
    return k


def is_argument(tokens: list[Token], k: int, variable: str) -> bool:
    """Whether (x) or [x], with the variable alone, stands at position k."""
    kinds = [token.kind for token in tokens[k : k + 3]]
    return (kinds == [Kind.OPEN, Kind.NAME, Kind.CLOSE] and tokens[k].value != "{"
            and tokens[k + 1].value == variable)


def braces_hide(node: Node, before: Token | None, after: Token) -> bool:
    """Whether {node} between two symbols means something else than it looks like."""
    first = before is None or before.kind is Kind.OPEN or before.is_operator("=")
    last = after.kind in (Kind.END, Kind.CLOSE) or after.is_operator("+", "-", "=")
    raised = after.is_operator("^")
    if isinstance(node, Sum):
        if first and len(node.terms) == 1:
            return raised or braces_hide(node.terms[0][1], before, after)
        return not (last and (first or (before is not None and before.is_operator("+"))))
    if isinstance(node, Power):
        return raised
    if not isinstance(node, Product) or _is_fraction(node):
        return False
    divided = before is not None and before.is_operator("/")
    slash = any(place is not None for _, place in node.factors)
    alone = last and (first or (before is not None and before.is_operator("+", "-")))
    return raised or divided or (slash and not alone)


def _is_fraction(node: Product) -> bool:
    return node.factors[1][1] == node.start


def looks_like_a_root(power: Node, *, any_exponent: bool) -> bool:
    """Whether power/2 may stand for a root: x^1/2, or x^3/2 where roots are usual."""
    if not isinstance(power, Power):
        return False
    exponent = power.exponent
    if isinstance(exponent, Sum):
        exponent = exponent.terms[0][1] if len(exponent.terms) == 1 else power
    return isinstance(exponent, Number) and (any_exponent or exponent.digits == "1")
