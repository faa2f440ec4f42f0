"""The decision for y' = r*y and the proof objects, against other routes."""

from __future__ import annotations

import random
from fractions import Fraction
from itertools import islice
from math import gcd, lcm

import pytest
from flint import fmpq_poly, fmpz_poly, nmod_poly
from hypothesis import given, settings
from hypothesis import strategies as st

from certgen.certificate import (
    AlgebraicSolution,
    Certificate,
    ClosedFormDisagrees,
    IrrationalResidue,
    MultiplePole,
    MultiplePoleModP,
    NoAlgebraicSolution,
    PolynomialPart,
    PolynomialPartModP,
    ResidueOutsidePrimeField,
)
from certgen.claim import FirstOrderEquation
from certgen.errors import ClaimError
from certgen.exact.modular import reduce_fraction, residues_modulo
from certgen.exact.polynomials import from_flint, to_flint
from certgen.exact.primes import large_primes
from certgen.polynomial import Polynomial
from certgen.prover import prove
from certgen.prover.counter_prime import frobenius_order
from certgen.prover.eisenstein import compute_eisenstein
from certgen.prover.first_order import AlgebraicDecision, decide
from tests.first_order_samples import (
    Factors,
    equation_of,
    logarithmic_derivative,
    make_claim,
    make_equation,
    random_base,
    random_factors,
)

bases = st.lists(st.integers(-6, 6), min_size=2, max_size=4).filter(
    lambda c: c[-1] > 0 and gcd(*c) == 1
)
exponents = st.fractions(-4, 4, max_denominator=12).filter(bool)
products = st.lists(st.tuples(bases, exponents), min_size=1, max_size=5)


def _prove(a: list[int], b: list[int], asserts: str = "algebraic") -> Certificate:
    return prove(make_claim(equation_of(a, b), asserts))


def _refutation(equation: FirstOrderEquation) -> NoAlgebraicSolution:
    certificate = prove(make_claim(equation))
    assert certificate.verdict == "refuted"
    assert isinstance(certificate.proof, NoAlgebraicSolution)
    return certificate.proof


def _residues_by_factoring(factors: Factors) -> dict[Polynomial, Fraction]:
    """Irreducible factor -> sum of exponent * multiplicity, by FLINT's factorisation."""
    residues: dict[Polynomial, Fraction] = {}
    for coefficients, exponent in factors:
        for factor, multiplicity in fmpz_poly(coefficients).factor()[1]:
            key = from_flint(factor)
            residues[key] = residues.get(key, Fraction(0)) + exponent * multiplicity
    return {factor: residue for factor, residue in residues.items() if residue}


# ------------------------------------------------------------------ algebraic


@settings(deadline=None)
@given(products)
def test_products_of_powers_are_proved(factors: Factors) -> None:
    """The equation of a product of powers is proved, with exactly its residues."""
    certificate = prove(make_claim(make_equation(*logarithmic_derivative(factors))))
    expected, proof = _residues_by_factoring(factors), certificate.proof
    assert certificate.verdict == "proved"
    assert isinstance(proof, AlgebraicSolution)
    assert {t.factor: t.residue for t in proof.partial_fractions} == expected
    assert {p.exponent for p in proof.solution} == set(expected.values())
    assert proof.degree == lcm(*(rho.denominator for rho in expected.values()))
    for power in proof.solution:
        group = fmpz_poly([1])
        for factor, residue in expected.items():
            group *= to_flint(factor) if residue == power.exponent else 1
        assert from_flint(group) == power.base


