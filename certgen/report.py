"""What a checked certificate says: as plain ASCII text and as JSON-ready data."""

from __future__ import annotations

import json
import textwrap
from fractions import Fraction
from typing import TYPE_CHECKING

from certgen.certificate import (
    AlgebraicSolution,
    Certificate,
    ClosedFormDisagrees,
    CounterPrime,
    IrrationalResidue,
    MultiplePole,
    MultiplePoleModP,
    NoAlgebraicSolution,
    Obstruction,
    PolynomialPart,
    PolynomialPartModP,
)
from certgen.polynomial import Polynomial, write_integer, write_polynomial, write_rational

if TYPE_CHECKING:
    from certgen.checker import CheckedCertificate
    from certgen.claim import FirstOrderClaim, Letters, Power

__all__ = [
    "COUNTER_PRIME",
    "WIDTH",
    "describe",
    "json_line",
    "plain",
    "rows",
    "statement",
    "summarise",
    "wrap_rows",
]

WIDTH = 79
COUNTER_PRIME = """\
A counter-prime is a prime of good reduction at which the p-curvature is not
zero; an equation of first order with a non-zero algebraic solution has none."""

_SHOWN = 700
_MANY = 6


def plain(text: str, limit: int | None = None) -> str:
    """Return `text` in one line of printable ASCII, shortened in the middle to `limit`."""
    line = " ".join(text.split())
    if limit is not None and len(line) > limit:
        tail = limit // 4
        line = f"{line[: limit - tail - 5]} ... {line[-tail:]}"
    return "".join(c if " " <= c <= "~" else f"[U+{ord(c):04X}]" for c in line)


def json_line(value: object) -> str:
    """Return one line of JSON: ASCII, keys sorted."""
    return json.dumps(value, sort_keys=True, ensure_ascii=True)


def statement(claim: FirstOrderClaim) -> str:
    """Return what is claimed, as a sentence without its full stop."""
    which, rest = claim.subject.split(" ", 1)
    text = f"{which} non-zero {rest} is {claim.asserts}"
    if claim.solution is not None:
        product = _product(claim.solution, claim.letters.variable) or "1"
        text += f", namely a constant times {plain(product, _SHOWN)}"
    return text


# --------------------------------------------------------------------------
# for a person


def rows(checked: CheckedCertificate, echo: str | None = None) -> list[tuple[str, str]]:
    """Return (label, text) pairs; `echo` is the equation as it was read."""
    certificate = checked.certificate
    claim = certificate.claim
    found = [] if claim.title is None else [("title", plain(claim.title))]
    if echo is not None:
        found.append(("read as", plain(echo, _SHOWN)))
    if claim.solution_as_written is not None:
        found.append(("closed form", plain(claim.solution_as_written, _SHOWN)))
    found += [
        ("canonical", plain(str(claim.equation), _SHOWN)),
        ("claim", statement(claim)),
        ("verdict", certificate.verdict),
        *_proof_rows(certificate),
        ("digest", checked.digest),
    ]
    return found


def wrap_rows(pairs: list[tuple[str, str]]) -> str:
    """Return the rows with aligned texts, wrapped at WIDTH columns."""
    return "\n".join(
        textwrap.fill(
            text,
            WIDTH,
            initial_indent=f" {label:<14}",
            subsequent_indent=" " * 15,
            break_on_hyphens=False,
        )
        for label, text in pairs
    )


def summarise(certificate: Certificate, limit: int = _SHOWN) -> str:
    """Return the one-line reason of the verdict."""
    proof = certificate.proof
    letters = certificate.claim.letters
    if isinstance(proof, NoAlgebraicSolution):
        return _counter_prime(proof.counter_prime, letters.variable)
    if isinstance(proof, ClosedFormDisagrees):
        return _disagreement(proof, letters.variable)
    return plain(_solution(proof, letters), limit)


