"""Proof objects: the shapes that their types admit."""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction

import pytest

from certgen.certificate import (
    AlgebraicSolution,
    CounterPrime,
    DensityBound,
    DensityWitness,
    Disagreement,
    Eisenstein,
    IrrationalResidue,
    MinimalPolynomial,
    MultiplePole,
    MultiplePoleModP,
    NoAlgebraicSolution,
    PartialFraction,
    PCurvature,
    PolynomialPart,
    PolynomialPartModP,
    ResidueOutsidePrimeField,
    SquarefreeFactor,
)
from certgen.claim import Power
from certgen.errors import InvariantError
from certgen.polynomial import read_polynomial as P


def power(base: str, exponent: str) -> Power:
    return Power(base=P(base), exponent=Fraction(exponent))


X, X1 = power("x", "1/2"), power("x + 1", "1/3")
ONE = MinimalPolynomial(degree=1, numerator=(), denominator=())
ROOT = DensityBound(bound=Fraction(1, 2), witnesses=())
PRIME = CounterPrime(p=3, witness=PolynomialPartModP())


def algebraic(
    solution: tuple[Power, ...] = (),
    fractions: tuple[PartialFraction, ...] = (),
    degree: int = 1,
) -> AlgebraicSolution:
    return AlgebraicSolution(
        solution=solution, partial_fractions=fractions, degree=degree,
        minimal_polynomial=ONE, squarefree_prime=2, eisenstein=None,
    )  # fmt: skip


def refutation(factors: tuple[str, ...] = (), *obstructions: object) -> NoAlgebraicSolution:
    return NoAlgebraicSolution(
        squarefree_decomposition=tuple(
            SquarefreeFactor(factor=P(f), multiplicity=1) for f in factors
        ),
        lowest_terms_prime=2,
        obstructions=obstructions,  # type: ignore[arg-type]
        counter_prime=PRIME, p_curvature=None, density=ROOT,
    )  # fmt: skip


def outside(factor: str, residue: str, p: int = 3) -> CounterPrime:
    return CounterPrime(
        p=p, witness=ResidueOutsidePrimeField(factor=P(factor), residue=P(residue))
    )


def pole(factor: str) -> MultiplePole:
    return MultiplePole(factor=P(factor), order=2)


def root(factor: str) -> IrrationalResidue:
    return IrrationalResidue(
        factor=P(factor), residue_polynomial=P("x^2 - 2"), rootless_prime=3
    )


def density(bound: str, *pairs: tuple[int, int]) -> DensityBound:
    return DensityBound(
        bound=Fraction(bound), witnesses=tuple(DensityWitness(p=p, order=o) for p, o in pairs)
    )


def term(factor: str, residue: str = "1") -> PartialFraction:
    return PartialFraction(factor=P(factor), residue=Fraction(residue))


