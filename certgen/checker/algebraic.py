"""The rules for `AlgebraicSolution` and `ClosedFormDisagrees`.

Theorem.  Let b != 0, v_1..v_m in Z[x] non-constant, n_i != 0 and N >= 1 integers,
rho_i = n_i/N distinct and in lowest terms as fractions, V = prod v_i, and
    (1)  b = beta * V,        (2)  N*a = beta * sum_i n_i * v_i' * prod_{j != i} v_j.
Then a/b = sum rho_i v_i'/v_i, so y = c * prod v_i^rho_i solves y' = (a/b)*y.  If V
is squarefree and N the least common denominator of the rho_i, y has degree
exactly N over C(x): the orders N*rho_i at the roots have no common factor with N.
"""

from __future__ import annotations

from collections.abc import Iterable
from fractions import Fraction
from math import lcm

from certgen.certificate import (
    AlgebraicSolution,
    Disagreement,
    Eisenstein,
    MinimalPolynomial,
)
from certgen.checker.arithmetic import Arithmetic, ZPoly, fold
from certgen.checker.common import (
    reject_unless,
    require_equal,
    require_prime_not_dividing,
    show,
    to_z,
)
from certgen.checker.primes import radical
from certgen.claim import FirstOrderEquation, Power
from certgen.errors import LimitError, RejectedError
from certgen.polynomial import DEGREE_LIMIT, Polynomial

__all__ = [
    "check_algebraic_solution",
    "check_closed_form",
    "check_disagreement",
    "common_degree",
    "logarithmic_derivative",
]

Pair = tuple[ZPoly, ZPoly]

DEGREE_BITS = 66_440
"""A common denominator beyond this has more than DIGITS_LIMIT digits."""

EISENSTEIN_BITS = 200_000
"""The largest product of the degree of V and the bits of the point."""

TAYLOR_DEGREE = 100
"""Up to this degree of a base its Taylor coefficients are looked at."""


def common_degree(powers: tuple[Power, ...]) -> int:
    """The least common denominator of the exponents (1 for none).

    Raises LimitError where it could not be stored, before it grows further.
    """
    degree = 1
    for power in powers:
        degree = lcm(degree, power.exponent.denominator)
        if degree.bit_length() > DEGREE_BITS:
            raise LimitError(
                f"the common denominator of the exponents has more than {DEGREE_BITS} bits"
            )
    return degree


def logarithmic_derivative(arithmetic: Arithmetic, powers: tuple[Power, ...]) -> Pair:
    """(M, V) with V = prod v_i and M = sum_i N*rho_i * v_i' * prod_{j != i} v_j."""
    degree = common_degree(powers)
    pairs = []
    for power in powers:
        v = to_z(arithmetic, power.base)
        pairs.append((v.derivative().times(_scaled(power.exponent, degree)), v))
    one, zero = arithmetic.integer_polynomial([1]), arithmetic.integer_polynomial([])

    def combine(f: Pair, g: Pair) -> Pair:
        return f[0] * g[1] + g[0] * f[1], f[1] * g[1]

    return fold(pairs, combine, (zero, one))


