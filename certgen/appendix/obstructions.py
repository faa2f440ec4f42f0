"""The obstructions over Q of a refutation, the one that is shortest to print first."""

from __future__ import annotations

from dataclasses import dataclass
from math import isqrt

from certgen.appendix.formulas import (
    INLINE,
    LINE,
    Printer,
    in_product,
    is_long,
    listing,
    show,
    signed_factor,
)
from certgen.appendix.symbols import Symbols
from certgen.appendix.values import fits, value_at
from certgen.certificate import (
    IrrationalResidue,
    MultiplePole,
    NoAlgebraicSolution,
    PolynomialPart,
)
from certgen.checker.facts import IrrationalResidueFacts, NoAlgebraicFacts, ProductSpot
from certgen.errors import DefectError
from certgen.notation.latex_writer import Latex, integer
from certgen.polynomial import Polynomial, write_polynomial

__all__ = [
    "IrrationalResidueShown",
    "MultiplePoleShown",
    "ObstructionShown",
    "PolynomialPartShown",
    "build_obstructions",
]

HAND_DEGREE = 3
HAND_DIVISION = 8
FORM_DEGREE = 6
ROOTLESS_LISTED = 13


@dataclass(frozen=True, slots=True, kw_only=True)
class PolynomialPartShown:
    """a = quotient*b + remainder; `cost` orders the obstructions by their length."""

    kind: str = PolynomialPart.KIND
    cost: int
    by_hand: bool
    long: bool
    quotient: Latex
    remainder: Latex


@dataclass(frozen=True, slots=True, kw_only=True)
class MultiplePoleShown:
    """A factor with the order of the poles at its roots."""

    kind: str = MultiplePole.KIND
    cost: int
    show: Latex
    factor: Latex
    order: Latex
    twice: bool
    times: Latex
    root: Latex | None


@dataclass(frozen=True, slots=True, kw_only=True)
class FormSpot:
    """The form in A and B at one point: total = factor * cofactor."""

    point: Latex
    numerator: Latex
    derivative: Latex
    total: Latex
    factor: Latex
    cofactor: Latex


@dataclass(frozen=True, slots=True, kw_only=True)
class IrrationalResidueShown:
    """The residues A/B at the roots of the factor g, and their polynomial R.

    `form` is sum R_k A^k B^(n-k), which equals g times `cofactor`.  `quadratic`: R has
    no rational root by its discriminant, between two squares or negative; otherwise by
    a prime, with the `values` of R modulo it.
    """

    kind: str = IrrationalResidue.KIND
    cost: int
    by_hand: bool
    whole: bool
    one_root: bool
    show: Latex
    factor: Latex
    numerator: Latex
    derivative: Latex
    long_residue: bool
    residue_polynomial: Latex
    show_polynomial: Latex
    form: Latex | None
    cofactor: Latex | None
    spot: FormSpot | None
    quadratic: bool
    negative: bool
    discriminant: Latex
    discriminant_sum: Latex
    show_discriminant: Latex
    root_below: Latex
    root_above: Latex
    rootless_prime: Latex
    values: Latex | None


ObstructionShown = PolynomialPartShown | MultiplePoleShown | IrrationalResidueShown


def build_obstructions(
    printer: Printer, sym: Symbols, proof: NoAlgebraicSolution, facts: NoAlgebraicFacts
) -> tuple[ObstructionShown, ...]:
    """Return the obstructions, the one that is shortest to print first."""
    irrational = iter(facts.irrational)
    whole = sum(f.factor.degree * f.multiplicity for f in proof.squarefree_decomposition)
    parts: list[ObstructionShown] = []
    for k, item in enumerate(proof.obstructions, 1):
        if isinstance(item, PolynomialPart):
            parts.append(_polynomial_part(printer, item, facts))
        elif isinstance(item, MultiplePole):
            parts.append(_multiple_pole(printer, k, item))
        else:
            parts.append(_irrational(printer, sym, k, item, next(irrational), whole))
    return tuple(sorted(parts, key=lambda part: part.cost))


def _size(*values: Polynomial) -> int:
    return sum(len(write_polynomial(value)) for value in values)


def _polynomial_part(
    printer: Printer, item: PolynomialPart, facts: NoAlgebraicFacts
) -> PolynomialPartShown:
    remainder = facts.remainder
    if remainder is None:
        raise DefectError("the remainder of the polynomial part is missing")
    return PolynomialPartShown(
        # seen from the degrees; the data count only when they are long
        cost=max(0, _size(item.quotient, remainder) - 200),
        by_hand=item.quotient.degree <= HAND_DEGREE and remainder.degree <= HAND_DIVISION,
        long=is_long(item.quotient, remainder),
        quotient=printer.polynomial("quotient", item.quotient),
        remainder=printer.polynomial("remainder", remainder),
    )


def _multiple_pole(printer: Printer, k: int, item: MultiplePole) -> MultiplePoleShown:
    return MultiplePoleShown(
        cost=_size(item.factor),
        show=show(item.factor),
        factor=printer.polynomial(f"multiple-pole-{k}", item.factor),
        order=integer(item.order),
        twice=item.order == 2,
        times=Latex(f"${integer(item.order)}$ times"),
        root=_root(printer, k, item.factor),
    )


