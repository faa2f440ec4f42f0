"""The letters of an appendix: the author's two, and ours that avoid them."""

from __future__ import annotations

from dataclasses import dataclass, fields

from certgen.claim import Letters
from certgen.notation.latex_writer import Latex, letter

__all__ = ["Symbols", "choose_symbols"]

_GREEK = frozenset({"beta", "rho", "psi", "lambda", "zeta"})
_SPARE = ("k", "H")  # two suffice: the author has two letters


@dataclass(frozen=True, slots=True, kw_only=True)
class Symbols:
    """LaTeX of every letter of the templates; no two are equal.

    `x` and `y` are the author's variable and function.  The others are called
    after the letter they usually get; where the author has it, a spare one.
    """

    x: Latex
    y: Latex
    a: Latex
    b: Latex
    r: Latex
    v: Latex
    V: Latex
    rho: Latex
    n: Latex
    N: Latex
    c: Latex
    beta: Latex
    p: Latex
    g: Latex
    s: Latex
    z: Latex
    R: Latex
    lambda_: Latex
    t: Latex
    L: Latex
    Y: Latex
    i: Latex
    j: Latex
    psi: Latex
    u: Latex
    f: Latex
    d: Latex
    D: Latex
    G: Latex
    M: Latex
    w: Latex
    e: Latex
    S: Latex
    A: Latex
    B: Latex
    q: Latex
    m: Latex
    zeta: Latex
    T: Latex
    Q: Latex
    h: Latex


def choose_symbols(letters: Letters) -> Symbols:
    """Return letters for one appendix, distinct from the author's and each other."""
    author = (letters.variable, letters.function)
    spare = iter(name for name in _SPARE if name not in author)
    chosen = {"x": letter(letters.variable), "y": letter(letters.function)}
    for field in fields(Symbols)[2:]:
        usual = field.name.rstrip("_")
        name = next(spare) if usual in author else usual
        chosen[field.name] = letter(name) if name in _GREEK else Latex(name)
    return Symbols(**chosen)