@settings(deadline=None)
@given(products)
def test_the_minimal_polynomial_and_squarefreeness(factors: Factors) -> None:
    """Y^N = zeros/poles with the exponents N*rho; V is squarefree at the stated prime
    and at no smaller one that does not divide lc(V)."""
    proof = prove(make_claim(make_equation(*logarithmic_derivative(factors)))).proof
    assert isinstance(proof, AlgebraicSolution)
    minimal = proof.minimal_polynomial
    signed = [(p.base, p.exponent) for p in minimal.numerator]
    signed += [(p.base, -p.exponent) for p in minimal.denominator]
    expected = [(p.base, p.exponent * proof.degree) for p in proof.solution]
    assert sorted(signed, key=lambda t: t[0].sort_key) == expected
    product = fmpz_poly([1])
    for power in proof.solution:
        product *= to_flint(power.base)
    number = int(product.leading_coefficient())
    if product.degree() > 1:
        number *= int(product.resultant(product.derivative()))
    assert number % proof.squarefree_prime
    assert all(number % p == 0 for p in (2, 3, 5, 7, 11, 13) if p < proof.squarefree_prime)


def test_zero() -> None:
    """y' = 0 has the constant solution: empty lists, degree 1."""
    certificate = _prove([], [1])
    proof = certificate.proof
    assert certificate.verdict == "proved" and isinstance(proof, AlgebraicSolution)
    assert (proof.solution, proof.partial_fractions, proof.degree) == ((), (), 1)
    assert proof.minimal_polynomial.numerator == proof.minimal_polynomial.denominator == ()
    assert proof.squarefree_prime == 2
    assert proof.eisenstein is not None
    assert (proof.eisenstein.point, proof.eisenstein.constant) == (0, 1)


@pytest.mark.parametrize("p", [2, 3, 5, 101])
def test_bad_primes_are_not_believed(p: int) -> None:
    """1/(x*(x+p)) is algebraic although its p-curvature at the bad prime p is not 0."""
    proof = _prove([1], [0, p, 1]).proof
    assert isinstance(proof, AlgebraicSolution)
    residues = {t.factor.numerators: t.residue for t in proof.partial_fractions}
    assert residues == {(0, 1): Fraction(1, p), (p, 1): Fraction(-1, p)}


@pytest.mark.parametrize("bits", [10, 60, 300, 2000])
def test_residues_of_any_size(bits: int) -> None:
    """Residues far beyond a machine word are found, several at once."""
    rng = random.Random(bits)
    factors = [
        (base, Fraction(rng.getrandbits(bits) | 1, rng.getrandbits(bits) | 1))
        for base in ([0, 1], [-2, 1], [5, 0, 1], [1, 1, 3])
    ]
    decision = decide(make_equation(*logarithmic_derivative(factors)))
    assert isinstance(decision, AlgebraicDecision)
    found = {from_flint(g.base): g.residue for g in decision.groups}
    assert found == _residues_by_factoring(factors)


def test_residues_that_meet_modulo_the_first_large_primes() -> None:
    """Residues 1, 1 + q1, 1 + q1*q2 coincide modulo the very primes that are used first."""
    q1, q2 = islice(large_primes(), 2)
    inverse = [Fraction(1, q1), Fraction(2, q2)]
    for residues in ([q1, 2 * q1], [1, 1 + q1, 1 + q1 * q2], inverse):
        factors = [([-k, 1], Fraction(rho)) for k, rho in enumerate(residues)]
        decision = decide(make_equation(*logarithmic_derivative(factors)))
        assert isinstance(decision, AlgebraicDecision)
        assert sorted(g.residue for g in decision.groups) == sorted(residues)


def test_many_residues_and_high_degree() -> None:
    """120 different residues; 60 factors of degree 5 in few groups."""
    factors: Factors = [([-k, 1], Fraction(k, 7)) for k in range(1, 121)]
    decision = decide(make_equation(*logarithmic_derivative(factors)))
    assert isinstance(decision, AlgebraicDecision) and len(decision.groups) == 120
    rng = random.Random(3)
    factors = [(random_base(rng, 5), Fraction(k % 4 - 4, 3)) for k in range(60)]
    decision = decide(make_equation(*logarithmic_derivative(factors)))
    assert isinstance(decision, AlgebraicDecision)
    expected: dict[Fraction, fmpz_poly] = {}
    for factor, residue in _residues_by_factoring(factors).items():
        expected[residue] = expected.get(residue, 1) * to_flint(factor)
    assert {g.residue: from_flint(g.base) for g in decision.groups} == {
        residue: from_flint(group) for residue, group in expected.items()
    }


