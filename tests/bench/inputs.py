"""Seeded equations of a given degree, both kinds."""

from __future__ import annotations

import random
from fractions import Fraction

from flint import fmpz_poly

from certgen.claim import FirstOrderClaim, FirstOrderEquation, Letters
from certgen.polynomial import Polynomial

Factors = list[tuple[fmpz_poly, Fraction]]


def random_factors(degree: int, seed: int) -> Factors:
    """Distinct primitive factors of degree at most 5 with rational exponents."""
    rng = random.Random(seed)
    out: dict[str, tuple[fmpz_poly, Fraction]] = {}
    left = degree
    while left:
        size = min(left, rng.randint(1, 5))
        f = fmpz_poly([rng.randint(-99, 99) for _ in range(size)] + [rng.randint(1, 99)])
        f = f // f.content()
        if f[0] == 0 or f.gcd(f.derivative()).degree() > 0:
            continue
        if any(f.gcd(g).degree() > 0 for g, _ in out.values()):
            continue
        exponent = Fraction(rng.choice([-7, -5, -4, -3, -2, -1, 1, 2, 3, 4, 5, 7]),
                            rng.choice([1, 2, 3, 4, 5, 6]))
        out[str(f)] = (f, exponent)
        left -= size
    return list(out.values())


def multiply_out(factors: Factors) -> fmpz_poly:
    """The product of the factors, by a balanced tree."""
    level = [f for f, _ in factors]
    while len(level) > 1:
        pairs = [level[i] * level[i + 1] for i in range(0, len(level) - 1, 2)]
        level = pairs + level[len(level) & ~1 :]
    return level[0]


def algebraic_equation(factors: Factors) -> FirstOrderEquation:
    """The equation of prod f^exponent."""
    pairs = [(exponent * 60, f) for f, exponent in factors]
    nodes = [(f.derivative() * int(n), f) for n, f in pairs]
    while len(nodes) > 1:
        merged = [
            (a * d + c * b, b * d)
            for (a, b), (c, d) in zip(nodes[0::2], nodes[1::2], strict=False)
        ]
        nodes = merged + nodes[len(nodes) & ~1 :]
    numerator, denominator = nodes[0]
    return equation(numerator, denominator * 60)


def transcendental_equation(degree: int, seed: int) -> FirstOrderEquation:
    """A dense random equation: simple poles, irrational residues."""
    rng = random.Random(seed)
    a = fmpz_poly([rng.randint(-99, 99) for _ in range(degree - 1)] + [1])
    b = fmpz_poly([rng.randint(-99, 99) for _ in range(degree)] + [1])
    return equation(a, b)


def equation(a: fmpz_poly, b: fmpz_poly) -> FirstOrderEquation:
    """The canonical equation b*y' = a*y of coprime a, b up to integers."""
    content = fmpz_poly([a.content(), b.content()]).content()
    sign = 1 if b.leading_coefficient() > 0 else -1
    a, b = a // (sign * content), b // (sign * content)
    return FirstOrderEquation(
        numerator=Polynomial(tuple(int(c) for c in a.coeffs())),
        denominator=Polynomial(tuple(int(c) for c in b.coeffs())),
    )


def claim(equation: FirstOrderEquation, name: str, asserts: str) -> FirstOrderClaim:
    """A claim about every solution."""
    return FirstOrderClaim(
        id=name,
        equation=equation,
        as_written="a benchmark",
        letters=Letters(),
        asserts=asserts,  # type: ignore[arg-type]
    )
