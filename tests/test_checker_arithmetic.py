"""The two arithmetics of the checker, against each other and against sympy."""

from __future__ import annotations

from itertools import islice
from typing import Any

import pytest
import sympy
from hypothesis import given, settings
from hypothesis import strategies as st
from sympy.abc import x as X

from certgen.checker.arithmetic import fold, load
from certgen.checker.describe import is_irreducible
from certgen.checker.plain import _product
from certgen.checker.primes import is_prime, primes, radical, require_prime
from certgen.checker.reduction import is_good, is_p_curvature_zero, reduce_fraction
from certgen.errors import RejectedError

PLAIN, FLINT = load("plain"), load("flint")
BOTH = pytest.mark.parametrize("arithmetic", [PLAIN, FLINT], ids=lambda a: a.name)
BIG = 999_999_999_989  # the largest prime below 10^12

SMALL = st.integers(-9, 9)
LISTS = st.lists(SMALL, max_size=9) | st.lists(
    st.integers(-(10**40), 10**40), max_size=12
) | st.lists(SMALL | st.integers(-(2**70), 2**70), min_size=20, max_size=40)  # fmt: skip
PRIMES = st.sampled_from([2, 3, 5, 7, 101, 65_537, BIG])


def strip(c: list[int]) -> list[int]:
    while c and c[-1] == 0:
        c = c[:-1]
    return c


def dense(f: sympy.Poly) -> list[int]:
    return strip([int(c) for c in reversed(f.all_coeffs())])


def poly(c: list[int]) -> sympy.Poly:
    return sympy.Poly(list(reversed(c)) or [0], X, domain="ZZ")


def poly_mod(c: list[int], p: int) -> sympy.Poly:
    return sympy.Poly(list(reversed(c)) or [0], X, modulus=p, symmetric=False)


def both(make: Any, *lists: list[int]) -> list[list[int]]:
    """The coefficients that `make` computes from these lists in each arithmetic."""
    return [
        make(*(a.integer_polynomial(c) for c in lists)).coefficients() for a in (PLAIN, FLINT)
    ]


def both_mod(make: Any, p: int, *lists: list[int]) -> list[list[int]]:
    return [
        make(*(a.modular_polynomial(c, p) for c in lists)).coefficients()
        for a in (PLAIN, FLINT)
    ]


@given(LISTS, LISTS, st.integers(-20, 20))
def test_ring_operations_over_z(f: list[int], g: list[int], n: int) -> None:
    """Sum, difference, product, multiple, derivative: plain = flint = sympy."""
    F, G = poly(f), poly(g)
    assert both(lambda a, b: a + b, f, g) == [dense(F + G)] * 2
    assert both(lambda a, b: a - b, f, g) == [dense(F - G)] * 2
    assert both(lambda a, b: a * b, f, g) == [dense(F * G)] * 2
    assert both(lambda a: a * a, f) == [dense(F * F)] * 2
    assert both(lambda a: a.times(n), f) == [dense(F * n)] * 2
    assert both(lambda a: a.derivative(), f) == [dense(F.diff())] * 2
    assert both(lambda a: a.shifted(n), f) == [dense(F.compose(poly([n, 1])))] * 2


@given(LISTS, st.integers(-(10**6), 10**6), PRIMES)
def test_values_degrees_and_images(f: list[int], n: int, p: int) -> None:
    """Value, degree, leading coefficient, equality, image mod p: of the coefficients."""
    for arithmetic in (PLAIN, FLINT):
        a, c = arithmetic.integer_polynomial(f), strip(f)
        assert a.coefficients() == c
        assert a.degree == len(c) - 1
        assert a.leading() == (c[-1] if c else 0)
        assert a.value(n) == sum(y * n**k for k, y in enumerate(f))
        assert a.modulo(p).coefficients() == strip([y % p for y in c])
        assert a == arithmetic.integer_polynomial([*f, 0])
        assert a != a + arithmetic.integer_polynomial([1])
        assert a != c
        assert a.modulo(p) != c
        with pytest.raises(TypeError):
            hash(a)
        with pytest.raises(TypeError):
            hash(a.modulo(p))


