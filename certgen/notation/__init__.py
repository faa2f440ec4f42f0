"""Mathematics as people write it: plain notation and LaTeX in, LaTeX out.

Nothing that is read is ever evaluated as code: two tokenisers and one parser
over declared letters, exact arithmetic with limits behind them.
"""

from __future__ import annotations

from certgen.notation.as_written import verify_as_written
from certgen.notation.closed_forms import read_closed_form
from certgen.notation.equations import EquationAsRead, read_equation
from certgen.notation.expressions import (
    read_latex_polynomial,
    read_polynomial_expression,
    read_rational_function,
)

__all__ = [
    "EquationAsRead",
    "read_closed_form",
    "read_equation",
    "read_latex_polynomial",
    "read_polynomial_expression",
    "read_rational_function",
    "verify_as_written",
]