def test_squarefree_prime_in_high_degree() -> None:
    """With 400 linear factors the small primes fail: a large one is stated, and is true."""
    factors: Factors = [([-(k**3) - 1, 1], Fraction(1, 2)) for k in range(400)]
    proof = prove(make_claim(make_equation(*logarithmic_derivative(factors)))).proof
    assert isinstance(proof, AlgebraicSolution)
    p = proof.squarefree_prime
    assert p < 10**12 and all(p % q for q in range(2, int(p**0.5) + 1))
    assert len({(k**3 + 1) % p for k in range(400)}) == 400


# ------------------------------------------------------------------ Eisenstein


@settings(deadline=None)
@given(products)
def test_eisenstein_constant_by_expansion(factors: Factors) -> None:
    """The series of y(x0 + L*t), by Newton's recurrence over Q, has integer coefficients."""
    proof = prove(make_claim(make_equation(*logarithmic_derivative(factors)))).proof
    assert isinstance(proof, AlgebraicSolution) and proof.eisenstein is not None
    point, constant = proof.eisenstein.point, proof.eisenstein.constant
    shift, series = fmpz_poly([point, constant]), [Fraction(1)]
    shifted = [(to_flint(power.base)(shift), power.exponent) for power in proof.solution]
    top, bottom = logarithmic_derivative([([int(c) for c in v], e) for v, e in shifted])
    a = [Fraction(int(c.p), int(c.q)) for c in top.coeffs()]
    b = [Fraction(int(c.p), int(c.q)) for c in bottom.coeffs()]
    for n in range(12):  # b*y' = a*y, coefficient of t^n
        value = sum((a[i] * series[n - i] for i in range(min(n + 1, len(a)))), Fraction(0))
        value -= sum(
            (b[i] * (n + 1 - i) * series[n + 1 - i] for i in range(1, min(n + 1, len(b)))),
            Fraction(0),
        )
        series.append(value / (b[0] * (n + 1)))
    assert all(c.denominator == 1 for c in series)


def test_eisenstein_constants_known() -> None:
    """(1-4x)^(-1/2) is integral itself (central binomial coefficients); x^(-1/2) at 1 needs 4;
    a constant beyond 1000 digits is not stated."""
    central = compute_eisenstein([(fmpz_poly([-1, 4]), Fraction(-1, 2))])
    assert central is not None and (central.point, central.constant) == (0, 1)
    root = compute_eisenstein([(fmpz_poly([0, 1]), Fraction(-1, 2))])
    assert root is not None and (root.point, root.constant) == (1, 4)
    assert compute_eisenstein([(fmpz_poly([10**1000 + 1, 1]), Fraction(1, 2))]) is None


# ------------------------------------------------------------------ not algebraic

disturbances = st.sampled_from(["polynomial part", "double pole", "sqrt(2)"])


@settings(deadline=None)
@given(st.lists(st.tuples(bases, exponents), max_size=3), disturbances, st.integers(1, 9))
def test_disturbed_products_are_refuted(factors: Factors, kind: str, size: int) -> None:
    """A polynomial part, a double pole or 1/(x^2-2) added: refuted, with that obstruction."""
    top, bottom = logarithmic_derivative(factors)
    extra = {
        "polynomial part": fmpq_poly([1]),
        "double pole": fmpq_poly([11, 1]) ** 2,
        "sqrt(2)": fmpq_poly([-2, 0, 1]),
    }[kind]
    expected = {
        "polynomial part": PolynomialPart(quotient=Polynomial((size,))),
        "double pole": MultiplePole(factor=Polynomial((11, 1)), order=2),
        "sqrt(2)": IrrationalResidue,
    }[kind]
    proof = _refutation(make_equation(top * extra + size * bottom, bottom * extra))
    if kind == "sqrt(2)":
        assert [type(o) for o in proof.obstructions] == [expected]
        assert proof.density.bound >= Fraction(1, 2)
    else:
        assert proof.obstructions == (expected,)
        assert (proof.density.bound, proof.density.witnesses) == (1, ())


