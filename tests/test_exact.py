"""The prover's algebra against definitions, other routes and published numbers."""

from __future__ import annotations

import random
from fractions import Fraction
from itertools import islice, pairwise

import pytest
import sympy
from flint import fmpq_poly, fmpz_poly, nmod_poly
from hypothesis import given
from hypothesis import strategies as st

from certgen.exact import integers, modular, polynomials
from certgen.exact.primes import is_prime, large_primes, next_prime, primes
from certgen.polynomial import Polynomial

SMALL_PRIMES = [2, 3, 5, 7, 11, 13]


# ------------------------------------------------------------------ primes


def test_primes_below_1000() -> None:
    """There are 168 primes below 1000, the last is 997 (common knowledge)."""
    found = list(islice(primes(), 169))
    assert found[:5] == [2, 3, 5, 7, 11] and found[167:] == [997, 1009]
    assert list(islice(primes(14), 2)) == [17, 19] and next_prime(-5) == 2


@pytest.mark.parametrize(
    "n",
    [
        0,
        1,
        -7,
        561,  # the smallest Carmichael number
        3215031751,  # strong pseudoprime to the bases 2, 3, 5, 7 (from memory)
        3317044064679887385961981,  # ... to the first 13 primes as bases (from memory)
        (2**61 - 1) * (2**89 - 1),
    ],
)
def test_pseudoprimes_are_no_primes(n: int) -> None:
    """Numbers that fool weak tests are recognised."""
    assert not is_prime(n)


def test_large_primes() -> None:
    """The large primes descend from 2^62 without a gap (sympy agrees)."""
    found = list(islice(large_primes(), 4))
    assert found[0] == sympy.prevprime(2**62)
    assert all(sympy.prevprime(p) == q for p, q in pairwise(found))


# ------------------------------------------------------------------ integers


@given(st.integers(-(2**24), 2**24), st.integers(1, 2**24))
def test_rational_reconstruction(n: int, d: int) -> None:
    """A rational of 49 bits comes back from its image modulo a 62-bit prime."""
    q = next(large_primes())
    value = Fraction(n, d)
    image = value.numerator * pow(value.denominator, -1, q) % q
    assert integers.reconstruct_rational(image, q, 10) == value


def test_reconstruction_refuses_noise() -> None:
    """A random residue has no rational that stands out."""
    q, rng = next(large_primes()), random.Random(1)
    images = [rng.randrange(q) for _ in range(50)]
    assert {integers.reconstruct_rational(c, q, 20) for c in images} == {None}


@given(st.integers(0, 7**20 - 1))
def test_chinese_remainders(value: int) -> None:
    """A number is recovered from its remainders; symmetric ones straddle zero."""
    moduli = [10007, 7**11, 1000003]
    known, modulus = [0], 1
    for q in moduli:
        known = integers.combine_residues(known, modulus, [value % q], q)
        modulus *= q
    assert known == [value % modulus]
    assert integers.symmetric(-value, 2 * 7**20) == -value


@given(st.integers(1, 10**9 - 1))
def test_radical(n: int) -> None:
    """The radical is the product of sympy's prime factors."""
    assert integers.radical(n) == sympy.prod(sympy.primefactors(n))


def test_radical_of_huge_numbers() -> None:
    """From 10^9 on the number stands for itself."""
    assert integers.radical(10**8) == 10 and integers.radical(10**9) == 10**9


# ------------------------------------------------------------------ polynomials

coefficient_lists = st.lists(st.integers(-9, 9), min_size=1, max_size=6).filter(
    lambda c: c[-1] != 0
)


@given(coefficient_lists)
def test_conversion_round_trip(coefficients: list[int]) -> None:
    """Neutral -> FLINT -> neutral changes nothing; rationals are refused."""
    polynomial = Polynomial.from_integers(coefficients)
    assert polynomials.from_flint(polynomials.to_flint(polynomial)) == polynomial
    half = fmpq_poly(coefficients) / 2
    assert polynomials.from_flint_rational(half) == Polynomial.from_coefficients(
        [Fraction(c, 2) for c in coefficients]
    )


def test_conversion_refuses_rationals() -> None:
    """Only integral polynomials enter Z[x]."""
    with pytest.raises(ValueError, match="not integers"):
        polynomials.to_flint(Polynomial((1, 1), 2))


@given(st.lists(coefficient_lists, max_size=7))
def test_product_tree(factors: list[list[int]]) -> None:
    """The balanced product is the product one by one."""
    expected = fmpz_poly([1])
    for f in factors:
        expected *= fmpz_poly(f)
    assert polynomials.product(map(fmpz_poly, factors)) == expected


weighted = st.tuples(coefficient_lists, st.fractions(-3, 3, max_denominator=9))


@given(st.lists(weighted, max_size=5))
def test_logarithmic_derivative(powers: list[tuple[list[int], Fraction]]) -> None:
    """The product tree gives the sum of e*v'/v: compared by value at three points."""
    s, v, n = polynomials.logarithmic_derivative([(fmpz_poly(f), e) for f, e in powers])
    for point in (101, 10007, -997):
        expected = Fraction(0)
        for coefficients, e in powers:
            f = fmpz_poly(coefficients)
            expected += e * Fraction(int(f.derivative()(point)), int(f(point)))
        assert Fraction(int(s(point)), n * int(v(point))) == expected


