"""The author's text against the canonical claim that was stored with it."""

from __future__ import annotations

from certgen.claim import FirstOrderClaim, Power
from certgen.errors import RejectedError, UnusableInputError, shorten
from certgen.notation.closed_forms import read_closed_form
from certgen.notation.equations import read_equation
from certgen.polynomial import write_rational

__all__ = ["verify_as_written"]

_CODE = "as-written-differs"


def verify_as_written(claim: FirstOrderClaim) -> None:
    """Read `as_written` and `solution_as_written` again, in the claim's letters.

    Raises RejectedError (code as-written-differs) when a text cannot be read or
    says something else than the claim, and LimitError.
    """
    try:
        equation = read_equation(claim.as_written, letters=claim.letters).equation
    except UnusableInputError as error:
        raise _rejected("as_written", str(claim.equation), str(error)) from None
    if equation != claim.equation:
        raise _rejected("as_written", str(claim.equation), str(equation))
    if claim.solution is None or claim.solution_as_written is None:
        return
    expected = _write(claim.solution)
    try:
        solution = read_closed_form(claim.solution_as_written, claim.letters)
    except UnusableInputError as error:
        raise _rejected("solution_as_written", expected, str(error)) from None
    if solution != claim.solution:
        raise _rejected("solution_as_written", expected, _write(solution))


def _rejected(key: str, expected: str, found: str) -> RejectedError:
    return RejectedError(_CODE, f"$.claim.{key}", shorten(expected, 200), shorten(found, 200))


def _write(powers: tuple[Power, ...]) -> str:
    factors = [f"({p.base})^({write_rational(p.exponent)})" for p in powers]
    return "*".join(factors) or "1"
