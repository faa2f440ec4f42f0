"""Polynomials modulo a prime: values on residue classes, p-curvature, Frobenius.

`ModularPolynomial` is FLINT's `nmod_poly`.  Every modulus here is a proved prime
below 2^62 (`certgen.exact.primes`).

In F_p[x]/(g), g squarefree, an element s takes a *value* v along a factor of g
when s = v there with v in F_p.
"""

from __future__ import annotations

import random
from collections.abc import Sequence
from typing import Any, TypeAlias

from flint import nmod_poly

from certgen.exact.polynomials import IntegerPolynomial, product, square_free_parts
from certgen.exact.primes import large_primes

__all__ = [
    "ModularPolynomial",
    "find_values",
    "has_root",
    "is_squarefree",
    "monic",
    "p_curvature_numerator",
    "p_curvature_vanishes",
    "polynomial_with_roots",
    "reduce_fraction",
    "reduce_polynomial",
    "residues_modulo",
    "split_by_values",
    "squarefree_part",
]

ModularPolynomial: TypeAlias = Any

_PROJECTION_LIMIT = 64
_HORNER_LIMIT = 64


def reduce_polynomial(f: IntegerPolynomial, p: int) -> ModularPolynomial:
    """Return f mod p."""
    return nmod_poly(f, p)


def monic(f: ModularPolynomial) -> ModularPolynomial:
    """Return f != 0 divided by its leading coefficient."""
    lead = f.leading_coefficient()
    return f if lead == 1 else f * (1 / lead)


def polynomial_with_roots(roots: Sequence[int], p: int) -> ModularPolynomial:
    """Return the product of the x - root."""
    return product([nmod_poly([-root, 1], p) for root in roots])


def is_squarefree(f: ModularPolynomial) -> bool:
    """Whether f != 0 has no multiple root in an algebraic closure."""
    return bool(f.gcd(f.derivative()).degree() == 0)


def squarefree_part(f: IntegerPolynomial) -> IntegerPolynomial:
    """Return f itself if it is squarefree, shown by one large prime, else its part.

    The part has the roots of f, each once; f != 0.
    """
    q = next(q for q in large_primes() if int(f.leading_coefficient()) % q)
    if is_squarefree(reduce_polynomial(f, q)):
        return f
    return product(part for part, _ in square_free_parts(f))


def has_root(f: IntegerPolynomial, p: int) -> bool:
    """Whether f mod p, of degree at least 1, has a root in F_p."""
    image, variable = nmod_poly(f, p), nmod_poly([0, 1], p)
    return bool(image.gcd(variable.pow_mod(p, image) - variable).degree() > 0)


def reduce_fraction(
    a: IntegerPolynomial, b: IntegerPolynomial, p: int
) -> tuple[ModularPolynomial, ModularPolynomial, ModularPolynomial]:
    """Return (num, den, h): a = h*num, b = h*den mod p, h the monic gcd; b mod p != 0."""
    top, bottom = nmod_poly(a, p), nmod_poly(b, p)
    common = bottom.gcd(top)
    if common.degree() == 0:
        return top, bottom, common
    return top // common, bottom // common, common


def residues_modulo(
    num: ModularPolynomial, den: ModularPolynomial, derivative: ModularPolynomial
) -> ModularPolynomial | None:
    """Return s with num = s*derivative mod den, deg s < deg den; None if not invertible.

    With derivative = den' these are the residues of num/den at the roots of den,
    and None means that den has a multiple root.
    """
    common, _, inverse = den.xgcd(derivative)
    if common.degree() != 0:
        return None
    return num % den * inverse % den


def p_curvature_vanishes(num: ModularPolynomial, den: ModularPolynomial, p: int) -> bool:
    """Whether y' = (num/den)*y has p-curvature 0; num, den coprime or den squarefree.

    It is 0 iff num/den is a logarithmic derivative in F_p(x): no polynomial part,
    simple poles, residues in F_p (Honda 1981; Katz 1972).  A common factor of num
    and a squarefree den only adds the residue 0.
    """
    if num == 0:
        return True
    if num.degree() >= den.degree():
        return False
    s = residues_modulo(num, den, den.derivative())
    return s is not None and bool(s.pow_mod(p, den) == s)


