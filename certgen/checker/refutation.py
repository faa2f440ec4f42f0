"""The rules for `NoAlgebraicSolution`.

Theorem.  If a non-zero solution of y' = (a/b)*y is algebraic, its p-curvature is
zero at every good prime p: b is squarefree, the residues are rational numbers,
integral at p, so that a/b mod p is u'/u with u in F_p(x).  One good prime with
non-zero p-curvature is therefore a complete refutation.
"""

from __future__ import annotations

from certgen.certificate import (
    CounterPrime,
    IrrationalResidue,
    MultiplePole,
    MultiplePoleModP,
    NoAlgebraicSolution,
    PCurvature,
    PolynomialPart,
    PolynomialPartModP,
    ResidueOutsidePrimeField,
)
from certgen.checker.arithmetic import Arithmetic, ZPoly, fold
from certgen.checker.common import (
    reject_unless,
    require_equal,
    require_prime_not_dividing,
    show,
    to_mod,
    to_z,
)
from certgen.checker.density import check_density
from certgen.checker.primes import primes_below, require_prime
from certgen.checker.reduction import (
    Reduced,
    has_polynomial_part,
    is_good,
    is_p_curvature_zero,
    reduce_fraction,
)
from certgen.claim import FirstOrderEquation
from certgen.errors import LimitError, RejectedError
from certgen.polynomial import Polynomial

__all__ = [
    "P_CURVATURE_LIMIT",
    "RESIDUE_POLYNOMIAL_LIMIT",
    "check_no_algebraic_solution",
    "reduce_residue",
    "squarefree_part",
    "vanishing_form",
]

P_CURVATURE_LIMIT = 40_000
"""The largest p*(1 + degree) for which the value of the p-curvature is recomputed."""

RESIDUE_POLYNOMIAL_LIMIT = 400
"""The largest product of the degrees of a factor and of its residue polynomial."""

RESIDUE_BITS = 2_000_000
RESIDUE_WORK = 5_000_000_000
"""How large the reduction of a and b' modulo a factor may become (LimitError beyond):

with s = deg b - deg g + 1 and h the bits of the largest coefficient of the factor g,
s*h*(degree of the residue polynomial) and s*s*h*(deg g).
"""


def check_no_algebraic_solution(
    arithmetic: Arithmetic, equation: FirstOrderEquation, proof: NoAlgebraicSolution
) -> None:
    """Reject unless the proof object shows everything it states about the equation."""
    path = "$.proof"
    a = to_z(arithmetic, equation.numerator)
    b = to_z(arithmetic, equation.denominator)
    _check_decomposition(arithmetic, b, proof, f"{path}.squarefree_decomposition")
    _check_lowest_terms(a, b, proof.lowest_terms_prime, f"{path}.lowest_terms_prime")
    radical = squarefree_part(arithmetic, proof)
    reduced = _check_counter_prime(
        arithmetic, a, b, radical, proof.counter_prime, f"{path}.counter_prime"
    )
    _check_smallest(a, b, radical, proof.counter_prime.p, f"{path}.counter_prime.p")
    _check_obstructions(arithmetic, a, b, proof, f"{path}.obstructions")
    if proof.p_curvature is not None:
        _check_p_curvature(reduced, proof.counter_prime.p, proof.p_curvature, path)
    simple = a.degree < b.degree and all(
        f.multiplicity == 1 for f in proof.squarefree_decomposition
    )
    check_density(a, b, radical, simple, proof.density, f"{path}.density")


def squarefree_part(arithmetic: Arithmetic, proof: NoAlgebraicSolution) -> ZPoly:
    """The product of the factors of the decomposition (1 for none)."""
    factors = [to_z(arithmetic, f.factor) for f in proof.squarefree_decomposition]
    return fold(factors, lambda f, g: f * g, arithmetic.integer_polynomial([1]))