def _scaled(exponent: Fraction, degree: int) -> int:
    """degree * exponent, for a multiple of the exponent's denominator."""
    return exponent.numerator * (degree // exponent.denominator)


def check_algebraic_solution(
    arithmetic: Arithmetic, equation: FirstOrderEquation, proof: AlgebraicSolution, path: str
) -> None:
    """Reject unless the proof object shows everything it states about the equation."""
    a = to_z(arithmetic, equation.numerator)
    b = to_z(arithmetic, equation.denominator)
    solution = proof.solution
    reject_unless(
        bool(solution) or a.degree < 0,
        "empty-solution",
        f"{path}.solution",
        "a non-empty product, since a is not zero",
        "an empty list",
    )
    degree = common_degree(solution)
    reject_unless(
        proof.degree == degree, "degree", f"{path}.degree", show(degree), proof.degree
    )
    _require_degree(
        (power.base.degree for power in solution), b.degree,
        "denominator-identity", f"{path}.solution",
    )  # fmt: skip
    m, v = logarithmic_derivative(arithmetic, solution)
    beta = b.leading() // v.leading()
    require_equal(v.times(beta), b, "denominator-identity", f"{path}.solution", "beta*V")
    require_equal(
        m.times(beta), a.times(degree), "numerator-identity", f"{path}.solution", "beta*M"
    )
    _check_squarefree(v, proof.squarefree_prime, f"{path}.squarefree_prime")
    _check_partial_fractions(arithmetic, proof, path)
    _check_minimal_polynomial(proof, path)
    if proof.eisenstein is not None:
        _check_eisenstein(arithmetic, solution, v, proof.eisenstein, f"{path}.eisenstein")


def _require_degree(degrees: Iterable[int], expected: int, code: str, path: str) -> None:
    """Factors are counted before they are multiplied."""
    found = sum(degrees)
    reject_unless(
        found == expected, code, path, f"factors of total degree {expected}",
        f"total degree {found}",
    )  # fmt: skip


def _check_squarefree(v: ZPoly, p: int, path: str) -> None:
    """V is squarefree: it is so modulo a prime that does not divide lc(V)."""
    require_prime_not_dividing(p, v.leading(), path)
    image = v.modulo(p)
    common = image.gcd(image.derivative()).degree
    reject_unless(
        common <= 0, "not-squarefree", path, "gcd(V, V') = 1 modulo the prime",
        f"a common factor of degree {common}",
    )  # fmt: skip


def _check_partial_fractions(
    arithmetic: Arithmetic, proof: AlgebraicSolution, path: str
) -> None:
    """For each residue the displayed factors multiply to the base with that exponent."""
    path = f"{path}.partial_fractions"
    groups: dict[Fraction, list[Polynomial]] = {}
    for term in proof.partial_fractions:
        groups.setdefault(term.residue, []).append(term.factor)
    bases = {power.exponent: power.base for power in proof.solution}
    reject_unless(
        groups.keys() == bases.keys(), "partial-fractions", path,
        "exactly the exponents of the solution as residues", "other residues",
    )  # fmt: skip
    one = arithmetic.integer_polynomial([1])
    for residue, factors in groups.items():
        base = bases[residue]
        _require_degree((f.degree for f in factors), base.degree, "partial-fractions", path)
        product = fold((to_z(arithmetic, f) for f in factors), lambda f, g: f * g, one)
        require_equal(
            to_z(arithmetic, base), product, "partial-fractions", path,
            "the base with the same exponent",
        )  # fmt: skip


def _check_minimal_polynomial(proof: AlgebraicSolution, path: str) -> None:
    """Y^N = c * prod_{rho > 0} v^(N*rho) / prod_{rho < 0} v^(-N*rho)."""

    def side(sign: int) -> tuple[Power, ...]:
        return tuple(
            Power(base=p.base, exponent=Fraction(sign * _scaled(p.exponent, proof.degree)))
            for p in proof.solution
            if sign * p.exponent > 0
        )

    expected = MinimalPolynomial(degree=proof.degree, numerator=side(1), denominator=side(-1))
    reject_unless(
        proof.minimal_polynomial == expected, "minimal-polynomial",
        f"{path}.minimal_polynomial", "the exponents of the solution times the degree",
        "another equation",
    )  # fmt: skip


def _check_eisenstein(
    arithmetic: Arithmetic,
    solution: tuple[Power, ...],
    v: ZPoly,
    value: Eisenstein,
    path: str,
) -> None:
    """y(x0 + L*t), y(x0) = 1, has integer coefficients.

    With d the denominator of an exponent, e a multiple of every prime dividing d,
    and c = v(x0) (times d*e where d > 1), it suffices for each base that c
    divides L^j * v^(j)(x0)/j! for all j >= 1, since d^k * e^k * binom(n/d, k) is
    an integer.  It does when c divides L.
    """
    size = v.degree * value.point.bit_length()
    reject_unless(
        size <= EISENSTEIN_BITS, "eisenstein-point", f"{path}.point",
        f"a point whose bits times the degree are at most {EISENSTEIN_BITS}", size,
    )  # fmt: skip
    reject_unless(
        v.value(value.point) != 0, "eisenstein-point", f"{path}.point",
        "an integer where no base vanishes", value.point,
    )  # fmt: skip
    for power in solution:
        base, d = to_z(arithmetic, power.base), power.exponent.denominator
        c = base.value(value.point) * (d * radical(d) if d > 1 else 1)
        reject_unless(
            _suffices(base, value.point, value.constant, c), "eisenstein-constant",
            f"{path}.constant", "a constant that suffices for every base", value.constant,
        )  # fmt: skip


def _suffices(base: ZPoly, point: int, constant: int, c: int) -> bool:
    """Whether c divides constant^j * v^(j)(point)/j! for all j >= 1, v the base.

    It does when c divides the constant; above TAYLOR_DEGREE nothing else is tried.
    """
    if constant % c == 0:
        return True
    if base.degree > TAYLOR_DEGREE:
        return False
    scale = 1
    for taylor in base.shifted(point).coefficients()[1:]:
        scale = scale * constant % c
        if scale * taylor % c != 0:
            return False
    return True


# --------------------------------------------------------------------------
# the closed form that the author claims


def check_closed_form(
    arithmetic: Arithmetic,
    equation: FirstOrderEquation,
    closed_form: tuple[Power, ...],
    path: str,
) -> None:
    """Reject unless the claimed product S satisfies S'/S = a/b, exactly."""
    a = to_z(arithmetic, equation.numerator)
    b = to_z(arithmetic, equation.denominator)
    if sum(power.base.degree for power in closed_form) > DEGREE_LIMIT:
        raise LimitError(f"{path}: a total degree above the limit of {DEGREE_LIMIT}")
    m, w = logarithmic_derivative(arithmetic, closed_form)
    degree = common_degree(closed_form)
    require_equal(
        a.times(degree) * w, b * m, "closed-form", path, "a*S cross-multiplied"
    )


def check_disagreement(
    arithmetic: Arithmetic,
    actual: AlgebraicSolution,
    closed_form: tuple[Power, ...],
    value: Disagreement,
    path: str,
) -> tuple[int, ...]:
    """At the roots of the factor g the residues of a/b and of S'/S differ.

    `actual` has been checked; g is squarefree.  Returns the orders m_j of the
    claimed bases along g: g^m_j divides w_j and the cofactor is coprime to g, so
    that the residue of S'/S = sum e_j w_j'/w_j is sum e_j m_j at every root of g.
    """
    g = to_z(arithmetic, value.factor)
    require_prime_not_dividing(value.prime, g.leading(), f"{path}.prime")
    image = g.modulo(value.prime)
    reject_unless(
        image.gcd(image.derivative()).degree == 0, "disagreement-factor",
        f"{path}.factor", "a factor that is squarefree modulo the prime", value.factor,
    )  # fmt: skip
    residue = _residue_along(arithmetic, g, actual, value.prime, path)
    reject_unless(
        residue == value.residue_of_equation, "disagreement-residue",
        f"{path}.residue_of_equation", show(residue), value.residue_of_equation,
    )  # fmt: skip
    orders = tuple(
        _order_along(to_z(arithmetic, power.base), g, value.prime, path)
        for power in closed_form
    )
    claimed = sum(
        (m * power.exponent for m, power in zip(orders, closed_form, strict=True)),
        Fraction(0),
    )
    reject_unless(
        claimed == value.residue_of_closed_form, "disagreement-residue",
        f"{path}.residue_of_closed_form", show(claimed), value.residue_of_closed_form,
    )  # fmt: skip
    return orders


def _residue_along(
    arithmetic: Arithmetic, g: ZPoly, actual: AlgebraicSolution, p: int, path: str
) -> Fraction:
    """The residue of a/b at all roots of g: that of the base g divides, or 0."""
    for power in actual.solution:
        if to_z(arithmetic, power.base).exact_quotient(g) is not None:
            return power.exponent
    for power in actual.solution:
        _require_coprime(g, to_z(arithmetic, power.base), p, path)
    return Fraction(0)


def _order_along(w: ZPoly, g: ZPoly, p: int, path: str) -> int:
    """The m with w = g^m * cofactor and the cofactor coprime to g."""
    order = 0
    while (quotient := w.exact_quotient(g)) is not None:
        w, order = quotient, order + 1
    _require_coprime(g, w, p, path)
    return order


def _require_coprime(g: ZPoly, h: ZPoly, p: int, path: str) -> None:
    """g and h are coprime: they are modulo p, which does not divide lc(g)."""
    common = g.modulo(p).gcd(h.modulo(p)).degree
    if common != 0:
        raise RejectedError(
            "disagreement-factor", f"{path}.factor",
            "a factor that divides a base or is coprime to it modulo the prime",
            f"a common factor of degree {common}",
        )  # fmt: skip

