"""sympy objects as plain notation: walked node by node, never printed and parsed.

Works on the objects alone; sympy is not imported here (whoever hands over a
sympy object has imported it).
"""

from __future__ import annotations

from typing import Any

from certgen.claim import GREEK_LETTERS
from certgen.errors import ClaimError, LimitError, shorten
from certgen.polynomial import write_integer

__all__ = ["is_sympy", "write_equation"]

_NODES_LIMIT = 100_000
_DEPTH_LIMIT = 150
_ORDER_LIMIT = 9


def is_sympy(value: object) -> bool:
    """Return whether `value` is an instance of a class that sympy defines."""
    return any(
        kind.__module__ == "sympy" or kind.__module__.startswith("sympy.")
        for kind in type(value).__mro__
    )


def write_equation(value: Any) -> str:
    """Return the plain notation of a sympy object that states an equation.

    An `Eq`, or an expression that is meant to be zero, in one unknown function
    of one symbol, as it stands; an expression r without an unknown function
    as y' = (r)*y.  Raises ClaimError for anything that is not exact and
    rational, LimitError for more than 100000 nodes or a depth above 150.
    """
    if getattr(value, "is_Boolean", False) and not getattr(value, "is_Relational", False):
        raise ClaimError(
            f"the equation has become '{shorten(value)}' inside sympy, before certgen saw "
            "it; build it with sympy.Eq(..., evaluate=False)"
        )
    walk = _Walk()
    if getattr(value, "is_Equality", False):
        text = f"{walk.write(value.lhs, 0)} = {walk.write(value.rhs, 0)}"
        return walk.require_function(text)
    right = walk.write(value, 0)
    if walk.function is not None:
        return f"{right} = 0"
    unknown = "f" if walk.variable == "y" else "y"
    return f"{unknown}' = ({right})*{unknown}"


def _letter(name: str) -> str:
    """Return `name` if it is one letter, so that it cannot be read as anything else."""
    if (len(name) == 1 and name.isascii() and name.isalpha()) or name in GREEK_LETTERS:
        return name
    raise ClaimError(
        f"the name '{shorten(name)}' is not one letter; rename it, for example to x or y"
    )


class _Walk:
    """One walk over an expression; remembers its symbol and its unknown function."""

    def __init__(self) -> None:
        self.variable: str | None = None
        self.function: str | None = None
        self._nodes = 0

    def require_function(self, text: str) -> str:
        if self.function is None:
            raise ClaimError(
                "the equation contains no unknown function; write it with "
                "y = sympy.Function('y'), y(x) and y(x).diff(x)"
            )
        return text

    def write(self, node: Any, depth: int) -> str:
        self._nodes += 1
        if self._nodes > _NODES_LIMIT or depth > _DEPTH_LIMIT:
            raise LimitError(
                f"the sympy expression has more than {_NODES_LIMIT} nodes or a depth "
                f"above {_DEPTH_LIMIT}"
            )
        if getattr(node, "is_Rational", False):
            return self._rational(node)
        if getattr(node, "is_Symbol", False):
            return self._symbol(node)
        if getattr(node, "is_Derivative", False):
            return self._derivative(node)
        if self._is_applied_function(node):
            return self._unknown(node)
        if getattr(node, "is_Add", False):
            return "(" + " + ".join(self.write(arg, depth + 1) for arg in node.args) + ")"
        if getattr(node, "is_Mul", False):
            return "(" + "*".join(self.write(arg, depth + 1) for arg in node.args) + ")"
        if getattr(node, "is_Pow", False) and getattr(node.exp, "is_Integer", False):
            return self._power(node, depth)
        raise self._refusal(node)

    @staticmethod
    def _rational(node: Any) -> str:
        numerator, denominator = int(node.p), int(node.q)
        text = write_integer(numerator)
        return f"({text})" if denominator == 1 else f"({text}/{write_integer(denominator)})"

    @staticmethod
    def _is_applied_function(node: Any) -> bool:
        return any(kind.__name__ == "AppliedUndef" for kind in type(node).__mro__)

    def _symbol(self, node: Any) -> str:
        name = _letter(str(node.name))
        if self.variable not in (None, name):
            raise ClaimError(
                f"the expression contains two symbols, '{shorten(self.variable)}' and "
                f"'{shorten(name)}'; only the variable is allowed"
            )
        self.variable = name
        return name

    def _unknown(self, node: Any) -> str:
        name = _letter(str(node.func.__name__))
        if len(node.args) != 1 or not getattr(node.args[0], "is_Symbol", False):
            raise ClaimError(f"'{shorten(node)}' is not a function of one symbol")
        if self.function not in (None, name):
            raise ClaimError(
                f"the equation contains two functions, '{shorten(self.function)}' and "
                f"'{shorten(name)}'; only one unknown function is allowed"
            )
        self._symbol(node.args[0])
        self.function = name
        return name

    def _derivative(self, node: Any) -> str:
        symbols = node.variables
        order = len(symbols)
        if not self._is_applied_function(node.expr) or set(symbols) != set(node.expr.args):
            raise ClaimError(
                f"'{shorten(node)}' is not a derivative of the unknown function by its "
                "variable; apply .doit() first"
            )
        if order > _ORDER_LIMIT:
            raise ClaimError(f"a derivative of order {order}; the equation must have order 1")
        return self._unknown(node.expr) + "'" * order

    def _power(self, node: Any, depth: int) -> str:
        exponent = int(node.exp)
        base = self.write(node.base, depth + 1)
        return f"{base}^{exponent}" if exponent >= 0 else f"(1/{base}^{-exponent})"

    @staticmethod
    def _refusal(node: Any) -> ClaimError:
        if getattr(node, "is_Float", False):
            return ClaimError(
                f"'{shorten(node)}' is a floating-point number; give exact rationals "
                "such as sympy.Rational(1, 3)"
            )
        return ClaimError(
            f"'{shorten(node)}' is not built from rational numbers, one symbol, +, *, / "
            "and integer powers"
        )
