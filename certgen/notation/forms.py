"""Linear forms in y' and y over Q(x), so that nothing non-linear is expanded.

Give y and y' the weight 1.  What a linear homogeneous equation can contain is
a sum of parts (a*y' + b*y)*y^(w-1), one for each weight w:

* w = 1: a*y' + b*y, the terms of the equation;
* w = 0: a*y'/y + b, the logarithmic derivative and the coefficients;
* w = -1: b/y, which must meet a factor y or y' before the end.

Every other product, quotient or power is refused as not linear.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from certgen.errors import ExpressionError
from certgen.exact.rational_functions import RationalFunction
from certgen.notation.evaluate import Evaluator, balanced
from certgen.notation.tree import (
    Derivative,
    Name,
    Node,
    Power,
    Product,
    Sum,
    children,
    fold,
    has_function,
)

__all__ = ["Form", "FormEvaluator"]

_ZERO = RationalFunction.integer(0)
_ONE = RationalFunction.integer(1)


@dataclass(frozen=True, slots=True)
class Form:
    """parts[w] = (a, b) stands for (a*y' + b*y)*y^(w-1); no part is (0, 0)."""

    parts: dict[int, tuple[RationalFunction, RationalFunction]]

    @classmethod
    def of(cls, weight: int, a: RationalFunction, b: RationalFunction) -> Form:
        return cls({} if a.is_zero and b.is_zero else {weight: (a, b)})

    @property
    def is_scalar(self) -> bool:
        """Whether neither y nor y' occurs."""
        return set(self.parts) <= {0} and self.coefficient(0)[0].is_zero

    def coefficient(self, weight: int) -> tuple[RationalFunction, RationalFunction]:
        return self.parts.get(weight, (_ZERO, _ZERO))

    def __neg__(self) -> Form:
        return Form({w: (-a, -b) for w, (a, b) in self.parts.items()})


class FormEvaluator:
    """Evaluates the trees of one equation to forms; raises ExpressionError."""

    def __init__(self, evaluator: Evaluator, function: str) -> None:
        self.scalars = evaluator
        self.function = function
        self.source = evaluator.source

    def evaluate(self, root: Node) -> Form:
        return fold(root, self._combine,
                    lambda node: children(node) if has_function(node) else ())

    def not_linear(self, node: Node, why: str = "") -> ExpressionError:
        return self.source.error(
            node.start, node.end, "not linear in the unknown function" + why,
            "an equation is read that has y' and y in the first power")

    def _combine(self, node: Node, values: Sequence[Form]) -> Form:
        if not has_function(node):
            return Form.of(0, _ZERO, self.scalars.evaluate(node))
        match node:
            case Derivative():
                return Form.of(1, _ONE, _ZERO)
            case Name():
                return Form.of(1, _ZERO, _ONE)
            case Sum():
                signed = [-value if minus else value
                          for (minus, _), value in zip(node.terms, values, strict=True)]
                return balanced(signed, lambda a, b: self.add(a, b, node))
            case Product():
                return self._product(node, values)
            case Power():
                return self._power(node, values[0])
        raise self.not_linear(node, ": a root of it")

    def add(self, first: Form, second: Form, node: Node) -> Form:
        parts = dict(first.parts)
        for weight, (a, b) in second.parts.items():
            c, d = parts.pop(weight, (_ZERO, _ZERO))
            parts.update(Form.of(weight, self.scalars.add(a, c, node),
                                 self.scalars.add(b, d, node)).parts)
        return Form(parts)

    def _product(self, node: Product, values: Sequence[Form]) -> Form:
        result = values[0]
        for (factor, place), value in zip(node.factors[1:], values[1:], strict=True):
            if place is not None:
                value = self._inverse(value, factor, place)
            result = self._multiply(result, value, node)
        return result

    def _multiply(self, first: Form, second: Form, node: Product) -> Form:
        result = Form({})
        for v, (a, b) in first.parts.items():
            for w, (c, d) in second.parts.items():
                term = self._term(v + w, (a, b), (c, d), node)
                result = self.add(result, term, node)
        return result

    def _term(
        self,
        weight: int,
        first: tuple[RationalFunction, RationalFunction],
        second: tuple[RationalFunction, RationalFunction],
        node: Product,
    ) -> Form:
        """(a*y' + b*y)*(c*y' + d*y)*y^(weight-2), unless it is not linear."""
        (a, b), (c, d) = first, second
        derivative = not (a.is_zero and c.is_zero)
        squared = not (a.is_zero or c.is_zero)
        if squared or weight > 1 or weight < (0 if derivative else -1):
            raise self.not_linear(node)
        multiply = self.scalars.multiply
        mixed = self.scalars.add(multiply(a, d, node), multiply(b, c, node), node)
        return Form.of(weight, mixed, multiply(b, d, node))

    def _inverse(self, value: Form, node: Node, place: int) -> Form:
        if not value.parts:
            raise self.source.error(
                place, place + 1,
                "division by zero: the denominator is the zero polynomial")
        if len(value.parts) > 1:
            raise self.not_linear(node, ": it stands in a denominator")
        ((weight, (a, b)),) = value.parts.items()
        if not a.is_zero:
            raise self.not_linear(node, ": its derivative stands in a denominator")
        return Form.of(-weight, _ZERO, b.inverse())

    def _power(self, node: Power, base: Form) -> Form:
        if has_function(node.exponent):
            raise self.not_linear(node, ": it stands in an exponent")
        exponent = self.scalars.constant(node)
        if base.is_scalar and exponent.denominator == 1:
            value = self.scalars.power(base.coefficient(0)[1], exponent.numerator, node)
            return Form.of(0, _ZERO, value)
        if exponent == 1:
            return base
        if exponent == -1:
            return self._inverse(base, node, node.place)
        raise self.not_linear(node, ": a power of it")
