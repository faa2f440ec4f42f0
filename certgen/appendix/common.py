"""What every appendix says, whatever its proof object: claim, verdict, recheck."""

from __future__ import annotations

from dataclasses import dataclass

from certgen.appendix.formulas import (
    Printer,
    is_long_exponent,
    prose,
    symbolic_product,
    typewriter,
)
from certgen.appendix.symbols import Symbols, choose_symbols
from certgen.checker import CheckedCertificate
from certgen.claim import FirstOrderClaim
from certgen.notation import read_equation
from certgen.notation.latex_writer import Latex, equation, escape, rational
from certgen.polynomial import write_polynomial

__all__ = ["ClaimedPower", "Head", "build_head", "printer_of"]

AS_WRITTEN_PRINTED = 600
"""The author's text of the equation is repeated up to this many characters."""

EQUATION_PRINTED = 60
"""A longer equation is stated as b*y' = a*y, with a and b displayed once."""

UNBROKEN_NAME = 24
"""A file name up to this many characters stays on one line."""


@dataclass(frozen=True, slots=True, kw_only=True)
class ClaimedPower:
    """One factor of the closed form that the author claims."""

    index: Latex
    base: Latex
    exponent: Latex
    is_long: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class Head:
    """The claim, its equation in the author's letters, and how to check again."""

    key: Latex
    id: str
    title: Latex | None
    note: Latex | None
    every: bool
    algebraic: bool
    proved: bool
    zero: bool
    equation: Latex
    is_long: bool
    as_written: Latex | None
    as_read: Latex | None
    a: Latex
    b: Latex
    claimed: Latex | None
    claimed_powers: tuple[ClaimedPower, ...]
    claimed_as_written: Latex | None
    file: Latex
    command: Latex
    module_command: Latex
    digest: Latex
    sym: Symbols


def printer_of(checked: CheckedCertificate) -> Printer:
    """Return the printer in the author's variable."""
    claim = checked.certificate.claim
    return Printer(claim.letters.variable, f"{claim.id}.json")


def build_head(checked: CheckedCertificate) -> Head:
    """Return the context that all templates share."""
    claim = checked.certificate.claim
    printer, sym = printer_of(checked), choose_symbols(claim.letters)
    name = f"{claim.id}.json"
    claimed, powers = _claimed(claim, printer, sym)
    return Head(
        key=Latex(claim.id),
        id=claim.id,
        title=prose(claim.title) if claim.title else None,
        note=prose(claim.note) if claim.note else None,
        every=claim.subject == "every solution",
        algebraic=claim.asserts == "algebraic",
        proved=checked.certificate.verdict == "proved",
        zero=claim.equation.numerator.is_zero,
        equation=_equation(claim, sym),
        is_long=_is_long(claim),
        as_written=_as_written(claim.as_written),
        as_read=_as_read(claim),
        a=printer.polynomial("a", claim.equation.numerator),
        b=printer.polynomial("b", claim.equation.denominator),
        claimed=claimed,
        claimed_powers=powers,
        claimed_as_written=_as_written(claim.solution_as_written),
        file=_command("", name),
        command=_command("certgen check ", name),
        module_command=_command("python -m certgen.checker ", name),
        digest=_digest(checked.digest),
        sym=sym,
    )


def _command(words: str, name: str) -> Latex:
    """A command in typewriter type; the name of the file is broken only when long."""
    if len(name) > UNBROKEN_NAME:
        return typewriter(words + name)
    return Latex(rf"\texttt{{{words}\mbox{{{escape(name)}}}}}")


def _is_long(claim: FirstOrderClaim) -> bool:
    a, b = claim.equation.numerator, claim.equation.denominator
    return len(write_polynomial(a)) + len(write_polynomial(b)) > EQUATION_PRINTED


def _equation(claim: FirstOrderClaim, sym: Symbols) -> Latex:
    if _is_long(claim):
        return Latex(f"${sym.b}\\,{sym.y}' = {sym.a}\\,{sym.y}$")
    a, b = claim.equation.numerator, claim.equation.denominator
    return Latex(f"${equation(a, b, claim.letters)}$")


def _as_written(text: str | None) -> Latex | None:
    if text is None or len(text) > AS_WRITTEN_PRINTED or not text.strip():
        return None
    return typewriter(text)


def _as_read(claim: FirstOrderClaim) -> Latex | None:
    if len(claim.as_written) > AS_WRITTEN_PRINTED:
        return None
    echo = read_equation(claim.as_written, letters=claim.letters).echo
    if "".join(echo.split()) == "".join(claim.as_written.split()):
        return None
    return _as_written(echo)


def _claimed(
    claim: FirstOrderClaim, printer: Printer, sym: Symbols
) -> tuple[Latex | None, tuple[ClaimedPower, ...]]:
    """The closed form written out, or its factors one by one when it is long."""
    if claim.solution is None:
        return None, ()
    written = printer.product(claim.solution)
    if written is not None:
        return written, ()
    exponents = [power.exponent for power in claim.solution]
    powers = tuple(
        ClaimedPower(
            index=Latex(f"_{{{k}}}" if len(claim.solution) > 1 else ""),
            base=printer.polynomial(f"claimed-base-{k}", power.base),
            exponent=rational(power.exponent),
            is_long=is_long_exponent(power.exponent),
        )
        for k, power in enumerate(claim.solution, 1)
    )
    return Latex(f"${symbolic_product(sym.w, exponents, f'{sym.f}_i')}$"), powers


def _digest(digest: str) -> Latex:
    groups = [digest[k : k + 8] for k in range(0, len(digest), 8)]
    return Latex(r"\texttt{" + " ".join(groups) + "}")
