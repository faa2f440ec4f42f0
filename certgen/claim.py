"""What is asserted: one frozen type per kind of claim.

A claim is read literally: "(every | some) solution is (algebraic |
transcendental)", where "solution" of a homogeneous equation means a non-zero
solution and "algebraic" means algebraic over C(x).
"""

from __future__ import annotations

import hashlib
import re
from dataclasses import dataclass
from fractions import Fraction
from math import gcd
from typing import ClassVar, Literal, get_args

from certgen.errors import ClaimError, InvariantError, LimitError, shorten
from certgen.polynomial import Polynomial, write_polynomial, write_rational

__all__ = [
    "AS_WRITTEN_LIMIT",
    "GREEK_LETTERS",
    "NOTE_LIMIT",
    "TITLE_LIMIT",
    "Asserts",
    "FirstOrderClaim",
    "FirstOrderEquation",
    "Letters",
    "Power",
    "Subject",
    "check_id",
    "default_id",
]

Asserts = Literal["algebraic", "transcendental"]
Subject = Literal["every solution", "some solution"]

TITLE_LIMIT = 200
NOTE_LIMIT = 2_000
AS_WRITTEN_LIMIT = 4_000_000

GREEK_LETTERS = frozenset(
    "alpha beta gamma delta epsilon zeta eta theta iota kappa lambda mu nu xi rho "
    "sigma tau upsilon phi chi psi omega Gamma Delta Theta Lambda Xi Sigma "
    "Upsilon Phi Psi Omega".split()
)
"""Names that count as one letter besides the ASCII letters (pi is a number)."""

_ID = re.compile(r"[a-z0-9][a-z0-9-]{0,63}")


def check_id(text: str) -> None:
    """Raise ClaimError unless `text` is a valid claim id (a safe file name)."""
    if not _ID.fullmatch(text):
        raise ClaimError(
            f"the id '{shorten(text)}' is not valid: an id has 1 to 64 characters "
            "a-z, 0-9 and '-', and does not begin with '-'"
        )


def _check_text(name: str, text: str | None, limit: int, *, lines: bool) -> None:
    if text is None:
        return
    if len(text) > limit:
        raise LimitError(f"the {name} has {len(text)} characters; the limit is {limit}")
    for c in text:
        control = ord(c) < 32 or 127 <= ord(c) < 160 or 0xD800 <= ord(c) < 0xE000
        if control and not (lines and c in "\n\t"):
            raise ClaimError(
                f"the {name} contains the control character U+{ord(c):04X}; "
                "remove it"
            )


@dataclass(frozen=True, slots=True, kw_only=True)
class Letters:
    """The author's names of the variable and the unknown function."""

    variable: str = "x"
    function: str = "y"

    def __post_init__(self) -> None:
        for name in (self.variable, self.function):
            one = len(name) == 1 and name.isascii() and name.isalpha()
            if not one and name not in GREEK_LETTERS:
                raise ClaimError(f"'{shorten(name)}' is not a letter")
        if self.variable == self.function:
            raise ClaimError("the variable and the function have the same letter")


@dataclass(frozen=True, slots=True, kw_only=True)
class Power:
    """base^exponent: a non-constant primitive base in Z[x], a non-zero exponent in Q."""

    base: Polynomial
    exponent: Fraction

    def __post_init__(self) -> None:
        if self.base.is_constant:
            raise InvariantError("vacuous", "a non-constant base")
        if not self.base.is_primitive:
            raise InvariantError(
                "not-canonical",
                "a base that is primitive in Z[x] with positive leading coefficient",
            )
        if self.exponent == 0:
            raise InvariantError("vacuous", "a non-zero exponent")


@dataclass(frozen=True, slots=True, kw_only=True)
class FirstOrderEquation:
    """The equation b*y' = a*y, that is y' = r*y with r = a/b (`numerator` is a).

    a, b lie in Z[x], b is not zero, lc(b) > 0 and no prime divides all
    coefficients of both; a = 0 only with b = 1.  That a and b have no common
    factor is part of the canonical form too; the checker proves it.
    """

    numerator: Polynomial
    denominator: Polynomial

    def __post_init__(self) -> None:
        a, b = self.numerator, self.denominator
        if b.is_zero:
            raise InvariantError("vacuous", "an equation whose coefficient of y' is not zero")
        if not (a.is_integral and b.is_integral):
            raise InvariantError("not-canonical", "an equation with integer coefficients")
        if b.numerators[-1] < 0 or gcd(a.content, b.content) != 1:
            raise InvariantError(
                "not-canonical", "an equation in lowest terms with lc(b) > 0"
            )
        if a.is_zero and b.numerators != (1,):
            raise InvariantError("not-canonical", "the equation (1)*y' = (0)*y")

    def __str__(self) -> str:
        """The canonical text, always in x and y: `(b)*y' = (a)*y`."""
        b, a = write_polynomial(self.denominator), write_polynomial(self.numerator)
        return f"({b})*y' = ({a})*y"


@dataclass(frozen=True, slots=True, kw_only=True)
class FirstOrderClaim:
    """"`subject` of y' = r(x)*y is `asserts`", r in Q(x); solution: non-zero solution.

    With `solution` (a product of powers) the claim is "... is algebraic, namely
    a constant multiple of this product".  `as_written`, `solution_as_written`
    and `letters` keep the author's text; `title` and `note` are the author's words.
    """

    KIND: ClassVar[str] = "first-order-homogeneous"

    id: str
    equation: FirstOrderEquation
    as_written: str
    letters: Letters
    asserts: Asserts = "algebraic"
    subject: Subject = "every solution"
    solution: tuple[Power, ...] | None = None
    solution_as_written: str | None = None
    title: str | None = None
    note: str | None = None

    def __post_init__(self) -> None:
        check_id(self.id)
        if self.asserts not in get_args(Asserts):
            raise ClaimError(
                f"asserts is '{shorten(self.asserts)}'; it must be 'algebraic' or "
                "'transcendental'"
            )
        if self.subject not in get_args(Subject):
            raise ClaimError(
                f"subject is '{shorten(self.subject)}'; it must be 'every solution' "
                "or 'some solution'"
            )
        if (self.solution is None) != (self.solution_as_written is None):
            raise ClaimError("a solution and its text as written go together")
        if self.solution is not None:
            self._check_solution(self.solution)
        _check_text("equation", self.as_written, AS_WRITTEN_LIMIT, lines=True)
        _check_text("solution", self.solution_as_written, AS_WRITTEN_LIMIT, lines=True)
        _check_text("title", self.title, TITLE_LIMIT, lines=False)
        _check_text("note", self.note, NOTE_LIMIT, lines=True)

    def _check_solution(self, solution: tuple[Power, ...]) -> None:
        if self.asserts == "transcendental":
            raise ClaimError(
                "a claim of transcendence cannot name a closed form: a product of "
                "powers with rational exponents is algebraic"
            )
        keys = [power.base.sort_key for power in solution]
        if keys != sorted(set(keys)):
            raise InvariantError(
                "not-canonical", "a solution whose bases are sorted and distinct"
            )


def default_id(equation: FirstOrderEquation, asserts: str, subject: str,
               solution: tuple[Power, ...] | None) -> str:
    """Return `eq-` and 8 hex digits of the SHA-256 of the canonical claim."""
    closed_form = "" if solution is None else " * ".join(
        f"({power.base})^({write_rational(power.exponent)})" for power in solution
    )
    text = "\n".join([str(equation), asserts, subject, closed_form])
    return "eq-" + hashlib.sha256(text.encode("ascii")).hexdigest()[:8]
