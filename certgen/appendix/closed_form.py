"""The context of a `ClosedFormDisagrees`."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from certgen.appendix.algebraic import Algebraic, build_algebraic_parts, coefficient
from certgen.appendix.common import Head, build_head, printer_of
from certgen.appendix.formulas import Printer
from certgen.certificate import ClosedFormDisagrees
from certgen.checker import CheckedCertificate
from certgen.checker.facts import ClosedFormFacts
from certgen.claim import Power
from certgen.errors import DefectError
from certgen.notation.latex_writer import Latex, integer
from certgen.polynomial import write_polynomial

__all__ = ["ClosedForm", "Order", "build_closed_form"]

ORDERS_BY_HAND = 200


@dataclass(frozen=True, slots=True, kw_only=True)
class Order:
    """A claimed base that vanishes along the factor, its order and exponent."""

    base: Latex
    order: Latex
    exponent: Latex
    simple: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class ClosedForm:
    """Where the residues of the equation and of the claimed product differ."""

    factor: Latex
    one_root: bool
    residue: Latex
    top: Latex
    bottom: Latex
    claimed_residue: Latex
    is_pole: bool
    orders: tuple[Order, ...]
    claimed_sum: Latex
    shows_sum: bool
    by_hand: bool
    prime: Latex


def build_closed_form(checked: CheckedCertificate) -> tuple[Head, ClosedForm, Algebraic]:
    """Return the contexts of a certificate whose proof is a ClosedFormDisagrees."""
    certificate, facts = checked.certificate, checked.facts
    proof, claimed = certificate.proof, certificate.claim.solution
    if not isinstance(proof, ClosedFormDisagrees) or not isinstance(facts, ClosedFormFacts):
        raise DefectError("the facts do not belong to the proof")
    value, printer = proof.disagreement, printer_of(checked)
    orders = tuple(zip(claimed or (), facts.disagreement.orders, strict=True))
    closed_form = ClosedForm(
        factor=printer.polynomial("disagreement-factor", value.factor),
        one_root=value.factor.degree == 1,
        residue=printer.number("disagreement-residue", value.residue_of_equation),
        top=coefficient(value.residue_of_equation.numerator),
        bottom=coefficient(value.residue_of_equation.denominator),
        claimed_residue=printer.number(
            "disagreement-claimed", value.residue_of_closed_form
        ),
        is_pole=facts.disagreement.divides_denominator,
        orders=_orders(printer, orders),
        claimed_sum=Latex(r"+".join(_term(p.exponent, m) for p, m in orders if m)),
        shows_sum=any(m > 1 for _, m in orders) or sum(1 for _, m in orders if m) > 1,
        by_hand=sum(len(write_polynomial(p.base)) for p, _ in orders) <= ORDERS_BY_HAND,
        prime=integer(value.prime),
    )
    return build_head(checked), closed_form, build_algebraic_parts(
        checked, proof.actual, facts.actual
    )


def _orders(printer: Printer, orders: tuple[tuple[Power, int], ...]) -> tuple[Order, ...]:
    return tuple(
        Order(
            base=printer.polynomial(f"claimed-base-{k}", power.base),
            order=integer(m),
            exponent=printer.number(f"claimed-exponent-{k}", power.exponent),
            simple=m == 1,
        )
        for k, (power, m) in enumerate(orders, 1)
        if m
    )


def _term(exponent: Fraction, order: int) -> str:
    text = str(integer(exponent.numerator))
    if exponent.denominator != 1:
        text += f"/{integer(exponent.denominator)}"
    return f"{integer(order)}\\cdot({text})"
