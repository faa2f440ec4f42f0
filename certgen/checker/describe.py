"""From a checked proof to the facts that an appendix prints (see `facts`).

Called after the rules have accepted; nothing here decides anything.
"""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from itertools import islice
from math import isqrt, prod
from typing import cast

from certgen.certificate import (
    AlgebraicSolution,
    CounterPrime,
    IrrationalResidue,
    NoAlgebraicSolution,
    PolynomialPart,
    ResidueOutsidePrimeField,
)
from certgen.checker.algebraic import common_degree
from certgen.checker.arithmetic import Arithmetic, ModPoly, ZPoly, fold
from certgen.checker.common import from_mod, from_z, to_mod, to_z
from certgen.checker.facts import (
    AlgebraicFacts,
    Bezout,
    IdentitySpot,
    IrrationalResidueFacts,
    NoAlgebraicFacts,
    PrimeStatus,
    ProductSpot,
    ReductionFacts,
    RootValues,
)
from certgen.checker.primes import primes, primes_below
from certgen.checker.reduction import is_good, is_p_curvature_zero, reduce_fraction
from certgen.checker.refutation import reduce_residue, squarefree_part, vanishing_form
from certgen.claim import FirstOrderEquation
from certgen.polynomial import Polynomial

__all__ = ["describe_algebraic_solution", "describe_no_algebraic_solution"]

DISPLAY_DEGREE = 40
"""Identities are expanded up to this degree of b."""

STRIP_DEGREE = 60
"""Up to this degree of b the first STRIP_LENGTH primes are classified."""

STRIP_LENGTH = 12

BEZOUT_DEGREE = 12
"""Up to this degree coprimality modulo a prime is shown by a Bezout line."""

IRREDUCIBLE_DEGREE = 40
"""Up to this degree it is tested whether a witness's factor is irreducible mod p."""

SPOT_DEGREE = 200
SPOT_POINTS = (2, 3, -2, 1, -1, 4, 5, -3)
SPOT_BITS = 40  # about twelve digits: a pocket calculator


def describe_algebraic_solution(
    arithmetic: Arithmetic, equation: FirstOrderEquation, proof: AlgebraicSolution
) -> AlgebraicFacts:
    """The identities of the proof, expanded and at one point, and the first primes."""
    a = to_z(arithmetic, equation.numerator)
    b = to_z(arithmetic, equation.denominator)
    degree = common_degree(proof.solution)
    numerators = tuple(int(degree * power.exponent) for power in proof.solution)
    bases = [to_z(arithmetic, power.base) for power in proof.solution]
    small = b.degree <= DISPLAY_DEGREE
    one = arithmetic.integer_polynomial([1])
    v = fold(bases, lambda f, g: f * g, one) if b.degree <= STRIP_DEGREE else one
    factors = [term.factor for term in proof.partial_fractions] if small else []
    spotted = bases and b.degree <= SPOT_DEGREE
    return AlgebraicFacts(
        degree=degree,
        beta=b.leading() // prod(base.leading() for base in bases),
        numerators=numerators,
        derivatives=tuple(from_z(base.derivative()) for base in bases),
        products=_products(bases, numerators) if small else None,
        identity=from_z(a.times(degree)) if small else None,
        spot=_spot(a, b, bases, numerators) if spotted else None,
        squarefree_degree=sum(base.degree for base in bases),
        bezout=_bezout(arithmetic, v, v.derivative(), proof.squarefree_prime),
        b_derivative=from_z(b.derivative()) if small else None,
        root_values=tuple(_root_values(equation, factor) for factor in factors),
        strip=_strip(a, b, v, STRIP_LENGTH) if b.degree <= STRIP_DEGREE else (),
    )


def _products(
    bases: list[ZPoly], numerators: tuple[int, ...]
) -> tuple[Polynomial, ...]:
    out = []
    for i, n in enumerate(numerators):
        product = bases[i].derivative().times(n)
        for j, other in enumerate(bases):
            product = product * other if j != i else product
        out.append(from_z(product))
    return tuple(out)