def _proof_rows(certificate: Certificate) -> list[tuple[str, str]]:
    proof, letters = certificate.proof, certificate.claim.letters
    reason = summarise(certificate)
    if isinstance(proof, AlgebraicSolution):
        return [("solution", reason), *_degree_rows(proof)]
    if isinstance(proof, ClosedFormDisagrees):
        actual = plain(_solution(proof.actual, letters), _SHOWN)
        return [("reason", reason), ("solution", actual), *_degree_rows(proof.actual)]
    over_q = [
        ("over Q", _obstruction(item, letters.variable)) for item in proof.obstructions[:_MANY]
    ]
    more = len(proof.obstructions) - _MANY
    if more > 0:
        over_q.append(("", f"and {more} more in the certificate"))
    result = ("result", "no non-zero solution is algebraic")
    return [result, *over_q, ("counter-prime", reason)]


def _degree_rows(proof: AlgebraicSolution) -> list[tuple[str, str]]:
    return [("degree", write_integer(proof.degree))]


def _solution(proof: AlgebraicSolution, letters: Letters) -> str:
    product = _product(proof.solution, letters.variable)
    return f"{letters.function} = c" + (f" * {product}" if product else "") + ", c constant"


def _product(powers: tuple[Power, ...], letter: str) -> str:
    return " * ".join(_power(power.base, power.exponent, letter) for power in powers)


def _power(base: Polynomial, exponent: Fraction, letter: str) -> str:
    text = write_polynomial(base, letter)
    head = text if base.numerators == (0, 1) else f"({text})"
    if exponent == 1:
        return head
    bare = exponent.denominator == 1 and exponent > 0
    return f"{head}^{write_rational(exponent) if bare else f'({write_rational(exponent)})'}"


def _disagreement(proof: ClosedFormDisagrees, letter: str) -> str:
    item = proof.disagreement
    return (
        f"at the roots of {_short(item.factor, letter)} the residue of the equation is "
        f"{write_rational(item.residue_of_equation)}, that of the claimed closed form "
        f"{write_rational(item.residue_of_closed_form)}"
    )


def _obstruction(item: Obstruction, letter: str) -> str:
    if isinstance(item, PolynomialPart):
        return f"the polynomial part {_short(item.quotient, letter)}"
    where = f"at the roots of {_short(item.factor, letter)}"
    if isinstance(item, MultiplePole):
        return f"poles of order {item.order} {where}"
    return _irrational(item, where)


def _irrational(item: IrrationalResidue, where: str) -> str:
    return f"irrational residues, roots of {_short(item.residue_polynomial, 'z')}, {where}"


def _counter_prime(item: CounterPrime, letter: str) -> str:
    p, witness = item.p, item.witness
    if isinstance(witness, PolynomialPartModP):
        return f"{p}: modulo {p} the equation has a polynomial part"
    factor = _short(witness.factor, letter)
    if isinstance(witness, MultiplePoleModP):
        return f"{p}: modulo {p} there is a multiple pole at the roots of {factor}"
    return (
        f"{p}: modulo {p} the residue at the roots of {factor} is "
        f"{_short(witness.residue, letter)}, not an element of F_{p}"
    )


def _short(polynomial: Polynomial, letter: str) -> str:
    return plain(write_polynomial(polynomial, letter), 200)


# --------------------------------------------------------------------------
# for a program


def describe(checked: CheckedCertificate) -> dict[str, object]:
    """Return the stable JSON keys of a checked certificate.

    `id`, `verdict`, `equation`, `as_written`, `asserts`, `subject`, `proof` (the
    kind), `digest`, `arithmetic`; with an algebraic solution `degree` and
    `solution`, otherwise `counter_prime`; integers are decimal strings.
    """
    certificate = checked.certificate
    claim = certificate.claim
    return {
        "id": claim.id,
        "verdict": certificate.verdict,
        "equation": str(claim.equation),
        "as_written": claim.as_written,
        "asserts": claim.asserts,
        "subject": claim.subject,
        "proof": certificate.proof.KIND,
        "digest": checked.digest,
        "arithmetic": checked.arithmetic,
        **_describe_proof(certificate),
    }


def _describe_proof(certificate: Certificate) -> dict[str, object]:
    proof = certificate.proof
    if isinstance(proof, NoAlgebraicSolution):
        return {"counter_prime": write_integer(proof.counter_prime.p)}
    actual = proof.actual if isinstance(proof, ClosedFormDisagrees) else proof
    return {
        "degree": write_integer(actual.degree),
        "solution": [
            {"base": write_polynomial(power.base), "exponent": write_rational(power.exponent)}
            for power in actual.solution
        ],
    }