@given(LISTS, LISTS, SMALL)
def test_exact_quotients_over_z(f: list[int], g: list[int], r: int) -> None:
    """f*g divided by g is f; with a remainder, or a quotient outside Z[x], None."""
    g = strip(g) or [3, 2]
    for arithmetic in (PLAIN, FLINT):
        a, b = arithmetic.integer_polynomial(f), arithmetic.integer_polynomial(g)
        quotient = (a * b).exact_quotient(b)
        assert quotient is not None and quotient == a
        if len(g) > 1 and r:
            assert (a * b + arithmetic.integer_polynomial([r])).exact_quotient(b) is None
        if strip(f) and any(c % 2 for c in f):
            assert a.exact_quotient(arithmetic.integer_polynomial([2])) is None
    dividend, divisor = poly(f), poly(g)
    for arithmetic in (PLAIN, FLINT):
        a, b = arithmetic.integer_polynomial(f), arithmetic.integer_polynomial(g)
        found = a.exact_quotient(b)
        q, rest = sympy.div(dividend.set_domain("QQ"), divisor.set_domain("QQ"))
        exact = rest.is_zero and all(c.is_integer for c in q.all_coeffs())
        assert (found is not None) == exact
        if found is not None:
            assert found.coefficients() == dense(q)


@given(LISTS, LISTS, PRIMES)
@settings(max_examples=150)
def test_operations_over_f_p(f: list[int], g: list[int], p: int) -> None:
    """Sum to power: plain = flint = sympy, for p = 2 and for a prime near 10^12."""
    F, G = poly_mod(f, p), poly_mod(g, p)

    def check(make: Any, expected: sympy.Poly, *lists: list[int]) -> None:
        assert both_mod(make, p, *lists) == [strip([c % p for c in dense(expected)])] * 2

    check(lambda a: a, F, f)
    check(lambda a, b: a + b, F + G, f, g)
    check(lambda a, b: a - b, F - G, f, g)
    check(lambda a, b: a * b, F * G, f, g)
    check(lambda a: a.derivative(), F.diff(), f)
    check(lambda a: a.power(3), F**3, f)
    check(lambda a, b: a.gcd(b), sympy.gcd(F, G) if not (F.is_zero and G.is_zero) else F, f, g)
    if not G.is_zero:
        check(lambda a, b: a.quotient(b), F.div(G)[0], f, g)
        check(lambda a, b: a.remainder(b), F.rem(G), f, g)
    if not G.is_zero and G.degree() >= 1:
        check(lambda a, b: a.power(5, b), (F**5).rem(G), f, g)
        check(lambda a, b: a.power(0, b), poly_mod([1], p), f, g)


@given(st.lists(SMALL, min_size=2, max_size=7), st.lists(SMALL, max_size=7), PRIMES)
def test_the_frobenius_power(g: list[int], f: list[int], p: int) -> None:
    """f^p mod g, p up to 10^12: the arithmetics agree, and Frobenius is additive."""
    g = [*g, 1]
    one, two = both_mod(lambda a, b: a.power(p, b), p, f, g)
    assert one == two
    moved = both_mod(
        lambda a, b: (a.power(p, b) + b.derivative().power(p, b)).remainder(b), p, f, g
    )
    summed = both_mod(lambda a, b: (a + b.derivative()).power(p, b), p, f, g)
    assert moved == summed


@given(LISTS, LISTS)
def test_long_products_are_those_of_the_school_method(f: list[int], g: list[int]) -> None:
    """The packed product and the definition of the product agree."""
    expected = [0] * (len(f) + len(g) - 1) if f and g else []
    for i, a in enumerate(f):
        for j, b in enumerate(g):
            expected[i + j] += a * b
    assert _product(f, g) == expected