def test_the_first_primes_may_all_vanish() -> None:
    """y' = 30030*y: 30030 = 2*3*5*7*11*13, so 17 is the smallest counter-prime."""
    proof = _refutation(equation_of([30030], [1]))
    assert proof.counter_prime.p == 17
    assert isinstance(proof.counter_prime.witness, PolynomialPartModP)
    assert proof.squarefree_decomposition == () and proof.lowest_terms_prime == 2
    assert proof.p_curvature is not None
    assert proof.p_curvature.numerator.numerators == (30030 % 17,)


def test_late_counter_prime() -> None:
    """48473881 is a square modulo all odd primes below 67 (a pseudosquare, D. H. Lehmer;
    from memory), so 1/(x^2 - 48473881) survives until 67."""
    proof = _refutation(equation_of([1], [-48473881, 0, 1]))
    assert proof.counter_prime.p == 67
    (obstruction,) = proof.obstructions
    assert isinstance(obstruction, IrrationalResidue)
    assert obstruction.residue_polynomial.numerators == (-1, 0, 4 * 48473881)
    assert obstruction.rootless_prime == 67


def test_cancellation_modulo_p() -> None:
    """(x+2)/x^3 becomes 1/x^2 modulo the good prime 2: a multiple pole there."""
    proof = _refutation(equation_of([2, 1], [0, 0, 0, 1]))
    assert proof.counter_prime.p == 2
    assert proof.counter_prime.witness == MultiplePoleModP(factor=Polynomial((0, 1)))
    assert proof.obstructions == (MultiplePole(factor=Polynomial((0, 1)), order=3),)


def test_all_obstructions_in_order() -> None:
    """x + 1/x^3 + 1/(x-1)^2 + 1/(x^2-3) + 1/(2x+1): each obstruction, none twice."""
    top, bottom = fmpq_poly([0, 1]), fmpq_poly([1])
    for pole in ([0, 0, 0, 1], [1, -2, 1], [-3, 0, 1], [1, 2]):
        v = fmpq_poly(pole)
        top, bottom = top * v + bottom, bottom * v
    proof = _refutation(make_equation(top, bottom))
    shown = proof.obstructions
    assert [type(o) for o in shown] == [
        PolynomialPart,
        MultiplePole,
        MultiplePole,
        IrrationalResidue,
    ]
    assert [o.factor.numerators for o in shown[1:]] == [(-1, 1), (0, 1), (-3, 0, 1)]
    assert [o.order for o in shown[1:3]] == [2, 3]
    assert shown[3].residue_polynomial.numerators == (-1, 0, 12)
    parts = [(f.factor.numerators, f.multiplicity) for f in proof.squarefree_decomposition]
    assert parts == [((-1, 1), 2), ((0, 1), 3), ((-3, -6, 1, 2), 1)]


def test_cubic_residues() -> None:
    """1/(x^3-2): residues t/6, t^3 = 2, so 108 z^3 = 1; Galois group of order 6."""
    proof = _refutation(equation_of([1], [-2, 0, 0, 1]))
    (obstruction,) = proof.obstructions
    assert isinstance(obstruction, IrrationalResidue)
    assert obstruction.residue_polynomial.numerators == (-1, 0, 0, 108)
    assert proof.counter_prime.p == 5
    assert isinstance(proof.counter_prime.witness, ResidueOutsidePrimeField)
    assert proof.density.bound == Fraction(5, 6)