def _root(printer: Printer, k: int, factor: Polynomial) -> Latex | None:
    """The root of a linear factor, where it is short."""
    if factor.degree != 1:
        return None
    root = -factor.coefficient(0) / factor.coefficient(1)
    return printer.value(f"multiple-pole-root-{k}", root) if fits(root) else None


def _irrational(
    printer: Printer,
    sym: Symbols,
    k: int,
    item: IrrationalResidue,
    facts: IrrationalResidueFacts,
    whole: int,
) -> IrrationalResidueShown:
    residue_polynomial, disc = item.residue_polynomial, facts.discriminant
    root = isqrt(disc) if disc is not None and disc > 0 else 0
    discriminant_sum = _discriminant_sum(residue_polynomial)
    form = _form(sym, residue_polynomial)
    short = form is not None and _size(facts.cofactor, facts.derivative) <= 2 * LINE
    return IrrationalResidueShown(
        # a quadratic needs one line more than a multiple pole, others a prime
        cost=_size(item.factor, residue_polynomial) + (0 if disc is not None else 200),
        by_hand=short and item.factor.degree <= HAND_DEGREE
        and residue_polynomial.degree <= HAND_DEGREE,
        whole=item.factor.degree == whole,
        one_root=item.factor.degree == 1,
        show=show(item.factor),
        factor=printer.polynomial(f"residue-factor-{k}", item.factor),
        numerator=printer.polynomial(f"residue-numerator-{k}", facts.numerator),
        derivative=printer.polynomial(f"residue-derivative-{k}", facts.derivative),
        residue_polynomial=printer.polynomial(
            f"residue-polynomial-{k}", residue_polynomial, str(sym.z)
        ),
        long_residue=is_long(facts.numerator, facts.derivative),
        show_polynomial=show(residue_polynomial),
        show_discriminant=Latex(
            "inline" if len(discriminant_sum) <= 2 * INLINE else "display"
        ),
        form=form,
        cofactor=in_product(
            printer.polynomial(f"residue-cofactor-{k}", facts.cofactor), facts.cofactor
        )
        if short else None,
        spot=_spot(printer, k, facts.spot) if form is not None else None,
        quadratic=disc is not None,
        negative=disc is not None and disc < 0,
        discriminant=integer(disc or 0),
        discriminant_sum=discriminant_sum,
        root_below=integer(root),
        root_above=integer(root + 1),
        rootless_prime=integer(item.rootless_prime),
        values=_values(residue_polynomial, item.rootless_prime),
    )


def _form(sym: Symbols, f: Polynomial) -> Latex | None:
    """sum f_k A^k B^(n-k), from the top; None where it is long."""
    if f.degree > FORM_DEGREE or not fits(*f.numerators):
        return None
    pieces: list[str] = []
    for k in range(f.degree, -1, -1):
        c = f.numerators[k]
        if c:
            sign = "-" if c < 0 else "+" if pieces else ""
            size = "" if abs(c) == 1 else rf"{integer(abs(c))}\,"
            letters = _power(sym.A, k) + _power(sym.B, f.degree - k)
            pieces.append(rf"{sign}{size}{letters}")
    return Latex(r" \certgenbreak ".join(pieces))


def _power(letter: str, k: int) -> str:
    return "" if k == 0 else letter if k == 1 else f"{letter}^{{{k}}}"


def _spot(printer: Printer, k: int, spot: ProductSpot) -> FormSpot | None:
    numbers = (spot.numerator, spot.derivative, spot.total, spot.factor, spot.cofactor)
    if not fits(spot.point, *numbers):
        return None
    names = ("a", "b", "total", "factor", "cofactor")
    a, b, total, factor, cofactor = (
        printer.value(f"residue-spot-{name}-{k}", number)
        for name, number in zip(names, numbers, strict=True)
    )
    return FormSpot(
        point=printer.value(f"residue-spot-point-{k}", spot.point),
        numerator=a, derivative=b, total=total, factor=factor,
        cofactor=Latex(f"$(${cofactor}$)$") if spot.cofactor < 0 else cofactor,
    )  # fmt: skip


def _discriminant_sum(quadratic: Polynomial) -> Latex:
    """B^2 - 4AC with the coefficients put in, unevaluated."""
    if quadratic.degree != 2:
        return Latex("")
    low, middle, top = quadratic.numerators
    middle_text = integer(middle) if middle >= 0 else f"({integer(middle)})"
    return Latex(
        rf"{middle_text}^2\certgenbreak -4\cdot {signed_factor(top)}"
        rf"\certgenbreak\cdot {signed_factor(low)}"
    )


def _values(f: Polynomial, p: int) -> Latex | None:
    """The values of f at 0, ..., p - 1 modulo p, where they are few; none is 0."""
    if p > ROOTLESS_LISTED:
        return None
    values = [value_at(f, point).numerator % p for point in range(p)]
    if not all(values):
        raise DefectError("a polynomial without roots has one")
    return listing([f"${value}$" for value in values])
