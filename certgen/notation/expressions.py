"""Rational functions and polynomials from plain notation and LaTeX."""

from __future__ import annotations

from certgen.errors import ExpressionError
from certgen.exact.rational_functions import RationalFunction, from_fmpz_poly
from certgen.notation.evaluate import Evaluator
from certgen.notation.parser import Names, Parser
from certgen.notation.source import Source
from certgen.notation.tokens import tokenise
from certgen.polynomial import Polynomial

__all__ = ["read_latex_polynomial", "read_polynomial_expression", "read_rational_function"]


def _read(text: str, variable: str, latex: bool | None = None) -> RationalFunction:
    source = Source(text)
    if not text.strip():
        raise ExpressionError("the expression is empty", column=1)
    parser = Parser(source, tokenise(source, latex=latex), Names(variable), latex=latex)
    return Evaluator(source, variable).evaluate(parser.expression())


def read_rational_function(text: str, variable: str = "x") -> tuple[Polynomial, Polynomial]:
    """Read an expression as n/d, n, d in Z[x], in lowest terms with lc(d) > 0.

    Raises ExpressionError with the place, and LimitError before anything large
    is computed.

    >>> n, d = read_rational_function("1/2 - 1/x")
    >>> str(n), str(d)
    ('x - 2', '2*x')
    """
    value = _read(text, variable)
    return value.numerator(), value.denominator()


def read_polynomial_expression(text: str, variable: str = "x") -> Polynomial:
    """Read an expression whose value is a polynomial over Q (errors as above)."""
    return _polynomial(text, variable, None)


def read_latex_polynomial(text: str, variable: str = "x") -> Polynomial:
    """Read a polynomial over Q back from LaTeX, as `latex_writer` prints it.

    `variable` is the name of the letter ('x', 'alpha'), not its LaTeX.
    """
    return _polynomial(text, variable, True)


def _polynomial(text: str, variable: str, latex: bool | None) -> Polynomial:
    value = _read(text, variable, latex)
    if not value.is_polynomial:
        raise ExpressionError("the expression is not a polynomial",
                              hint="its denominator is not constant")
    return from_fmpz_poly(value.num, int(value.den[0]))