def _root_values(equation: FirstOrderEquation, factor: Polynomial) -> RootValues | None:
    if factor.degree != 1:
        return None
    root = Fraction(-factor.numerators[0], factor.numerators[1])
    b = equation.denominator.numerators
    return RootValues(
        root=root,
        a=_value(equation.numerator.numerators, root),
        derivative=_value([k * c for k, c in enumerate(b)][1:], root),
    )


def _value(coefficients: Sequence[int], x: Fraction) -> Fraction:
    out = Fraction(0)
    for c in reversed(coefficients):
        out = out * x + c
    return out


def _bezout(arithmetic: Arithmetic, f: ZPoly, g: ZPoly, p: int) -> Bezout | None:
    """u, v with u*f + v*g = 1 modulo p, for coprime f and g (Euclid)."""
    if not (1 <= f.degree <= BEZOUT_DEGREE and 0 <= g.degree <= BEZOUT_DEGREE):
        return None
    one = arithmetic.modular_polynomial([1], p)
    r, next_r = f.modulo(p), g.modulo(p)
    u, next_u, v, next_v = one, one - one, one - one, one
    while next_r.degree >= 0:
        quotient = r.quotient(next_r)
        r, next_r = next_r, r - quotient * next_r
        u, next_u = next_u, u - quotient * next_u
        v, next_v = next_v, v - quotient * next_v
    scale = one.quotient(r)
    return Bezout(p=p, left=from_mod(u * scale), right=from_mod(v * scale))


def _spot(
    a: ZPoly, b: ZPoly, bases: list[ZPoly], numerators: tuple[int, ...]
) -> IdentitySpot | None:
    """The identities at the first point with small values, else with the smallest."""
    usable = [x for x in SPOT_POINTS if b.value(x) != 0]
    if not usable:
        return None
    size = {x: max(abs(a.value(x)), abs(b.value(x))).bit_length() for x in usable}
    small = [x for x in usable if size[x] <= SPOT_BITS]
    point = small[0] if small else min(usable, key=lambda x: (size[x], usable.index(x)))
    values = tuple(base.value(point) for base in bases)
    derivatives = tuple(base.derivative().value(point) for base in bases)
    terms = []
    for i, n in enumerate(numerators):
        term = n * derivatives[i]
        for j, value in enumerate(values):
            term *= value if j != i else 1
        terms.append(term)
    return IdentitySpot(
        point=point,
        a=a.value(point),
        b=b.value(point),
        bases=values,
        derivatives=derivatives,
        terms=tuple(terms),
    )


def _status(a: ZPoly, b: ZPoly, radical: ZPoly, q: int) -> PrimeStatus:
    if not is_good(b, radical, q):
        return PrimeStatus(p=q, status="bad")
    return PrimeStatus(p=q, status="zero" if is_p_curvature_zero(a, b, q) else "nonzero")


def _strip(a: ZPoly, b: ZPoly, radical: ZPoly, length: int) -> tuple[PrimeStatus, ...]:
    return tuple(_status(a, b, radical, q) for q in islice(primes(), length))


# --------------------------------------------------------------------------


def describe_no_algebraic_solution(
    arithmetic: Arithmetic, equation: FirstOrderEquation, proof: NoAlgebraicSolution
) -> NoAlgebraicFacts:
    """The reduction at the counter-prime, the primes below it, the residues."""
    a = to_z(arithmetic, equation.numerator)
    b = to_z(arithmetic, equation.denominator)
    radical = squarefree_part(arithmetic, proof)
    smaller = [
        PrimeStatus(p=q, status="zero" if is_good(b, radical, q) else "bad")
        for q in primes_below(proof.counter_prime.p)
    ]
    length = max(STRIP_LENGTH, len(smaller) + 1)
    show_strip = b.degree <= STRIP_DEGREE and length <= 4 * STRIP_LENGTH
    return NoAlgebraicFacts(
        beta=b.leading()
        // prod(
            f.factor.numerators[-1] ** f.multiplicity for f in proof.squarefree_decomposition
        ),
        remainder=_remainder(arithmetic, a, b, proof),
        irrational=tuple(
            _irrational(arithmetic, a, b, o)
            for o in proof.obstructions
            if isinstance(o, IrrationalResidue)
        ),
        reduction=_reduction(arithmetic, a, b, radical, proof.counter_prime),
        smaller_primes=tuple(smaller),
        strip=_strip(a, b, radical, length) if show_strip else (),
        density=proof.density.bound,
        lowest_terms=_bezout(arithmetic, b, a, proof.lowest_terms_prime),
    )