def _check_decomposition(
    arithmetic: Arithmetic, b: ZPoly, proof: NoAlgebraicSolution, path: str
) -> None:
    """b = beta * prod factor^multiplicity; the good prime shows that no factor repeats."""
    entries = proof.squarefree_decomposition
    degree = sum(f.factor.degree * f.multiplicity for f in entries)
    reject_unless(
        degree == b.degree, "squarefree-decomposition", path,
        f"factors of total degree {b.degree}", degree,
    )  # fmt: skip
    powers = [to_z(arithmetic, f.factor) for f in entries for _ in range(f.multiplicity)]
    product = fold(powers, lambda f, g: f * g, arithmetic.integer_polynomial([1]))
    beta = b.leading() // product.leading()
    require_equal(product.times(beta), b, "squarefree-decomposition", path, "the product")


def _check_lowest_terms(a: ZPoly, b: ZPoly, p: int, path: str) -> None:
    """a and b are coprime: they are so modulo a prime that does not divide lc(b)."""
    require_prime_not_dividing(p, b.leading(), path)
    common = a.modulo(p).gcd(b.modulo(p)).degree
    reject_unless(
        common == 0, "not-lowest-terms", path, "gcd(a, b) = 1 modulo the prime",
        f"a common factor of degree {common}",
    )  # fmt: skip


# --------------------------------------------------------------------------
# the counter-prime


def _check_counter_prime(
    arithmetic: Arithmetic,
    a: ZPoly,
    b: ZPoly,
    radical: ZPoly,
    value: CounterPrime,
    path: str,
) -> Reduced:
    p, witness = value.p, value.witness
    require_prime(p, f"{path}.p")
    reject_unless(
        is_good(b, radical, p), "bad-prime", f"{path}.p",
        "a prime that does not divide lc(b) and keeps the squarefree part squarefree", p,
    )  # fmt: skip
    reduced = reduce_fraction(a, b, p)
    if isinstance(witness, PolynomialPartModP):
        _witness(
            has_polynomial_part(reduced), f"{path}.kind", "a polynomial part modulo p",
            "a numerator of lower degree",
        )  # fmt: skip
    elif isinstance(witness, MultiplePoleModP):
        factor = to_mod(arithmetic, witness.factor, p)
        rest = reduced.denominator.remainder(factor * factor)
        _witness(
            rest.degree < 0, f"{path}.factor", "a factor whose square divides b mod p",
            "a remainder",
        )  # fmt: skip
    else:
        _check_residue_witness(arithmetic, reduced, p, witness, path)
    return reduced


def _witness(condition: bool, path: str, expected: str, found: str) -> None:
    reject_unless(condition, "counter-prime-witness", path, expected, found)


def _check_residue_witness(
    arithmetic: Arithmetic,
    reduced: Reduced,
    p: int,
    witness: ResidueOutsidePrimeField,
    path: str,
) -> None:
    """At the roots of g, simple poles, the residue is s, and s^p != s at one of them."""
    g = to_mod(arithmetic, witness.factor, p)
    s = to_mod(arithmetic, witness.residue, p)
    numerator, denominator = reduced.numerator, reduced.denominator
    derivative = denominator.derivative()
    _witness(
        denominator.remainder(g).degree < 0, f"{path}.factor", "a factor of b modulo p",
        "a remainder",
    )  # fmt: skip
    _witness(
        g.gcd(derivative).degree == 0, f"{path}.factor", "simple poles at its roots",
        "a multiple pole",
    )  # fmt: skip
    difference = numerator - s * derivative
    _witness(
        difference.remainder(g).degree < 0, f"{path}.residue", "a = s*b' modulo the factor",
        "another residue",
    )  # fmt: skip
    moved = (s.power(p, g) - s).remainder(g)
    _witness(
        moved.degree >= 0, f"{path}.residue", "s^p different from s modulo the factor",
        "s^p = s",
    )  # fmt: skip


def _check_smallest(a: ZPoly, b: ZPoly, radical: ZPoly, p: int, path: str) -> None:
    """At every smaller good prime the p-curvature is zero."""
    for q in primes_below(p):
        if is_good(b, radical, q) and not is_p_curvature_zero(a, b, q):
            raise RejectedError("not-smallest", path, str(q), str(p))