REFUSED: dict[str, tuple[str, Callable[[], object]]] = {
    "a zero residue": ("vacuous", lambda: term("x", "0")),
    "a constant displayed factor": ("vacuous", lambda: term("2")),
    "a displayed factor that is not primitive": ("not-canonical", lambda: term("2*x")),
    "a minimal polynomial of degree 0":
        ("vacuous", lambda: MinimalPolynomial(degree=0, numerator=(), denominator=())),
    "a negative exponent in it": ("not-canonical", lambda: MinimalPolynomial(
        degree=1, numerator=(power("x", "-1"),), denominator=())),
    "a broken exponent in it": ("not-canonical", lambda: MinimalPolynomial(
        degree=1, numerator=(), denominator=(X,))),
    "unsorted bases in it": ("not-canonical", lambda: MinimalPolynomial(
        degree=1, numerator=(power("x + 1", "1"), power("x", "1")), denominator=())),
    "an Eisenstein constant 0": ("vacuous", lambda: Eisenstein(point=0, constant=0)),
    "a negative Eisenstein constant": ("vacuous", lambda: Eisenstein(point=0, constant=-4)),
    "unsorted bases": ("not-canonical", lambda: algebraic((X1, X))),
    "a repeated base": ("not-canonical", lambda: algebraic((X, power("x", "1/3")))),
    "a repeated exponent":
        ("not-canonical", lambda: algebraic((X, power("x + 1", "1/2")))),
    "unsorted displayed factors":
        ("not-canonical", lambda: algebraic((), (term("x + 1"), term("x")))),
    "N = 0": ("vacuous", lambda: algebraic(degree=0)),
    "equal residues in a disagreement": ("vacuous", lambda: Disagreement(
        factor=P("x"), residue_of_equation=Fraction(1), residue_of_closed_form=Fraction(1),
        prime=2)),
    "a constant factor in a disagreement": ("vacuous", lambda: Disagreement(
        factor=P("3"), residue_of_equation=Fraction(1), residue_of_closed_form=Fraction(2),
        prime=2)),
    "a polynomial part 0": ("vacuous", lambda: PolynomialPart(quotient=P("0"))),
    "a multiple pole of order 1":
        ("vacuous", lambda: MultiplePole(factor=P("x"), order=1)),
    "a multiple pole without a place":
        ("vacuous", lambda: MultiplePole(factor=P("1"), order=2)),
    "a constant residue polynomial": ("vacuous", lambda: IrrationalResidue(
        factor=P("x"), residue_polynomial=P("7"), rootless_prime=3)),
    "a residue polynomial that is not primitive": ("not-canonical", lambda: IrrationalResidue(
        factor=P("x"), residue_polynomial=P("2*x^2 - 4"), rootless_prime=3)),
    "p = 1": ("not-canonical", lambda: CounterPrime(p=1, witness=PolynomialPartModP())),
    "a constant witness factor": ("vacuous", lambda: CounterPrime(
        p=3, witness=MultiplePoleModP(factor=P("1")))),
    "a witness factor that is not reduced": ("not-canonical", lambda: CounterPrime(
        p=3, witness=MultiplePoleModP(factor=P("x - 1")))),
    "a witness factor that is not integral": ("not-canonical", lambda: CounterPrime(
        p=3, witness=MultiplePoleModP(factor=P("x + 1/2")))),
    "a witness factor that is not monic": ("not-canonical", lambda: CounterPrime(
        p=3, witness=MultiplePoleModP(factor=P("2*x + 1")))),
    "a constant witness residue": ("vacuous", lambda: outside("x^2 + 1", "2")),
    "a witness residue that is not reduced":
        ("not-canonical", lambda: outside("x^2 + 1", "3*x")),
    "a witness residue of too high degree":
        ("not-canonical", lambda: outside("x^2 + 1", "x^2")),
    "a p-curvature 0": ("vacuous", lambda: PCurvature(numerator=P("0"))),
    "a p-curvature that is not integral":
        ("not-canonical", lambda: PCurvature(numerator=P("1/2*x"))),
    "a density witness at 1": ("not-canonical", lambda: DensityWitness(p=1, order=2)),
    "a Frobenius of order 1": ("vacuous", lambda: DensityWitness(p=2, order=1)),
    "a density 0": ("vacuous", lambda: density("0")),
    "a density above 1": ("vacuous", lambda: density("3/2")),
    "density witnesses out of order": ("not-canonical", lambda: density("5/6", (5, 2), (2, 3))),
    "a density witness twice": ("not-canonical", lambda: density("1/2", (3, 2), (3, 2))),
    "a multiplicity 0":
        ("vacuous", lambda: SquarefreeFactor(factor=P("x"), multiplicity=0)),
    "a constant factor": ("vacuous", lambda: SquarefreeFactor(factor=P("5"), multiplicity=1)),
    "unsorted factors": ("not-canonical", lambda: refutation(("x + 1", "x"))),
    "a repeated factor": ("not-canonical", lambda: refutation(("x", "x"))),
    "obstructions out of order":
        ("not-canonical", lambda: refutation((), root("x"), pole("x"))),
    "two polynomial parts": ("not-canonical", lambda: refutation(
        (), PolynomialPart(quotient=P("1")), PolynomialPart(quotient=P("x")))),
    "a multiple pole twice": ("not-canonical", lambda: refutation((), pole("x"), pole("x"))),
    "irrational residues out of order":
        ("not-canonical", lambda: refutation((), root("x + 1"), root("x"))),
}  # fmt: skip


@pytest.mark.parametrize("name", REFUSED)
def test_what_would_say_nothing_or_has_another_spelling_is_refused(name: str) -> None:
    """Each constructor refuses the value, with the code of the rejection."""
    code, make = REFUSED[name]
    with pytest.raises(InvariantError) as caught:
        make()
    assert caught.value.code == code


def test_the_controls_are_admitted() -> None:
    """The same values without their fault are admitted."""
    term("x", "-1/3")
    algebraic((X, X1), (term("x"), term("x + 1")), 6)
    outside("x^2 + 1", "x + 2")
    CounterPrime(p=3, witness=MultiplePoleModP(factor=P("x + 2")))
    density("5/6", (2, 3), (5, 2))
    refutation(("x", "x + 1"), PolynomialPart(quotient=P("1/2*x")), pole("x"), root("x"))
