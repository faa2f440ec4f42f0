"""The tree of an expression as it was read, and its echo.

Nothing here is evaluated: the echo shows exactly how the text was understood.
Trees are walked with `fold`, which needs no recursion: a long chain of nested
powers and quotients costs memory and never the stack.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import TypeVar

__all__ = [
    "Derivative",
    "Name",
    "Node",
    "Number",
    "Power",
    "Product",
    "Root",
    "Sum",
    "children",
    "echo",
    "fold",
    "has_function",
]

T = TypeVar("T")


@dataclass(frozen=True, slots=True)
class Number:
    """A natural number, by its digits."""

    digits: str
    start: int
    end: int


@dataclass(frozen=True, slots=True)
class Name:
    """The variable, a constant factor, or the unknown function itself."""

    name: str
    start: int
    end: int
    is_function: bool = False


@dataclass(frozen=True, slots=True)
class Derivative:
    """The derivative of the unknown function."""

    name: str
    start: int
    end: int


@dataclass(frozen=True, slots=True)
class Sum:
    """Terms with their signs (True is minus); one negative term is a negation."""

    terms: tuple[tuple[bool, Node], ...]
    start: int
    end: int
    has_function: bool


@dataclass(frozen=True, slots=True)
class Product:
    """Factors from left to right; (node, None) multiplies, (node, place) divides."""

    factors: tuple[tuple[Node, int | None], ...]
    start: int
    end: int
    has_function: bool


@dataclass(frozen=True, slots=True)
class Power:
    """base^exponent; `place` is where the exponent begins."""

    base: Node
    exponent: Node
    place: int
    start: int
    end: int
    has_function: bool


@dataclass(frozen=True, slots=True)
class Root:
    """The root of a given order, at least 1, of `base`."""

    base: Node
    index: Number
    start: int
    end: int
    has_function: bool


Node = Number | Name | Derivative | Sum | Product | Power | Root


def has_function(node: Node) -> bool:
    """Whether the unknown function or its derivative occurs."""
    if isinstance(node, Number):
        return False
    if isinstance(node, Name):
        return node.is_function
    return isinstance(node, Derivative) or node.has_function


def children(node: Node) -> tuple[Node, ...]:
    """Return the direct parts of a node, from left to right."""
    match node:
        case Sum(terms=terms):
            return tuple(term for _, term in terms)
        case Product(factors=factors):
            return tuple(factor for factor, _ in factors)
        case Power(base=base, exponent=exponent):
            return (base, exponent)
        case Root(base=base):
            return (base,)
    return ()


def fold(
    root: Node,
    combine: Callable[[Node, Sequence[T]], T],
    parts: Callable[[Node], tuple[Node, ...]] = children,
) -> T:
    """Return combine(root, values of parts(root)), computed from the leaves up."""
    values: list[T] = []
    stack: list[tuple[Node, int]] = [(root, -1)]
    while stack:
        node, count = stack.pop()
        if count < 0:
            below = parts(node)
            stack.append((node, len(below)))
            stack.extend((part, -1) for part in reversed(below))
        else:
            first = len(values) - count
            value = combine(node, values[first:])
            del values[first:]
            values.append(value)
    return values[0]


# --------------------------------------------------------------------------
# the echo


def echo(node: Node) -> str:
    """Return the expression fully parenthesised, in plain notation.

    >>> x, two = Name("x", 0, 1), Number("2", 0, 1)
    >>> square = Power(x, two, 0, 0, 1, False)
    >>> echo(Product(((two, None), (square, 0), (x, None)), 0, 1, False))
    '(2/(x^2))*x'
    """
    return fold(node, _echo)


def _echo(node: Node, texts: Sequence[str]) -> str:
    match node:
        case Number(digits=digits):
            return digits
        case Name(name=name):
            return name
        case Derivative(name=name):
            return f"{name}'"
    parts = [
        text if isinstance(part, Number | Name | Derivative) else f"({text})"
        for part, text in zip(children(node), texts, strict=True)
    ]
    match node:
        case Sum():
            return _echo_sum(node, parts)
        case Product():
            return _echo_product(node, parts)
        case Root():
            return f"{parts[0]}^(1/{node.index.digits})"
    return f"{parts[0]}^{parts[1]}"


def _echo_sum(node: Sum, parts: list[str]) -> str:
    pieces = ["-" if node.terms[0][0] else "", parts[0]]
    for (minus, _), part in zip(node.terms[1:], parts[1:], strict=True):
        pieces += (" - " if minus else " + ", part)
    return "".join(pieces)


def _echo_product(node: Product, parts: list[str]) -> str:
    """Products are read from the left; a division closes what stands before it."""
    opened, pieces, divides = 0, [parts[0]], False
    for k, part in enumerate(parts[1:], start=1):
        divided, divides = divides, node.factors[k][1] is not None
        if k > 1 and (divided or divides):
            pieces.append(")")
            opened += 1
        pieces += ("/" if divides else "*", part)
    return "(" * opened + "".join(pieces)
