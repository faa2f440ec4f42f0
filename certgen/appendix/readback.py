"""The formulas of a printed fragment, by the names under which they were printed."""

from __future__ import annotations

import re

__all__ = ["printed_formulas"]

_TAG = re.compile(r"\\certgenformula\{([a-z0-9-]+)\}\{")


def printed_formulas(fragment: str) -> list[tuple[str, str]]:
    r"""Return (name, LaTeX) of each `\certgenformula{name}{...}`, in their order.

    The source lines are joined again: a line that ends in `%` without a space,
    any other with one.  Read the LaTeX with `certgen.notation.read_latex_polynomial`.
    """
    text = re.sub(r"%\n\s*", "", fragment).replace("\n", " ")
    return [(m[1], _argument(text, m.end())) for m in _TAG.finditer(text)]


def _argument(text: str, start: int) -> str:
    """The text from `start` to the brace that closes the argument."""
    depth = 1
    for end in range(start, len(text)):
        if text[end] == "{":
            depth += 1
        elif text[end] == "}":
            depth -= 1
            if depth == 0:
                return text[start:end]
    return text[start:]
