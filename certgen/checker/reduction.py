"""Reduction of y' = (a/b)*y modulo a prime, and when its p-curvature vanishes.

A prime q is *good* when q does not divide lc(b) and the squarefree part of b
stays squarefree modulo q.  The p-curvature r^(p-1) + r^p (first term: the
(p-1)-th derivative) of r = a/b mod p is zero exactly when r mod p has no
polynomial part, only simple poles, and all residues in F_p (Cartier 1957,
Katz 1972, Honda 1981).
"""

from __future__ import annotations

from dataclasses import dataclass

from certgen.checker.arithmetic import ModPoly, ZPoly

__all__ = ["Reduced", "is_good", "is_p_curvature_zero", "reduce_fraction"]


@dataclass(frozen=True, slots=True)
class Reduced:
    """a = common*numerator, b = common*denominator over F_p, common monic."""

    numerator: ModPoly
    denominator: ModPoly
    common: ModPoly


def is_good(b: ZPoly, radical: ZPoly, q: int) -> bool:
    """Whether the prime q is good for an equation with denominator b."""
    if b.leading() % q == 0:
        return False
    image = radical.modulo(q)
    return image.gcd(image.derivative()).degree <= 0


def reduce_fraction(a: ZPoly, b: ZPoly, q: int) -> Reduced:
    """Reduce a/b modulo a prime q that does not divide lc(b), and cancel."""
    numerator, denominator = a.modulo(q), b.modulo(q)
    common = numerator.gcd(denominator)
    return Reduced(numerator.quotient(common), denominator.quotient(common), common)


def has_polynomial_part(reduced: Reduced) -> bool:
    """Whether the reduced fraction is not zero and its degrees show a polynomial part."""
    numerator, denominator = reduced.numerator, reduced.denominator
    return numerator.degree >= 0 and denominator.degree <= numerator.degree


def has_simple_poles(reduced: Reduced) -> bool:
    """Whether the reduced fraction has only simple poles."""
    denominator = reduced.denominator
    return denominator.gcd(denominator.derivative()).degree <= 0


def frobenius_fixes_residues(reduced: Reduced, u: ModPoly, v: ModPoly) -> bool:
    """Whether u/v = numerator/denominator' at every pole (simple poles only)."""
    numerator, denominator = reduced.numerator, reduced.denominator
    difference = u * denominator.derivative() - numerator * v
    return difference.remainder(denominator).degree < 0


def is_p_curvature_zero(a: ZPoly, b: ZPoly, q: int) -> bool:
    """Whether the q-curvature of y' = (a/b)*y is zero; q does not divide lc(b)."""
    reduced = reduce_fraction(a, b, q)
    if reduced.numerator.degree < 0:
        return True
    if has_polynomial_part(reduced) or not has_simple_poles(reduced):
        return False
    denominator = reduced.denominator
    u = reduced.numerator.power(q, denominator)
    v = denominator.derivative().power(q, denominator)
    return frobenius_fixes_residues(reduced, u, v)
