"""The context of a `ClosedFormDisagrees`."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from certgen.appendix.algebraic import Algebraic, build_algebraic_parts
from certgen.appendix.common import Head, build_head, printer_of
from certgen.appendix.formulas import Printer, show
from certgen.appendix.residues import coefficient
from certgen.appendix.values import derivative, fits, value_at
from certgen.certificate import ClosedFormDisagrees
from certgen.checker import CheckedCertificate
from certgen.checker.facts import ClosedFormFacts
from certgen.claim import FirstOrderEquation, Power
from certgen.errors import DefectError
from certgen.notation.latex_writer import Latex, integer
from certgen.polynomial import Polynomial, write_polynomial

__all__ = ["ClosedForm", "Order", "build_closed_form"]

ORDERS_BY_HAND = 200


@dataclass(frozen=True, slots=True, kw_only=True)
class Order:
    """A claimed base that vanishes along the factor, its order and exponent."""

    base: Latex
    order: Latex
    exponent: Latex
    simple: bool
    twice: bool
    slope: Latex | None


@dataclass(frozen=True, slots=True, kw_only=True)
class RootShown:
    """a and b' at the root of a linear factor that divides b; else b there."""

    a: Latex
    derivative: Latex
    b: Latex


@dataclass(frozen=True, slots=True, kw_only=True)
class Other:
    """A claimed base that has no zero along the factor; `value` at a rational root."""

    base: Latex
    value: Latex | None


@dataclass(frozen=True, slots=True, kw_only=True)
class ClosedForm:
    """Where the residues of the equation and of the claimed product differ."""

    factor: Latex
    show: Latex
    one_root: bool
    root: Latex
    values: RootShown | None
    residue: Latex
    top: Latex
    bottom: Latex
    claimed_residue: Latex
    is_pole: bool
    orders: tuple[Order, ...]
    others: tuple[Other, ...]
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
    root = _root(value.factor)
    closed_form = ClosedForm(
        factor=printer.polynomial("disagreement-factor", value.factor),
        show=show(value.factor),
        one_root=root is not None,
        root=printer.value("disagreement-root", root or 0),
        values=_values(printer, certificate.claim.equation, facts, root),
        residue=printer.value("disagreement-residue", value.residue_of_equation),
        top=coefficient(value.residue_of_equation.numerator),
        bottom=coefficient(value.residue_of_equation.denominator),
        claimed_residue=printer.value("disagreement-claimed", value.residue_of_closed_form),
        is_pole=facts.disagreement.divides_denominator,
        orders=_orders(printer, orders, root),
        others=_others(printer, orders, root),
        claimed_sum=Latex(r"+".join(_term(p.exponent, m) for p, m in orders if m)),
        shows_sum=any(m > 1 for _, m in orders) or sum(1 for _, m in orders if m) > 1,
        by_hand=sum(len(write_polynomial(p.base)) for p, _ in orders) <= ORDERS_BY_HAND,
        prime=integer(value.prime),
    )
    return build_head(checked), closed_form, build_algebraic_parts(
        checked, proof.actual, facts.actual
    )


def _root(factor: Polynomial) -> Fraction | None:
    """The root of a linear factor."""
    if factor.degree != 1:
        return None
    return -factor.coefficient(0) / factor.coefficient(1)


def _values(
    printer: Printer, equation: FirstOrderEquation, facts: ClosedFormFacts,
    root: Fraction | None,
) -> RootShown | None:
    b_derivative = facts.actual.b_derivative
    if root is None or b_derivative is None:
        return None
    numbers = (
        value_at(equation.numerator, root), value_at(b_derivative, root),
        value_at(equation.denominator, root),
    )  # fmt: skip
    if not fits(*numbers):
        return None
    names = ("a", "derivative", "b")
    a, slope, b = (
        printer.value(f"disagreement-{name}", number)
        for name, number in zip(names, numbers, strict=True)
    )
    return RootShown(a=a, derivative=slope, b=b)


def _small_value(printer: Printer, name: str, value: Fraction) -> Latex | None:
    """A value that the checker has shown not to be 0, where a calculator shows it."""
    if value == 0:
        raise DefectError("a base has another order than the checker found")
    return printer.value(name, value) if fits(value) else None


def _orders(
    printer: Printer, orders: tuple[tuple[Power, int], ...], root: Fraction | None
) -> tuple[Order, ...]:
    return tuple(
        Order(
            base=printer.polynomial(f"claimed-base-{k}", power.base),
            order=integer(m),
            exponent=printer.value(f"claimed-exponent-{k}", power.exponent),
            simple=m == 1,
            twice=m == 2,
            slope=None if root is None or m > 1 else _small_value(
                printer, f"claimed-slope-{k}", value_at(derivative(power.base), root)
            ),
        )
        for k, (power, m) in enumerate(orders, 1)
        if m
    )


def _others(
    printer: Printer, orders: tuple[tuple[Power, int], ...], root: Fraction | None
) -> tuple[Other, ...]:
    return tuple(
        Other(
            base=printer.polynomial(f"claimed-base-{k}", power.base),
            value=None if root is None else _small_value(
                printer, f"claimed-value-{k}", value_at(power.base, root)
            ),
        )
        for k, (power, m) in enumerate(orders, 1)
        if not m
    )


def _term(exponent: Fraction, order: int) -> str:
    text = str(integer(exponent.numerator))
    if exponent.denominator != 1:
        text += f"/{integer(exponent.denominator)}"
    return f"{integer(order)}\\cdot({text})"
