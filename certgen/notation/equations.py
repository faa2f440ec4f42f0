"""Equations of first order from plain notation and LaTeX.

Source of the normal form: y' = r*y is the logarithmic derivative y'/y = r, and
an equation A*y' + B*y = 0 with A != 0 is y' = -(B/A)*y.
"""

from __future__ import annotations

from dataclasses import dataclass

from certgen.claim import FirstOrderEquation, Letters
from certgen.errors import ExpressionError, shorten
from certgen.exact.rational_functions import RationalFunction
from certgen.notation.evaluate import Evaluator
from certgen.notation.forms import Form, FormEvaluator
from certgen.notation.letters import find_letters
from certgen.notation.parser import Names, Parser
from certgen.notation.source import Source, without_full_stop
from certgen.notation.tokens import tokenise
from certgen.notation.tree import Node, Sum, echo

__all__ = ["EquationAsRead", "read_equation"]


@dataclass(frozen=True, slots=True, kw_only=True)
class EquationAsRead:
    """An equation, its letters, and the text as it was understood."""

    equation: FirstOrderEquation
    letters: Letters
    echo: str


def read_equation(text: str, *, letters: Letters | None = None) -> EquationAsRead:
    """Read a linear homogeneous equation of first order, in any form.

    The text is LaTeX iff it contains a backslash, a brace or a dollar sign.
    `letters` fixes the names; otherwise they are found in the text (the variable
    of `y' = 0` is x, or t when the function is x).  Raises ExpressionError with
    the place, and LimitError before anything large is computed.

    >>> str(read_equation("x y' + y = 0").equation)
    "(x)*y' = (-1)*y"
    """
    source = Source(without_full_stop(text))
    if not text.strip():
        raise ExpressionError("the equation is empty", column=1,
                              hint="write an equation, such as y' = 1/(2*x)*y")
    tokens, letters = find_letters(source, tokenise(source), letters)
    left, right = Parser(source, tokens, Names.of(letters)).equation()
    evaluator = FormEvaluator(Evaluator(source, letters.variable), letters.function)
    first, second = evaluator.evaluate(left), evaluator.evaluate(right)
    total = evaluator.add(first, -second, right)
    ratio = _ratio(evaluator, total, (left, right))
    return EquationAsRead(
        equation=FirstOrderEquation(
            numerator=ratio.numerator(), denominator=ratio.denominator()),
        letters=letters,
        echo=f"{echo(left)} = {echo(right)}",
    )


def _ratio(
    evaluator: FormEvaluator, total: Form, sides: tuple[Node, Node]
) -> RationalFunction:
    """Return r with y'/y = r from the form that the equation sets to zero."""
    whole = Sum(((False, sides[0]), (True, sides[1])), sides[0].start, sides[1].end, True)
    if not total.parts:
        raise _refuse(evaluator, whole, "the equation says 0 = 0")
    if total.is_scalar:
        raise _refuse(evaluator, whole, "no unknown function in the equation")
    _check_weights(evaluator, total, sides, whole)
    ((_, (a, b)),) = total.parts.items()
    if a.is_zero:
        raise _refuse(evaluator, whole, "no derivative of the unknown function is left",
                      "an equation of first order has y'")
    return evaluator.scalars.divide(-b, a, whole, whole.start)


def _check_weights(
    evaluator: FormEvaluator, total: Form, sides: tuple[Node, Node], whole: Sum
) -> None:
    if len(total.parts) == 1:
        return
    free = total.coefficient(0)
    if -1 in total.parts or not free[0].is_zero:
        raise evaluator.not_linear(whole, ": y'/y or 1/y beside terms without a division")
    term = _free_term(evaluator, sides) or whole
    name = evaluator.function
    piece = shorten(evaluator.source.text[term.start : term.end], 40)
    raise evaluator.source.error(
        term.start, term.end, f"not homogeneous (the term {piece} is free of {name})",
        f"every term must contain {name}' or {name}")


def _free_term(evaluator: FormEvaluator, sides: tuple[Node, Node]) -> Node | None:
    """The first term, on either side, without the unknown function."""
    for side in sides:
        for term in [t for _, t in side.terms] if isinstance(side, Sum) else [side]:
            value = evaluator.evaluate(term)
            if value.parts and value.is_scalar:
                return term
    return None


def _refuse(
    evaluator: FormEvaluator, node: Node, message: str, hint: str | None = None
) -> ExpressionError:
    return evaluator.source.error(node.start, node.end, message, hint)