@pytest.mark.parametrize("bits", [1, 7, 8, 31, 62, 63, 64, 65, 1000])
def test_packed_products_at_their_extremes(bits: int) -> None:
    """All coefficients at the border of a size, every pattern of signs."""
    m = 2**bits - 1
    for f in ([m] * 30, [-m] * 30, [m, -m] * 15, [0] * 29 + [-m], [-m - 1] * 30):
        for g in ([m] * 9, [-m] * 9, [-m - 1, m, 0] * 3):
            assert both(lambda a, b: a * b, f, g) == [dense(poly(f) * poly(g))] * 2
        assert both(lambda a: a * a, f) == [dense(poly(f) ** 2)] * 2


@pytest.mark.parametrize("p", [2, 3, BIG])
def test_zero_and_constants_over_f_p(p: int) -> None:
    """gcds with zero, derivatives that vanish, images that are zero."""
    assert both_mod(lambda a, b: a.gcd(b), p, [], []) == [[], []]
    assert both_mod(lambda a, b: a.gcd(b), p, [], [1, p - 1]) == both_mod(
        lambda a, b: a.gcd(b), p, [1, p - 1], []
    )
    assert both_mod(lambda a: a, p, [p, 2 * p]) == [[], []]
    assert both_mod(lambda a: a.derivative(), p, [0, 1]) == [[1], [1]]
    if p < 10:
        assert both_mod(lambda a: a.derivative(), p, [0] * p + [1]) == [[], []]


def test_there_are_two_arithmetics() -> None:
    """Their names are plain and flint."""
    assert (PLAIN.name, FLINT.name) == ("plain", "flint")
    with pytest.raises(ValueError, match="'plain' or 'flint'"):
        load("decimal")


@given(st.lists(st.text(max_size=2), max_size=9))
def test_fold_keeps_the_order(items: list[str]) -> None:
    """A balanced tree over an associative operation that does not commute."""
    assert fold(items, lambda a, b: a + b, "") == "".join(items)


# --------------------------------------------------------------------------
# primes


def test_primes_are_those_of_sympy() -> None:
    """Up to 20,000, and at the border of trial division."""
    assert [n for n in range(-5, 20_000) if is_prime(n)] == list(sympy.primerange(20_000))
    assert list(islice(primes(), 100)) == list(sympy.primerange(542))
    for n in (BIG, 999_983**2, 999_979 * 999_983, 10**12 - 1, 561, 25_326_001):
        assert is_prime(n) == sympy.isprime(n)


@pytest.mark.parametrize(
    "n", [-7, -1, 0, 1, 4, 9, 91, 10**12, 2**61 - 1, 10**5000 + 1, 999_983**2],
    ids=lambda n: f"{n.bit_length()}-bits",
)
def test_what_is_not_proved_prime_is_rejected(n: int) -> None:
    """Composites and everything from 10^12 on, quickly; the message stays short."""
    with pytest.raises(RejectedError) as caught:
        require_prime(n, "$.p")
    assert (caught.value.code, caught.value.path) == ("not-prime", "$.p")
    assert len(str(caught.value)) < 200
    require_prime(BIG, "$.p")


def test_radicals_are_those_of_sympy() -> None:
    """The product of the primes, and n itself from the limit on."""
    for n in [*range(1, 500), 2**29, 3**12 * 7, 999_983 * 4, 6**6]:
        assert radical(n) == sympy.prod(sympy.primefactors(n))
    assert radical(10**9) == 10**9
    assert radical(2**100) == 2**100


# --------------------------------------------------------------------------
# reduction and p-curvature, by another route


def naive(p: int, f: list[int], g: list[int], sign: int = 1) -> list[int]:
    size = max(len(f), len(g))
    pad = [c + [0] * (size - len(c)) for c in (f, g)]
    return strip([(a + sign * b) % p for a, b in zip(*pad, strict=True)])