# --------------------------------------------------------------------------
# the obstructions over Q


def _check_obstructions(
    arithmetic: Arithmetic, a: ZPoly, b: ZPoly, proof: NoAlgebraicSolution, path: str
) -> None:
    """The polynomial part and the multiple poles are all there, and all is true."""
    entries = proof.squarefree_decomposition
    expected = [(f.factor, f.multiplicity) for f in entries if f.multiplicity >= 2]
    found = [(o.factor, o.order) for o in proof.obstructions if isinstance(o, MultiplePole)]
    reject_unless(
        expected == found, "obstructions", path,
        "every factor of multiplicity at least 2, with its multiplicity",
        "other multiple poles",
    )  # fmt: skip
    parts = [o for o in proof.obstructions if isinstance(o, PolynomialPart)]
    reject_unless(
        bool(parts) == (a.degree >= b.degree), "obstructions", path,
        "a polynomial part exactly when deg a >= deg b", f"{len(parts)} of them",
    )  # fmt: skip
    irrational = sum(
        o.factor.degree for o in proof.obstructions if isinstance(o, IrrationalResidue)
    )
    reject_unless(
        irrational <= b.degree, "obstructions", path,
        "factors with irrational residues of total degree at most deg b", irrational,
    )  # fmt: skip
    for i, obstruction in enumerate(proof.obstructions):
        if isinstance(obstruction, PolynomialPart):
            _check_quotient(arithmetic, a, b, obstruction.quotient, f"{path}[{i}].quotient")
        elif isinstance(obstruction, IrrationalResidue):
            simple = [f.factor for f in entries if f.multiplicity == 1]
            _check_irrational(arithmetic, a, b, simple, obstruction, f"{path}[{i}]")


def _check_quotient(
    arithmetic: Arithmetic, a: ZPoly, b: ZPoly, quotient: Polynomial, path: str
) -> None:
    """deg(a - quotient*b) < deg b."""
    rest = a.times(quotient.denominator) - to_z(arithmetic, quotient) * b
    reject_unless(
        rest.degree < b.degree, "obstructions", path,
        "the quotient of a by b", f"a remainder of degree {rest.degree}",
    )  # fmt: skip


def _check_irrational(
    arithmetic: Arithmetic,
    a: ZPoly,
    b: ZPoly,
    simple: list[Polynomial],
    value: IrrationalResidue,
    path: str,
) -> None:
    """The residues at the roots of g are roots of R, and R has no rational root.

    g divides a factor of multiplicity 1, so its roots are simple poles with residue
    a/b'.  R(a/b') = 0 there: g divides sum R_k a^k b'^(n-k).  A rational root of R
    would reduce modulo a prime that does not divide lc(R).
    """
    g = to_z(arithmetic, value.factor)
    reject_unless(
        any(to_z(arithmetic, f).exact_quotient(g) is not None for f in simple),
        "irrational-residue", f"{path}.factor",
        "a divisor of a factor of multiplicity 1", value.factor,
    )  # fmt: skip
    _check_size(b, value, f"{path}.residue_polynomial")
    _check_rootless(arithmetic, value, f"{path}.rootless_prime")
    numerator, derivative = reduce_residue(arithmetic, a, b, g)
    total = vanishing_form(arithmetic, value.residue_polynomial, numerator, derivative)
    reject_unless(
        total.exact_quotient(g) is not None, "irrational-residue",
        f"{path}.residue_polynomial", "a polynomial that vanishes at the residues",
        value.residue_polynomial,
    )  # fmt: skip