def test_residue_polynomials_by_resultants() -> None:
    """The residue polynomial divides Res_x(g, a - z*b'), its values compared at points."""
    rng = random.Random(8)
    for _ in range(25):
        equation = equation_of(random_base(rng, 2), random_base(rng, rng.randint(3, 7)))
        proof = prove(make_claim(equation)).proof
        a, b = to_flint(equation.numerator), to_flint(equation.denominator)
        assert isinstance(proof, NoAlgebraicSolution) and proof.obstructions
        for obstruction in proof.obstructions:
            assert isinstance(obstruction, IrrationalResidue)
            g, f = to_flint(obstruction.factor), obstruction.residue_polynomial
            power = g.degree() // f.degree
            ratios = set()
            for z in (1, 2, -3, 5):
                resultant = int(g.resultant(a - z * b.derivative()))
                ratios.add(Fraction(resultant, int(to_flint(f)(z)) ** power))
            assert len(ratios) == 1 and 0 not in ratios
            assert len(to_flint(f).factor()[1]) == 1


def _random_refutations(count: int) -> list[tuple[fmpz_poly, fmpz_poly, NoAlgebraicSolution]]:
    rng = random.Random(4)
    found = []
    for k in range(count):
        top, bottom = logarithmic_derivative(random_factors(rng, k % 3, 2))
        v = fmpq_poly(random_base(rng, rng.randint(2, 5))) ** (1 + (k % 5 == 0))
        equation = make_equation(top * v + bottom, bottom * v)
        proof = prove(make_claim(equation)).proof
        if isinstance(proof, NoAlgebraicSolution):
            found.append((to_flint(equation.numerator), to_flint(equation.denominator), proof))
    return found


def test_witnesses_modulo_p() -> None:
    """Each kind of witness shows what it claims, by factoring modulo the counter-prime."""
    kinds = set()
    for a, b, proof in _random_refutations(80):
        p, witness = proof.counter_prime.p, proof.counter_prime.witness
        num, den, _ = reduce_fraction(a, b, p)
        kinds.add(type(witness))
        if isinstance(witness, PolynomialPartModP):
            assert num.degree() >= den.degree()
            continue
        factor = nmod_poly(list(witness.factor.numerators), p)
        factors = {str(f): m for f, m in (den * (1 / den.leading_coefficient())).factor()[1]}
        if isinstance(witness, MultiplePoleModP):
            assert factors[str(factor)] >= 2
        else:
            residue = nmod_poly(list(witness.residue.numerators), p)
            assert factors[str(factor)] == 1
            assert (num - residue * den.derivative()) % factor == 0
    assert {MultiplePoleModP, ResidueOutsidePrimeField} <= kinds


def test_frobenius_orders() -> None:
    """The order is the least t with s^(p^t) = s, by brute force; the bound follows."""
    checked = 0
    for a, b, proof in _random_refutations(60):
        for witness in proof.density.witnesses:
            num, den, _ = reduce_fraction(a, b, witness.p)
            s = residues_modulo(num, den, den.derivative())
            image, order = s.pow_mod(witness.p, den), 1
            while image != s:
                image, order = image.pow_mod(witness.p, den), order + 1
            assert order == witness.order == frobenius_order(a, b, witness.p)
            checked += 1
        if proof.density.witnesses:
            assert proof.density.witnesses[0].p == proof.counter_prime.p
            orders = [w.order for w in proof.density.witnesses]
            assert proof.density.bound == 1 - Fraction(1, lcm(*orders))
    assert checked >= 60


def test_density_in_high_degree() -> None:
    """Where Frobenius has large orders only, the bound 1/2 stands without witnesses."""
    rng = random.Random(1000)
    a, b = random_base(rng, 199), random_base(rng, 200)
    proof = _refutation(equation_of(a, b))
    assert frobenius_order(fmpz_poly(a), fmpz_poly(b), proof.counter_prime.p) is None
    assert (proof.density.bound, proof.density.witnesses) == (Fraction(1, 2), ())


# ------------------------------------------------------------------ claims


@pytest.mark.parametrize(
    ("a", "b", "asserts", "verdict"),
    [
        ([1], [0, 2], "algebraic", "proved"),
        ([1], [0, 2], "transcendental", "refuted"),
        ([1], [1], "algebraic", "refuted"),
        ([1], [1], "transcendental", "proved"),
    ],
)
def test_the_verdict_is_about_the_claim(
    a: list[int], b: list[int], asserts: str, verdict: str
) -> None:
    """sqrt(x) is algebraic, exp(x) is not; the verdict reads the claim literally."""
    assert _prove(a, b, asserts).verdict == verdict