def p_curvature_numerator(
    num: ModularPolynomial, den: ModularPolynomial, p: int
) -> list[int]:
    """Return the c_k with psi_p = (sum c_k x^(k*p)) / den^p.

    psi_p = r^(p-1) + r^p, the first the (p-1)-th derivative, r = num/den; that
    derivative of x^n is -x^(n-p+1) if p divides n + 1, else 0 (Wilson).
    """
    raised = num * den ** (p - 1)
    return [
        int(num[k] - raised[k * p + p - 1])
        for k in range(max(num.degree(), den.degree()) + 1)
    ]


# --------------------------------------------------------------------------
# values


def find_values(s: ModularPolynomial, g: ModularPolynomial, p: int) -> list[int] | None:
    """Return the values of s modulo the squarefree g, None if s^p != s mod g.

    With luck all of them: the minimal polynomial of s comes from the projections
    (w*s^i mod g)(c), w a pseudo-random polynomial and c a point, and where s has many
    values g is split before by Euler's criterion.  `split_by_values` tells whether
    any are missing.
    """
    if g.degree() == 0:
        return []
    minimal = _projected_minimal_polynomial(s, g, p)
    if minimal is None:
        return _find_many_values(s, g, p)
    values = [int(root) for root, _ in minimal.roots()]
    if len(values) < minimal.degree() and s.pow_mod(p, g) != s:
        return None
    return values


def _projected_minimal_polynomial(
    s: ModularPolynomial, g: ModularPolynomial, p: int
) -> ModularPolynomial | None:
    generator = random.Random(p + g.degree())  # w = 1 would be blind for s = x
    power = nmod_poly([generator.getrandbits(61) for _ in range(g.degree())], p)
    point = generator.getrandbits(61)
    values: list[Any] = []
    size = min(8, g.degree())
    while True:
        while len(values) < 2 * size:
            values.append(power(point))
            power = power * s % g
        minimal = _shortest_recurrence(values, p)
        if minimal.degree() < size or size == g.degree():
            return minimal
        if size >= _PROJECTION_LIMIT:
            return None
        size = min(2 * size, g.degree())


def _shortest_recurrence(values: Sequence[Any], p: int) -> ModularPolynomial:
    """Berlekamp-Massey in Euclid's form: the recurrence of length len/2 at most."""
    half = len(values) // 2
    r0, r1 = nmod_poly([0] * (2 * half) + [1], p), nmod_poly(list(values), p)
    t0, t1 = nmod_poly([], p), nmod_poly([1], p)
    while r1.degree() >= half:
        quotient, rest = divmod(r0, r1)
        r0, r1, t0, t1 = r1, rest, t1, t0 - quotient * t1
    length = max(t1.degree(), r1.degree() + 1)
    return monic(nmod_poly([t1[length - k] for k in range(length + 1)], p))


def _find_many_values(
    s: ModularPolynomial, g: ModularPolynomial, p: int
) -> list[int] | None:
    for shift in range(p):
        shifted = s + shift
        sign = shifted.pow_mod((p - 1) // 2, g)
        if sign * sign % g * shifted % g != shifted:
            return None
        part = g.gcd(sign - 1)
        if 0 < part.degree() < g.degree():
            break
    rest = g // part
    first, second = find_values(s % part, part, p), find_values(s % rest, rest, p)
    if first is None or second is None:
        return None
    return sorted({*first, *second})


def split_by_values(
    s: ModularPolynomial, g: ModularPolynomial, values: Sequence[int], p: int
) -> list[ModularPolynomial] | None:
    """Return the monic factors gcd(g, s - v), in the order of the distinct `values`.

    None if their product is not g or one of them is constant.
    """
    if g.degree() < len(values):
        return None
    if len(values) == 1:
        return [monic(g)] if s == values[0] else None
    half = len(values) // 2
    part = g.gcd(_product_of_differences(s, g, values[:half], p))
    if not 0 < part.degree() < g.degree():
        return None
    rest = g // part
    first = split_by_values(s % part, part, values[:half], p)
    second = split_by_values(s % rest, rest, values[half:], p)
    return None if first is None or second is None else first + second


def _product_of_differences(
    s: ModularPolynomial, g: ModularPolynomial, values: Sequence[int], p: int
) -> ModularPolynomial:
    if len(values) > _HORNER_LIMIT:
        return polynomial_with_roots(values, p).compose_mod(s, g)
    result = s - values[0]
    for v in values[1:]:
        result = result * (s - v) % g
    return result