@given(st.lists(coefficient_lists, min_size=1, max_size=4))
def test_coprime_base(inputs: list[list[int]]) -> None:
    """The base is squarefree and coprime, and every input is a product of its powers."""
    base = polynomials.coprime_base(map(fmpz_poly, inputs))
    total = polynomials.product(base)
    assert total.gcd(total.derivative()).degree() <= 0
    assert all(polynomials.from_flint(g).is_primitive for g in base)
    for f in map(fmpz_poly, inputs):
        for g in base:
            _, f = polynomials.order_along(g, f)
        assert f.degree() == 0


def test_order_along() -> None:
    """x - 2 divides 3*(x-2)^2*(2x+1) twice, 2x + 1 once, x not at all."""
    f = 3 * fmpz_poly([-2, 1]) ** 2 * fmpz_poly([1, 2])
    orders = [polynomials.order_along(fmpz_poly(g), f)[0] for g in ([-2, 1], [1, 2], [0, 1])]
    assert orders == [2, 1, 0]


@given(coefficient_lists, st.integers(-5, 5))
def test_taylor_coefficients(coefficients: list[int], point: int) -> None:
    """f^(j)(point)/j! by repeated differentiation."""
    f, found, factorial = fmpz_poly(coefficients), [], 1
    for j in range(len(coefficients)):
        factorial *= max(j, 1)
        found.append(int(f(point)) // factorial)
        f = f.derivative()
    assert polynomials.taylor_coefficients(fmpz_poly(coefficients), point) == found


# ------------------------------------------------------------------ modulo p


def _random_fraction(rng: random.Random, p: int) -> tuple[nmod_poly, nmod_poly]:
    while True:
        num = nmod_poly([rng.randrange(p) for _ in range(rng.randint(0, 6))], p)
        den = nmod_poly([rng.randrange(p) for _ in range(rng.randint(0, 5))] + [1], p)
        common = den.gcd(num)
        if rng.random() < 0.6:  # a logarithmic derivative
            num = den.derivative()
            common = den.gcd(num)
        return num // common, den // common


def _p_curvature_by_recursion(num: nmod_poly, den: nmod_poly, p: int) -> nmod_poly:
    """N with (D + num/den)^p (1) = N/den^p: N_0 = 1, f = N_k/den^k, f' + r*f next."""
    numerator = nmod_poly([1], p)
    for k in range(p):
        numerator = (
            numerator.derivative() * den - k * numerator * den.derivative() + num * numerator
        )
    return numerator


@pytest.mark.parametrize("p", SMALL_PRIMES)
def test_p_curvature_by_two_routes(p: int) -> None:
    """Closed formula and p-fold application of D + r agree; zero iff the test says so."""
    rng, zeros = random.Random(p), 0
    for _ in range(60):
        num, den = _random_fraction(rng, p)
        slow = _p_curvature_by_recursion(num, den, p)
        fast = nmod_poly([0], p)
        for k, c in enumerate(modular.p_curvature_numerator(num, den, p)):
            fast += nmod_poly([0] * (k * p) + [c], p)
        assert fast == slow
        assert modular.p_curvature_vanishes(num, den, p) == (slow == 0)
        zeros += slow == 0
    assert 10 <= zeros <= 55


@pytest.mark.parametrize("count", [1, 2, 7, 8, 9, 40, 64, 65, 150])
def test_values_are_found(count: int) -> None:
    """An s built to take known values on known factors: both are found again."""
    q, rng = next(large_primes()), random.Random(count)
    values = rng.sample(range(1, 10**6), count)
    roots = rng.sample(range(10**9), 2 * count)
    groups = [
        modular.polynomial_with_roots(roots[2 * k : 2 * k + 2], q) for k in range(count)
    ]
    g, s = polynomials.product(groups), nmod_poly([], q)
    for group, value in zip(groups, values, strict=True):
        rest = g // group
        _, inverse, _ = (rest % group).xgcd(group)
        s += rest * (inverse * value % group)
    assert sorted(modular.find_values(s, g, q)) == sorted(values)
    assert modular.split_by_values(s, g, values, q) == groups
    assert modular.split_by_values(s, g, [*values, 5], q) is None
    assert modular.split_by_values(s, g, [values[0] + 10**7, *values[1:]], q) is None


@pytest.mark.parametrize("degree", [2, 30, 200])
def test_values_outside_the_prime_field(degree: int) -> None:
    """s = x modulo a g that does not split: some value lies outside F_q."""
    q, rng = next(large_primes()), random.Random(degree)
    g = nmod_poly([rng.randrange(q) for _ in range(degree - 2)] + [1], q)
    g *= nmod_poly([-next(n for n in primes() if pow(n, (q - 1) // 2, q) != 1), 0, 1], q)
    factors = g.factor()[1]
    assert any(f.degree() > 1 for f, _ in factors)  # the premise, by factoring
    assert modular.find_values(nmod_poly([0, 1], q), g, q) is None


@given(coefficient_lists.filter(lambda c: len(c) > 1), st.sampled_from(SMALL_PRIMES))
def test_roots_modulo_p(coefficients: list[int], p: int) -> None:
    """has_root agrees with trying all of F_p."""
    f = fmpz_poly(coefficients)
    if nmod_poly(f, p).degree() >= 1:
        assert modular.has_root(f, p) == any(int(f(k)) % p == 0 for k in range(p))


@given(coefficient_lists)
def test_squarefree_part(coefficients: list[int]) -> None:
    """It has the same irreducible factors, each once."""
    f = fmpz_poly(coefficients)
    part = modular.squarefree_part(f * f)
    factors = [(polynomials.from_flint(g), m) for g, m in part.factor()[1]]
    assert {m for _, m in factors} <= {1}
    assert {g for g, _ in factors} == {polynomials.from_flint(g) for g, _ in f.factor()[1]}
