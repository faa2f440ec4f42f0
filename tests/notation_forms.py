"""What several tests of the notation share."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from typing import Any

import pytest
from flint import fmpz_poly

from certgen.claim import FirstOrderClaim, Letters
from certgen.claims_file import make_claim
from certgen.errors import ExpressionError
from certgen.notation import read_closed_form
from certgen.polynomial import Polynomial


def failure(read: Callable[[str], object], text: str) -> ExpressionError:
    """Return the ExpressionError that reading this text raises."""
    with pytest.raises(ExpressionError) as caught:
        read(text)
    return caught.value


def closed_form(text: str) -> dict[str, str]:
    """Read a closed form as {base: exponent}, in strict notation."""
    return {str(p.base): str(p.exponent) for p in read_closed_form(text, Letters())}


def flint_of(p: Polynomial) -> fmpz_poly:
    return fmpz_poly(list(p.numerators))


def make_claim_of(equation: str, solution: str | None, **changes: Any) -> FirstOrderClaim:
    """Return a claim with some of its fields changed afterwards."""
    return replace(make_claim(equation=equation, solution=solution), **changes)
