"""Integers: rational reconstruction, Chinese remainders, radicals."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from fractions import Fraction

from flint import fmpz

__all__ = ["combine_residues", "radical", "reconstruct_rational", "symmetric"]

_FACTORED_LIMIT = 10**9


def symmetric(value: int, modulus: int) -> int:
    """Return the representative of `value` mod `modulus` of least absolute value."""
    value %= modulus
    return value - modulus if 2 * value > modulus else value


def reconstruct_rational(value: int, modulus: int, spare_bits: int) -> Fraction | None:
    """Return the n/d with n = d*value mod `modulus` that stands out, or None.

    Among the convergents of Euclid's algorithm the one before the largest
    quotient is taken, if that quotient has more than `spare_bits` bits (maximal
    quotient rational reconstruction, Monagan 2004).  It is a guess: whoever uses
    it verifies the result.
    """
    value %= modulus
    best, largest = None, 1 << spare_bits
    r0, r1, t0, t1 = modulus, value, 0, 1
    while r1:
        quotient = r0 // r1
        if quotient > largest:
            best, largest = (r1, t1), quotient
        r0, r1, t0, t1 = r1, r0 - quotient * r1, t1, t0 - quotient * t1
    if value == 0 or best is None:
        return Fraction(0) if value == 0 else None
    return Fraction(*best)


def combine_residues(
    known: Sequence[int], modulus: int, fresh: Iterable[int], q: int
) -> list[int]:
    """Return the numbers in [0, modulus*q) that are `known` mod modulus, `fresh` mod q."""
    inverse = pow(modulus, -1, q)
    return [
        c + modulus * ((f - c) * inverse % q) for c, f in zip(known, fresh, strict=True)
    ]


def radical(n: int) -> int:
    """Return the product of the primes dividing n >= 1; n itself from 10^9 on.

    Where it is used, any multiple of the radical that divides a power of it is
    sound, so numbers too large to be factored at once stand for themselves.
    """
    if n >= _FACTORED_LIMIT:
        return n
    result = 1
    for prime, _ in fmpz(n).factor() if n > 1 else ():
        result *= int(prime)
    return result
