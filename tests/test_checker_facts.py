"""The numbers that appendices print, recomputed with sympy and Fractions."""

from __future__ import annotations

from fractions import Fraction

import pytest
import sympy

from certgen.certificate import (
    AlgebraicSolution,
    ClosedFormDisagrees,
    IrrationalResidue,
    NoAlgebraicSolution,
)
from certgen.checker import check
from certgen.checker.facts import AlgebraicFacts, Bezout, ClosedFormFacts, NoAlgebraicFacts
from certgen.polynomial import Polynomial
from tests.handmade import NAMES, handmade, stored

X = sympy.Symbol("x")


def poly(f: Polynomial) -> sympy.Poly:
    return sympy.Poly([sympy.Rational(c.numerator, c.denominator)
                       for c in f.coefficients[::-1]] or [0], X)


def product(factors: list[sympy.Poly]) -> sympy.Poly:
    out = sympy.Poly(1, X)
    for f in factors:
        out = out * f
    return out


def assert_bezout(value: Bezout, f: sympy.Poly, g: sympy.Poly) -> None:
    total = poly(value.left) * f + poly(value.right) * g - 1
    assert all(c % value.p == 0 for c in total.all_coeffs())


@pytest.mark.parametrize("name", NAMES)
def test_the_facts_of_a_certificate_are_true(name: str) -> None:
    """Identities, values and Bezout lines hold, by sympy's polynomials over Q."""
    checked = check(stored(handmade(name)), arithmetic="both")
    equation, proof = checked.certificate.claim.equation, checked.certificate.proof
    a, b = poly(equation.numerator), poly(equation.denominator)
    facts = checked.facts
    if isinstance(facts, ClosedFormFacts):
        assert isinstance(proof, ClosedFormDisagrees)
        proof, facts = proof.actual, facts.actual
    if isinstance(facts, AlgebraicFacts):
        assert isinstance(proof, AlgebraicSolution)
        assert_algebraic(facts, proof, a, b)
    else:
        assert isinstance(facts, NoAlgebraicFacts) and isinstance(proof, NoAlgebraicSolution)
        assert_refutation(facts, proof, a, b)


def assert_algebraic(
    facts: AlgebraicFacts, proof: AlgebraicSolution, a: sympy.Poly, b: sympy.Poly
) -> None:
    bases = [poly(power.base) for power in proof.solution]
    v = product(bases)
    assert facts.beta * v == b and facts.squarefree_degree == max(v.degree(), 0)
    assert [poly(d) for d in facts.derivatives] == [base.diff() for base in bases]
    assert facts.identity is not None and facts.products is not None
    assert poly(facts.identity) == facts.degree * a
    terms = [
        n * base.diff() * product(bases[:i] + bases[i + 1 :])
        for i, (n, base) in enumerate(zip(facts.numerators, bases, strict=True))
    ]
    assert [poly(p) for p in facts.products] == terms
    if facts.bezout is not None:
        assert facts.bezout.p == proof.squarefree_prime
        assert_bezout(facts.bezout, v, v.diff())
    assert facts.b_derivative is not None and poly(facts.b_derivative) == b.diff()
    for term, values in zip(proof.partial_fractions, facts.root_values, strict=True):
        assert (values is None) == (term.factor.degree > 1)
        if values is not None:
            root = sympy.Rational(values.root.numerator, values.root.denominator)
            assert poly(term.factor).eval(root) == 0
            assert a.eval(root) == values.a and b.diff().eval(root) == values.derivative
            assert values.a / values.derivative == term.residue
    if facts.spot is not None:
        at = facts.spot.point
        assert (facts.spot.a, facts.spot.b) == (a.eval(at), b.eval(at))
        assert list(facts.spot.bases) == [base.eval(at) for base in bases]
        assert list(facts.spot.derivatives) == [base.diff().eval(at) for base in bases]
        assert list(facts.spot.terms) == [term.eval(at) for term in terms]
        assert facts.degree * facts.spot.a == facts.beta * sum(facts.spot.terms)


def assert_refutation(
    facts: NoAlgebraicFacts, proof: NoAlgebraicSolution, a: sympy.Poly, b: sympy.Poly
) -> None:
    if facts.lowest_terms is not None:
        assert facts.lowest_terms.p == proof.lowest_terms_prime
        assert_bezout(facts.lowest_terms, b, a)
    radical = product([poly(f.factor) for f in proof.squarefree_decomposition])
    if facts.reduction.bezout is not None:
        assert facts.reduction.bezout.p == proof.counter_prime.p
        assert_bezout(facts.reduction.bezout, radical, radical.diff())
    irrational = [o for o in proof.obstructions if isinstance(o, IrrationalResidue)]
    for obstruction, fact in zip(irrational, facts.irrational, strict=True):
        g = poly(obstruction.factor)
        top, bottom = poly(fact.numerator), poly(fact.derivative)
        n = obstruction.residue_polynomial.degree
        total = sympy.Poly(0, X)
        for k, c in enumerate(obstruction.residue_polynomial.numerators):
            total += c * top**k * bottom ** (n - k)
        assert total == g * poly(fact.cofactor)
        assert (top * b.diff() - bottom * a).rem(g) == 0
        spot = fact.spot
        assert spot.total == total.eval(spot.point) == spot.factor * spot.cofactor
        assert spot.numerator == top.eval(spot.point)
        assert spot.derivative == bottom.eval(spot.point)
        if fact.discriminant is not None:
            r = poly(obstruction.residue_polynomial)
            assert fact.discriminant == r.discriminant()
            assert not sympy.sqrt(fact.discriminant).is_rational


def test_a_facts_test_sees_every_kind() -> None:
    """The certificates above contain both sides, a Bezout line of each kind and a spot."""
    facts = [check(stored(handmade(name))).facts for name in NAMES]
    algebraic = [f for f in facts if isinstance(f, AlgebraicFacts)]
    refuted = [f for f in facts if isinstance(f, NoAlgebraicFacts)]
    assert any(f.bezout for f in algebraic) and any(f.spot for f in algebraic)
    assert any(f.lowest_terms for f in refuted) and any(f.irrational for f in refuted)
    assert any(f.reduction.bezout for f in refuted)
    assert any(values for f in algebraic for values in f.root_values)
    assert Fraction(1, 2) in {f.density for f in refuted}
