"""How many counter-primes there are: the rule for `DensityBound`."""

from __future__ import annotations

from fractions import Fraction
from math import lcm

from certgen.certificate import DensityBound
from certgen.checker.arithmetic import ZPoly
from certgen.checker.common import reject_unless, show
from certgen.checker.primes import require_prime
from certgen.checker.reduction import (
    frobenius_fixes_residues,
    has_polynomial_part,
    has_simple_poles,
    is_good,
    reduce_fraction,
)

__all__ = ["FROBENIUS_ORDER_LIMIT", "WITNESS_LIMIT", "check_density"]

FROBENIUS_ORDER_LIMIT = 100
"""The largest order of Frobenius in a witness of the density bound."""

WITNESS_LIMIT = 50
"""The largest number of witnesses of the density bound."""


def check_density(
    a: ZPoly, b: ZPoly, radical: ZPoly, simple: bool, value: DensityBound, path: str
) -> None:
    """All good primes but finitely many, or at least 1 - 1/M by Chebotarev.

    With simple poles and no polynomial part a good prime q is a counter-prime
    unless Frobenius at q fixes the residues.  They generate a Galois extension of
    Q whose group is not trivial, for there is a counter-prime, and contains for
    each witness an element whose order is a multiple of the witness's: the order of
    the group is at least 2 and at least the lcm M of the witnesses' orders.
    """
    if not simple:
        reject_unless(
            value.bound == 1 and not value.witnesses, "density", path,
            "bound 1 without witnesses", value.bound,
        )  # fmt: skip
        return
    _check_witness_sizes(value, path)
    bound = 1 - Fraction(1, lcm(*(w.order for w in value.witnesses)))
    bound = max(bound, Fraction(1, 2))
    reject_unless(
        value.bound == bound, "density", f"{path}.bound", show(bound), value.bound
    )
    for i, witness in enumerate(value.witnesses):
        require_prime(witness.p, f"{path}.witnesses[{i}].p")
        reject_unless(
            is_good(b, radical, witness.p), "bad-prime", f"{path}.witnesses[{i}].p",
            "a prime of good reduction", witness.p,
        )  # fmt: skip
        _check_frobenius_order(a, b, witness.p, witness.order, f"{path}.witnesses[{i}].order")


def _check_witness_sizes(value: DensityBound, path: str) -> None:
    reject_unless(
        len(value.witnesses) <= WITNESS_LIMIT, "density", f"{path}.witnesses",
        f"at most {WITNESS_LIMIT} witnesses", len(value.witnesses),
    )  # fmt: skip
    for i, witness in enumerate(value.witnesses):
        reject_unless(
            witness.order <= FROBENIUS_ORDER_LIMIT, "density",
            f"{path}.witnesses[{i}].order",
            f"an order of at most {FROBENIUS_ORDER_LIMIT}", witness.order,
        )  # fmt: skip


def _check_frobenius_order(a: ZPoly, b: ZPoly, q: int, order: int, path: str) -> None:
    """The least t with s^(q^t) = s at every pole is `order`, s the residue."""
    reduced = reduce_fraction(a, b, q)
    poles = reduced.denominator.degree >= 1 and has_simple_poles(reduced)
    reject_unless(
        poles and not has_polynomial_part(reduced), "density", path,
        "simple poles and no polynomial part modulo the prime", "another reduction",
    )  # fmt: skip
    u, v, t = reduced.numerator, reduced.denominator.derivative(), 0
    fixed = False
    while t < order and not fixed:
        u, v = u.power(q, reduced.denominator), v.power(q, reduced.denominator)
        t += 1
        fixed = frobenius_fixes_residues(reduced, u, v)
    reject_unless(
        fixed and t == order, "density", path,
        "the exact order of Frobenius on the residues", order,
    )  # fmt: skip