def test_common_factors_are_refused() -> None:
    """An equation that is not in lowest terms gets one clear error."""
    for a, b in [((0, 1), (0, 0, 1)), ((-1, 1), (2, -3, 1)), ((0, 0, 1), (0, 1, 1))]:
        equation = FirstOrderEquation(numerator=Polynomial(a), denominator=Polynomial(b))
        with pytest.raises(ClaimError, match="common factor"):
            prove(make_claim(equation))


# ------------------------------------------------------------------ closed forms

HALF = Fraction(1, 2)


@settings(deadline=None)
@given(products)
def test_right_closed_forms_are_accepted(factors: Factors) -> None:
    """The product itself is accepted, with its multiple roots and common factors."""
    merged: dict[tuple[int, ...], Fraction] = {}
    for base, exponent in factors:
        merged[tuple(base)] = merged.get(tuple(base), Fraction(0)) + exponent
    solution = [(list(base), exponent) for base, exponent in merged.items() if exponent]
    claim = make_claim(make_equation(*logarithmic_derivative(factors)), solution=solution)
    assert prove(claim).verdict == "proved"


@pytest.mark.parametrize(
    ("solution", "factor", "expected", "claimed", "prime"),
    [
        # the equation is that of x^(1/2)*(x^2-1)^(1/3); factors in order: x-1, x, x+1
        ([([0, 1], HALF)], (-1, 1), Fraction(1, 3), 0, 2),
        ([([0, 1], HALF), ([-1, 1], Fraction(1, 3))], (1, 1), Fraction(1, 3), 0, 3),
        (
            [([0, 0, 1], HALF), ([-1, 0, 1], Fraction(1, 3))],
            (0, 1),
            HALF,
            1,
            2,
        ),
        (
            [([0, 1], HALF), ([-1, 0, 1], Fraction(1, 3)), ([-2, 1], HALF)],
            (-2, 1),
            0,
            HALF,
            5,
        ),
        ([], (-1, 1), Fraction(1, 3), 0, 2),
    ],
)
def test_wrong_closed_forms(
    solution: Factors,
    factor: tuple[int, ...],
    expected: Fraction,
    claimed: Fraction,
    prime: int,
) -> None:
    """A wrong closed form is refuted with the smallest factor at which it disagrees."""
    right: Factors = [([0, 1], HALF), ([-1, 0, 1], Fraction(1, 3))]
    equation = make_equation(*logarithmic_derivative(right))
    certificate = prove(make_claim(equation, solution=solution))
    assert certificate.verdict == "refuted"
    assert isinstance(certificate.proof, ClosedFormDisagrees)
    found = certificate.proof.disagreement
    assert found.factor.numerators == factor
    assert (found.residue_of_equation, found.residue_of_closed_form) == (expected, claimed)
    assert found.prime == prime
    assert certificate.proof.actual == prove(make_claim(equation)).proof


def test_a_closed_form_of_the_constant_solution() -> None:
    """y' = 0 is not solved by sqrt(x), but by the empty product."""
    equation = equation_of([], [1])
    assert prove(make_claim(equation, solution=[])).verdict == "proved"
    proof = prove(make_claim(equation, solution=[([0, 1], HALF)])).proof
    assert isinstance(proof, ClosedFormDisagrees)
    assert proof.disagreement.residue_of_equation == 0


def test_progress_is_reported() -> None:
    """A long search calls back: a product of the first 600 primes times y."""
    number, messages = 1, []
    for p in range(2, 5000):
        if all(p % q for q in range(2, int(p**0.5) + 1)):
            number *= p
    proof = prove(make_claim(equation_of([number], [1])), messages.append).proof
    assert isinstance(proof, NoAlgebraicSolution)
    assert proof.counter_prime.p == 5003 and messages