def naive_product(p: int, f: list[int], g: list[int]) -> list[int]:
    out = [0] * max(len(f) + len(g) - 1, 0)
    for i, a in enumerate(f):
        for j, b in enumerate(g):
            out[i + j] = (out[i + j] + a * b) % p
    return strip(out)


def naive_derivative(p: int, f: list[int]) -> list[int]:
    return strip([k * c % p for k, c in enumerate(f)][1:])


def p_curvature_numerator(a: list[int], b: list[int], p: int) -> list[int]:
    """a_(p-1) + a^p where r^(k) = a_k/b^(k+1): the definition, division-free.

    r^(p-1) + r^p = (a_(p-1) + a^p)/b^p, a_0 = a, a_(k+1) = a_k'*b - (k+1)*a_k*b'.
    """
    a, b = strip([c % p for c in a]), strip([c % p for c in b])
    top, power = a, [1]
    for k in range(p - 1):
        left = naive_product(p, naive_derivative(p, top), b)
        right = naive_product(p, top, naive_derivative(p, b))
        top = naive(p, left, [(k + 1) * c for c in right], -1)
    for _ in range(p):
        power = naive_product(p, power, a)
    return naive(p, top, power)


@BOTH
@given(
    st.lists(SMALL, max_size=5), st.lists(SMALL, max_size=4), st.sampled_from([2, 3, 5, 7, 11])
)
def test_when_the_p_curvature_vanishes(
    arithmetic: Any, a: list[int], b: list[int], p: int
) -> None:
    """Poles and residues mod p decide as the definition r^(p-1) + r^p = 0 does."""
    b = [*b, 1]
    found = is_p_curvature_zero(
        arithmetic.integer_polynomial(a), arithmetic.integer_polynomial(b), p
    )
    assert found == (p_curvature_numerator(a, b, p) == [])


@BOTH
@pytest.mark.parametrize("p", [2, 3, 5, 7])
def test_logarithmic_derivatives_have_p_curvature_zero(arithmetic: Any, p: int) -> None:
    """u'/u mod p for every monic u of degree at most 3: never an obstruction."""
    for n in range(p**3):
        u = [n % p, n // p % p, n // p**2, 1]
        f = arithmetic.integer_polynomial(u)
        assert is_p_curvature_zero(f.derivative(), f, p)


@BOTH
def test_good_primes(arithmetic: Any) -> None:
    """5x at 5, x(x+5) at 5, x^2-x-1 at 5 are bad; a repeated factor as such is not."""
    z = arithmetic.integer_polynomial
    assert not is_good(z([0, 5]), z([0, 1]), 5)
    assert not is_good(z([0, 5, 1]), z([0, 5, 1]), 5)
    assert not is_good(z([-1, -1, 1]), z([-1, -1, 1]), 5)
    assert is_good(z([0, 0, 1]), z([0, 1]), 5)
    assert is_good(z([3]), z([1]), 5)
    assert not is_good(z([3]), z([1]), 3)


@BOTH
def test_reduction_cancels(arithmetic: Any) -> None:
    """(x + 2)/x^3 at 2 is 1/x^2 after cancelling x."""
    z = arithmetic.integer_polynomial
    reduced = reduce_fraction(z([2, 1]), z([0, 0, 0, 1]), 2)
    assert reduced.numerator.coefficients() == [1]
    assert reduced.denominator.coefficients() == [0, 0, 1]
    assert reduced.common.coefficients() == [0, 1]


@BOTH
@given(st.lists(st.integers(0, 12), min_size=1, max_size=8), st.sampled_from([2, 3, 7, 13]))
def test_irreducibility_mod_p(arithmetic: Any, c: list[int], p: int) -> None:
    """Rabin's test agrees with sympy's factorisation."""
    c = [*c, 1]
    found = is_irreducible(arithmetic, arithmetic.modular_polynomial(c, p), p)
    assert found == poly_mod(c, p).is_irreducible