def _check_size(b: ZPoly, value: IrrationalResidue, path: str) -> None:
    """Bound the work before it is done; what is printed is far below."""
    g, n = value.factor, value.residue_polynomial.degree
    reject_unless(
        g.degree * n <= RESIDUE_POLYNOMIAL_LIMIT, "irrational-residue", path,
        f"degrees whose product is at most {RESIDUE_POLYNOMIAL_LIMIT}", g.degree * n,
    )  # fmt: skip
    steps, bits = b.degree - g.degree + 1, max(map(int.bit_length, g.numerators))
    if steps * bits * n > RESIDUE_BITS or steps * steps * bits * g.degree > RESIDUE_WORK:
        raise LimitError(f"{path}: the reduction modulo the factor is too long")


def reduce_residue(
    arithmetic: Arithmetic, a: ZPoly, b: ZPoly, g: ZPoly
) -> tuple[ZPoly, ZPoly]:
    """(A, B) of degree below deg g with A = c*a, B = c*b' modulo g, c a power of lc(g)."""
    derivative = b.derivative()
    steps = max(a.degree, derivative.degree) - g.degree + 1
    return (
        _scaled_remainder(arithmetic, a, g, steps),
        _scaled_remainder(arithmetic, derivative, g, steps),
    )


def vanishing_form(
    arithmetic: Arithmetic, polynomial: Polynomial, numerator: ZPoly, derivative: ZPoly
) -> ZPoly:
    """sum R_k A^k B^(n-k): zero where A/B is a root of R, B not zero."""
    power = arithmetic.integer_polynomial([1])
    total = arithmetic.integer_polynomial([])
    for c in reversed(polynomial.numerators):
        total = total * numerator + power.times(c)
        power = power * derivative
    return total


def _scaled_remainder(arithmetic: Arithmetic, f: ZPoly, g: ZPoly, steps: int) -> ZPoly:
    """lc(g)^max(steps, 0) * f modulo g, for steps > deg f - deg g."""
    c, d = f.coefficients(), g.coefficients()
    while len(c) >= len(d):
        top = c.pop()
        c = [d[-1] * x for x in c]
        offset = len(c) - (len(d) - 1)
        for i, y in enumerate(d[:-1]):
            c[offset + i] -= top * y
        steps -= 1
    return arithmetic.integer_polynomial([d[-1] ** max(steps, 0) * x for x in c])


def _check_rootless(arithmetic: Arithmetic, value: IrrationalResidue, path: str) -> None:
    """gcd(z^q - z, R) = 1 over F_q: R has no root in F_q."""
    q, polynomial = value.rootless_prime, value.residue_polynomial
    require_prime_not_dividing(q, polynomial.numerators[-1], path)
    image = to_mod(arithmetic, polynomial, q)
    z = arithmetic.modular_polynomial([0, 1], q)
    common = (z.power(q, image) - z).gcd(image)
    reject_unless(
        common.degree == 0, "irrational-residue", path,
        "a prime modulo which the residue polynomial has no root", q,
    )  # fmt: skip


# --------------------------------------------------------------------------
# the value of the p-curvature


def _check_p_curvature(reduced: Reduced, p: int, value: PCurvature, path: str) -> None:
    """psi_p * den^p = num^p - sum_k [x^(kp+p-1)](num*den^(p-1)) * x^(kp).

    den^p is a constant of the derivation, and the (p-1)-th derivative of x^j is
    -x^(j-p+1) for j = -1 mod p and 0 otherwise; num^p = num(x^p) over F_p.
    """
    path = f"{path}.p_curvature.numerator"
    numerator, denominator = reduced.numerator, reduced.denominator
    size = p * (1 + max(numerator.degree, denominator.degree))
    reject_unless(
        size <= P_CURVATURE_LIMIT, "p-curvature", path,
        f"p*(1 + degree) of at most {P_CURVATURE_LIMIT}", size,
    )  # fmt: skip
    product = (numerator * denominator.power(p - 1)).coefficients()[p - 1 :: p]
    out = numerator.coefficients()
    out += [0] * (len(product) - len(out))
    for k, c in enumerate(product):
        out[k] = (out[k] - c) % p
    expected = Polynomial.from_integers(out)
    reject_unless(
        value.numerator == expected, "p-curvature", path, show(expected), value.numerator
    )