def _remainder(
    arithmetic: Arithmetic, a: ZPoly, b: ZPoly, proof: NoAlgebraicSolution
) -> Polynomial | None:
    for o in proof.obstructions:
        if isinstance(o, PolynomialPart):
            q = o.quotient
            rest = a.times(q.denominator) - to_z(arithmetic, q) * b
            return Polynomial.from_coefficients(
                c / q.denominator for c in from_z(rest).coefficients
            )
    return None


def _irrational(
    arithmetic: Arithmetic, a: ZPoly, b: ZPoly, value: IrrationalResidue
) -> IrrationalResidueFacts:
    numerator, derivative = reduce_residue(arithmetic, a, b, to_z(arithmetic, value.factor))
    discriminant = None
    if value.residue_polynomial.degree == 2:
        c0, c1, c2 = value.residue_polynomial.numerators
        discriminant = c1 * c1 - 4 * c0 * c2
    factor = to_z(arithmetic, value.factor)
    total = vanishing_form(arithmetic, value.residue_polynomial, numerator, derivative)
    cofactor = cast(ZPoly, total.exact_quotient(factor))  # the rules saw that it divides
    point = min(SPOT_POINTS, key=lambda x: (factor.value(x) == 0, abs(total.value(x))))
    return IrrationalResidueFacts(
        numerator=from_z(numerator),
        derivative=from_z(derivative),
        discriminant=discriminant,
        cofactor=from_z(cofactor),
        spot=ProductSpot(
            point=point,
            numerator=numerator.value(point),
            derivative=derivative.value(point),
            total=total.value(point),
            factor=factor.value(point),
            cofactor=cofactor.value(point),
        ),
    )


def _reduction(
    arithmetic: Arithmetic, a: ZPoly, b: ZPoly, radical: ZPoly, value: CounterPrime
) -> ReductionFacts:
    reduced = reduce_fraction(a, b, value.p)
    power = irreducible = None
    if isinstance(value.witness, ResidueOutsidePrimeField):
        factor = to_mod(arithmetic, value.witness.factor, value.p)
        residue = to_mod(arithmetic, value.witness.residue, value.p)
        power = from_mod(residue.power(value.p, factor))
        if factor.degree <= IRREDUCIBLE_DEGREE:
            irreducible = is_irreducible(arithmetic, factor, value.p)
    return ReductionFacts(
        numerator=from_mod(reduced.numerator),
        denominator=from_mod(reduced.denominator),
        common_factor=from_mod(reduced.common),
        derivative=from_mod(reduced.denominator.derivative()),
        residue_power=power,
        factor_is_irreducible=irreducible,
        bezout=_bezout(arithmetic, radical, radical.derivative(), value.p),
    )


def is_irreducible(arithmetic: Arithmetic, f: ModPoly, p: int) -> bool:
    """Whether f, of degree n >= 1, is irreducible over F_p (Rabin's test).

    It is iff x^(p^n) = x mod f and x^(p^(n/l)) - x is coprime to f for every
    prime l dividing n.
    """
    n = f.degree
    x = arithmetic.modular_polynomial([0, 1], p)
    power = x.remainder(f)
    for k in range(1, n + 1):
        power = power.power(p, f)
        difference = (power - x).remainder(f)
        prime_index = n % k == 0 and k < n and _is_prime_number(n // k)
        if prime_index and f.gcd(difference).degree > 0:
            return False
    return difference.degree < 0


def _is_prime_number(n: int) -> bool:
    return n > 1 and all(n % d for d in range(2, isqrt(n) + 1))
