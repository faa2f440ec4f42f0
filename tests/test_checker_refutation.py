"""The rules of the refutation: the classic traps, and the facts by another route."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import pytest
import sympy

from certgen.checker import check
from certgen.checker.facts import NoAlgebraicFacts, PrimeStatus
from certgen.errors import CertgenError, LimitError
from tests.handmade import (
    Json,
    certificate,
    claim,
    handmade,
    irrational,
    multiple_pole,
    outside,
    polynomial_part,
    refutation,
    stored,
)
from tests.mutants import write_coefficients
from tests.test_checker_arithmetic import p_curvature_numerator
from tests.test_checker_kernel import ARITHMETICS, code_of


def text(b: str, a: str, proof: Json) -> str:
    return stored(
        certificate(claim("trap", b, a, asserts="transcendental"), "proved", proof)
    )


def drifting(**changes: Any) -> str:
    """The text of "drifting-pairs" with other values in the proof."""
    obj = handmade("drifting-pairs")
    obj["proof"].update(changes)
    return stored(obj)


def pole_at(p: str, factor: str) -> Json:
    return {"p": p, "kind": "multiple_pole", "factor": factor}


# --------------------------------------------------------------------------
# traps


@ARITHMETICS
def test_a_prime_of_bad_reduction_refutes_nothing(arithmetic: Any) -> None:
    """1/(x(x+5)) has the solution (x/(x+5))^(1/5) and a non-zero 5-curvature."""
    assert p_curvature_numerator([1], [0, 5, 1], 5) != []
    proof = refutation(
        [("x", "1"), ("x + 5", "1")], "2", [], pole_at("5", "x"), None, "1/2"
    )
    assert code_of(text("x^2 + 5*x", "1", proof), arithmetic) == "bad-prime"


@ARITHMETICS
def test_a_prime_that_divides_the_leading_coefficient(arithmetic: Any) -> None:
    """1/(5x) at 5: the solution x^(1/5) is algebraic, 5 divides lc(b)."""
    for witness in (
        {"p": "5", "kind": "polynomial_part"}, pole_at("5", "x"), outside("5", "x^2", "x"),
    ):  # fmt: skip
        proof = refutation([("x", "1")], "2", [], witness, None, "1/2")
        assert code_of(text("5*x", "1", proof), arithmetic) == "bad-prime"


@ARITHMETICS
def test_reduction_cancels_before_the_witness_is_looked_at(arithmetic: Any) -> None:
    """(x + 2)/x^3 is 1/x^2 at 2: a double pole, and no pole of order three or four."""
    assert p_curvature_numerator([2, 1], [0, 0, 0, 1], 2) != []

    def proof(factor: str, value: str | None = None) -> Json:
        return refutation(
            [("x", "3")], "3", [multiple_pole("x", "3")], pole_at("2", factor), value, "1"
        )

    assert code_of(text("x^3", "x + 2", proof("x")), arithmetic) == ""
    assert code_of(text("x^3", "x + 2", proof("x^2")), arithmetic) == "counter-prime-witness"
    # psi_2 = (x^-2)' + x^-4 = 1/x^4 = 1/b(x)^2 with the reduced b = x^2
    assert code_of(text("x^3", "x + 2", proof("x", "1")), arithmetic) == ""
    assert code_of(text("x^3", "x + 2", proof("x", "x")), arithmetic) == "p-curvature"


@ARITHMETICS
def test_a_witness_residue_in_the_prime_field(arithmetic: Any) -> None:
    """x + 1 is 1 at 0 and 2 at 1: not constant modulo x^2 - x, and yet no obstruction."""
    equation = "x^4 - x^3 - 2*x^2 + 2*x", "3*x^3 - 7*x + 2"

    def proof(witness: Json) -> Json:
        return refutation(
            [("x - 1", "1"), ("x", "1"), ("x^2 - 2", "1")], "3", [], witness, None, "1/2",
            ("3", "2"),
        )  # fmt: skip

    split = proof(outside("3", "x^2 + 2*x", "x + 1"))
    assert code_of(text(*equation, split), arithmetic) == "counter-prime-witness"
    # at the roots of x^2 + 1 the residue 1/(2x) = 2/x = x is outside F_3: a right witness
    right = proof(outside("3", "x^2 + 1", "x"))
    assert code_of(text(*equation, right), arithmetic) == ""
    # the product of both factors is no irreducible polynomial and still a witness
    whole = sympy.Poly("x^4 + 2*x^3 + x^2 + 2*x".replace("^", "**"))
    s = next(
        c
        for c in ([i % 3, i // 3 % 3, i // 9 % 3, i // 27] for i in range(81))
        if _is_residue(c, whole)
    )
    both = proof(outside("3", "x^4 + 2*x^3 + x^2 + 2*x", write_coefficients(s)))
    assert code_of(text(*equation, both), arithmetic) == ""


def _is_residue(s: list[int], b: sympy.Poly) -> bool:
    """Whether s*b' = a modulo b, over F_3."""
    x = b.gen
    b = sympy.Poly(b.as_expr(), x, modulus=3)
    a = sympy.Poly(3 * x**3 - 7 * x + 2, x, modulus=3)
    candidate = sympy.Poly(list(reversed(s)), x, modulus=3)
    return (candidate * b.diff() - a).rem(b).is_zero


@ARITHMETICS
@pytest.mark.parametrize("residue", ["0", "1", "2"])
def test_a_constant_witness_residue_is_vacuous(residue: str, arithmetic: Any) -> None:
    """An element of F_p is no witness, whatever its value."""
    counter_prime = outside("3", "x^2 + 2*x + 2", residue)
    assert code_of(drifting(counter_prime=counter_prime), arithmetic) == "vacuous"


@ARITHMETICS
def test_a_counter_prime_that_is_not_the_smallest(arithmetic: Any) -> None:
    """7 and 13 are counter-primes with right witnesses, and larger than 3."""
    for p, factor, residue in (("7", "x^2 + 6*x + 6", "6*x + 4"),
                               ("13", "x^2 + 12*x + 12", "3*x + 5")):  # fmt: skip
        changed = drifting(counter_prime=outside(p, factor, residue), p_curvature=None)
        assert code_of(changed, arithmetic) == "not-smallest"


@ARITHMETICS
@pytest.mark.parametrize("p", ["4", "9", "91", "1000000000000", str(2**127 - 1), "9" * 15_000])
def test_counter_primes_that_are_not_proved_prime(p: str, arithmetic: Any) -> None:
    """91 = 7*13, huge numbers: nothing is computed modulo them."""
    counter_prime = outside(p, "x^2 + 2*x + 2", "x + 1")
    assert code_of(drifting(counter_prime=counter_prime), arithmetic) == "not-prime"
    assert code_of(drifting(lowest_terms_prime=p), arithmetic) == "not-prime"
    entry = irrational("x^2 - x - 1", "5*x^2 - 1", p)
    assert code_of(drifting(obstructions=[entry]), arithmetic) == "not-prime"
    density = {"bound": "1/2", "witnesses": [{"p": p, "order": "2"}]}
    assert code_of(drifting(density=density), arithmetic) == "not-prime"


@ARITHMETICS
def test_an_equation_that_is_not_in_lowest_terms(arithmetic: Any) -> None:
    """x*y' = x*y, and a common factor that one prime hides: nothing passes as reduced."""
    proof = refutation(
        [("x", "1")], "2", [polynomial_part("1")], {"p": "2", "kind": "polynomial_part"},
        None, "1",
    )  # fmt: skip
    assert code_of(text("x", "x", proof), arithmetic) == "not-lowest-terms"
    for p in ("2", "3", "5", "999999999989"):
        proof["lowest_terms_prime"] = p
        assert code_of(text("x", "x", proof), arithmetic) == "not-lowest-terms"


@ARITHMETICS
def test_the_lowest_terms_prime_keeps_the_degree_of_b(arithmetic: Any) -> None:
    """At a prime dividing lc(b) a common factor could vanish."""
    proof = refutation(
        [("3*x + 1", "1")], "3", [polynomial_part("1/3*x")],
        {"p": "2", "kind": "polynomial_part"}, None, "1",
    )  # fmt: skip
    found = code_of(text("3*x + 1", "x^2 + 5", proof), arithmetic)
    assert found == "prime-divides-leading-coefficient"


@ARITHMETICS
def test_an_algebraic_solution_cannot_be_refuted(arithmetic: Any) -> None:
    """The arches under every kind of witness at every prime below 60: always rejected."""
    for p in sympy.primerange(60):
        for witness in (
            {"p": str(p), "kind": "polynomial_part"},
            pole_at(str(p), "x"),
            pole_at(str(p), "x + 1"),
            outside(str(p), f"x^2 + {p - 1}" if p > 2 else "x^2 + 1", "x"),
            outside(str(p), f"x^3 + {p - 1}*x" if p > 2 else "x^3 + x", "x^2"),
        ):
            proof = refutation([("x^3 - x", "1")], "3", [], witness, None, "1/2")
            assert code_of(text("2*x^3 - 2*x", "3*x^2 - 1", proof), arithmetic) in (
                "counter-prime-witness", "bad-prime",
            )  # fmt: skip


@ARITHMETICS
def test_the_algebraic_obstruction_is_no_obstruction(arithmetic: Any) -> None:
    """Rational residues: no polynomial with them as roots is without roots modulo a prime."""
    for polynomial in ("2*x - 1", "4*x^2 - 1", "2*x^3 + x^2 + x - 1"):
        for q in ("3", "5", "7", "11"):
            proof = refutation(
                [("x^2 - 2", "1")], "3", [irrational("x^2 - 2", polynomial, q)],
                outside("3", "x^2 + 1", "x"), None, "1/2",
            )  # fmt: skip
            # y' = x/(x^2 - 2)*y has the residues 1/2 and 1/2
            found = code_of(text("x^2 - 2", "x", proof), arithmetic)
            assert found in ("counter-prime-witness", "irrational-residue")


@ARITHMETICS
def test_a_proof_of_the_other_kind(arithmetic: Any) -> None:
    """The claim of one with the proof of the other, both ways: rejected."""
    one, other = handmade("drifting-pairs"), handmade("harbour-arches")
    one["proof"], other["proof"] = other["proof"], one["proof"]
    assert code_of(stored(one), arithmetic) == "denominator-identity"
    assert code_of(stored(other), arithmetic) == "squarefree-decomposition"


@ARITHMETICS
def test_a_claim_that_is_refuted_although_it_names_a_closed_form(arithmetic: Any) -> None:
    """No algebraic solution at all: a claimed closed form is wrong, whatever it is."""
    obj = handmade("hasty-claim")
    obj["claim"].update(
        solution=[{"base": "x^2 - 2", "exponent": "1/2"}], solution_as_written="?"
    )
    assert code_of(stored(obj), arithmetic) == ""
    obj["verdict"] = "proved"
    assert code_of(stored(obj), arithmetic) == "verdict"


# --------------------------------------------------------------------------
# decomposition, obstructions, density


@ARITHMETICS
@pytest.mark.parametrize(
    ("decomposition", "code"),
    [
        ([("x", "2"), ("x^2 - 2", "1")], ""),
        ([("x", "1"), ("x^2 - 2", "1")], "squarefree-decomposition"),
        ([("x", "4")], "squarefree-decomposition"),
        ([("x", "2"), ("x + 1", "2")], "squarefree-decomposition"),
        ([("x", "1000000000")], "squarefree-decomposition"),
        ([("x", "9" * 10_000)], "squarefree-decomposition"),
        ([("x^2 - 2", "1"), ("x^2", "1")], "bad-prime"),
        ([("x^4 - 2*x^2", "1")], "bad-prime"),
        ([], "squarefree-decomposition"),
    ],
    ids=str,
)
def test_decompositions_of_b(
    decomposition: list[tuple[str, str]], code: str, arithmetic: Any
) -> None:
    """The product is b, and a factor that is not squarefree makes every prime bad."""
    obj = handmade("every-trouble")
    obj["proof"]["squarefree_decomposition"] = [
        {"factor": f, "multiplicity": m} for f, m in decomposition
    ]
    assert code_of(stored(obj), arithmetic) == code


@ARITHMETICS
def test_a_constant_denominator_has_an_empty_decomposition(arithmetic: Any) -> None:
    """y' = x*y: no poles at all, refuted by the polynomial part at 2."""
    assert p_curvature_numerator([0, 1], [1], 2) != []
    proof = refutation(
        [], "2", [polynomial_part("x")], {"p": "2", "kind": "polynomial_part"}, None, "1"
    )
    assert code_of(text("1", "x", proof), arithmetic) == ""
    # psi_2 = r' + r^2 = 1 + x^2
    proof["p_curvature"] = {"numerator": "x + 1"}
    assert code_of(text("1", "x", proof), arithmetic) == ""
    proof["p_curvature"] = {"numerator": "x"}
    assert code_of(text("1", "x", proof), arithmetic) == "p-curvature"


@ARITHMETICS
def test_the_obstructions_over_q_are_complete_where_they_say_so(arithmetic: Any) -> None:
    """Polynomial part and multiple poles: all or rejected; irrational residues: may be few."""
    obj = handmade("every-trouble")
    whole = obj["proof"]["obstructions"]
    for dropped, code in ((0, "obstructions"), (1, "obstructions"), (2, "")):
        obj["proof"]["obstructions"] = [o for i, o in enumerate(whole) if i != dropped]
        assert code_of(stored(obj), arithmetic) == code


@ARITHMETICS
@pytest.mark.parametrize("quotient", ["1/2*x + 1", "x", "1/2*x^2", "1/2", "-1/2*x", "1/3*x"])
def test_the_polynomial_part_is_the_quotient(quotient: str, arithmetic: Any) -> None:
    """(x^5 + x + 1)/(2x^4 - 4x^2) has the polynomial part x/2 and no other."""
    obj = handmade("every-trouble")
    obj["proof"]["obstructions"][0]["quotient"] = quotient
    assert code_of(stored(obj), arithmetic) == "obstructions"


@ARITHMETICS
def test_densities(arithmetic: Any) -> None:
    """x^3 - x - 1: orders 3 at 2 and 2 at 5; without witnesses 1/2; never more than shown."""
    obj = handmade("three-currents")
    both = [{"p": "2", "order": "3"}, {"p": "5", "order": "2"}]
    for bound, witnesses, code in (
        ("5/6", both, ""), ("2/3", both[:1], ""), ("1/2", both[1:], ""), ("1/2", [], ""),
        ("5/6", both[:1], "density"), ("5/6", [], "density"), ("1", both, "density"),
        ("1", [], "density"), ("1/2", both, "density"), ("2/3", both, "density"),
        ("5/6", [{"p": "2", "order": "6"}], "density"),
        ("3/4", [{"p": "5", "order": "4"}], "density"),
        ("1/2", [{"p": "23", "order": "2"}], "bad-prime"),
        ("1/2", [{"p": "59", "order": "2"}], "density"),
    ):  # fmt: skip
        obj["proof"]["density"] = {"bound": bound, "witnesses": witnesses}
        assert code_of(stored(obj), arithmetic) == code, (bound, witnesses)


@ARITHMETICS
def test_witnesses_of_the_density_have_a_limit(arithmetic: Any) -> None:
    """x^2 - x - 1 is irreducible modulo the primes 2 and 3 mod 5; 50 of them are enough."""
    inert = [str(p) for p in sympy.primerange(3, 1000) if p % 5 in (2, 3)]
    for count, code in ((50, ""), (51, "density")):
        witnesses = [{"p": p, "order": "2"} for p in inert[:count]]
        changed = drifting(density={"bound": "1/2", "witnesses": witnesses})
        assert code_of(changed, arithmetic) == code


@ARITHMETICS
def test_with_a_double_pole_the_density_is_one(arithmetic: Any) -> None:
    """And witnesses of Frobenius have no place there."""
    obj = handmade("whirlpool")
    for bound, witnesses in (("1/2", []), ("1", [{"p": "3", "order": "2"}])):
        obj["proof"]["density"] = {"bound": bound, "witnesses": witnesses}
        assert code_of(stored(obj), arithmetic) == "density"


# --------------------------------------------------------------------------
# the value of the p-curvature


@ARITHMETICS
@pytest.mark.parametrize(
    "name", ["floating-lamps", "whirlpool", "drifting-pairs", "three-currents", "hasty-claim"]
)
def test_the_value_of_the_p_curvature(name: str, arithmetic: Any) -> None:
    """The accepted value is r^(p-1) + r^p by differentiating p - 1 times."""
    obj = handmade(name)
    checked = check(stored(obj), arithmetic=arithmetic)
    equation, p = checked.certificate.claim.equation, int(obj["proof"]["counter_prime"]["p"])
    reduction = checked.facts.reduction  # type: ignore[union-attr]
    assert reduction.common_factor.degree == 0
    value = p_curvature_numerator(
        [int(c) for c in equation.numerator.coefficients],
        [int(c) for c in equation.denominator.coefficients], p,
    )  # fmt: skip
    assert all(c == 0 for k, c in enumerate(value) if k % p)
    assert obj["proof"]["p_curvature"]["numerator"] == write_coefficients(value[::p])


@ARITHMETICS
def test_the_value_of_the_p_curvature_has_a_limit(arithmetic: Any) -> None:
    """p*(1 + degree) above 40,000 is not recomputed: a stored value there is rejected."""
    # y' = 6*x^9999*y is y' = 0 at 2 and 3; 5*10,000 is above the limit
    proof = refutation(
        [], "7", [polynomial_part("6*x^9999")], {"p": "5", "kind": "polynomial_part"}, "x", "1"
    )
    with pytest.raises(CertgenError) as caught:
        check(text("1", "6*x^9999", proof), arithmetic=arithmetic)
    assert getattr(caught.value, "code", "") == "p-curvature"
    assert "40000" in str(caught.value)


# --------------------------------------------------------------------------
# facts


def facts(name: str) -> NoAlgebraicFacts:
    found = check(stored(handmade(name)), arithmetic="both").facts
    assert isinstance(found, NoAlgebraicFacts)
    return found


def test_the_facts_of_the_drifting_pairs() -> None:
    """By hand: at 3, 1/(x^2 + 2x + 2); residue x + 1, its cube 2x + 2; discriminant 20."""
    found = facts("drifting-pairs")
    assert (found.beta, found.remainder, found.density) == (1, None, Fraction(1, 2))
    assert found.smaller_primes == (PrimeStatus(p=2, status="zero"),)
    (residue,) = found.irrational
    assert (str(residue.numerator), str(residue.derivative)) == ("1", "2*x - 1")
    assert residue.discriminant == 20
    reduction = found.reduction
    assert str(reduction.numerator) == "1"
    assert str(reduction.denominator) == "x^2 + 2*x + 2"
    assert str(reduction.derivative) == "2*x + 2"
    assert str(reduction.common_factor) == "1"
    assert str(reduction.residue_power) == "2*x + 2"
    assert reduction.factor_is_irreducible is True


def test_the_strip_is_right_at_every_prime() -> None:
    """bad, zero and nonzero by discriminants and by the definition of the p-curvature."""
    for name, a, b, discriminant in (
        ("drifting-pairs", [1], [-1, -1, 1], 5), ("three-currents", [1], [-1, -1, 0, 1], -23),
    ):  # fmt: skip
        strip = facts(name).strip
        assert [s.p for s in strip] == list(sympy.primerange(38))
        for s in strip:
            zero = p_curvature_numerator(a, b, s.p) == []
            expected = "bad" if discriminant % s.p == 0 else "zero" if zero else "nonzero"
            assert (s.p, s.status) == (s.p, expected)


def test_the_facts_of_every_trouble() -> None:
    """x^5 + x + 1 = x/2*(2x^4 - 4x^2) + 2x^3 + x + 1; modulo x^2 - 2 the residue in A/B."""
    found = facts("every-trouble")
    assert str(found.remainder) == "2*x^3 + x + 1"
    assert found.beta == 2
    assert found.smaller_primes == (PrimeStatus(p=2, status="bad"),)
    (residue,) = found.irrational
    # a = x^5 + x + 1 = 5x + 1, b' = 8x^3 - 8x = 8x modulo x^2 - 2
    assert (str(residue.numerator), str(residue.derivative)) == ("5*x + 1", "8*x")
    assert residue.discriminant == 160**2 - 4 * 128 * 49
    assert found.reduction.residue_power is None
    assert found.reduction.factor_is_irreducible is None


def test_a_cubic_has_no_discriminant_to_show() -> None:
    """Only a quadratic residue polynomial gets one."""
    assert facts("three-currents").irrational[0].discriminant is None


def test_a_factor_that_is_not_irreducible_is_not_called_so() -> None:
    """(x^2 + 1)(x^2 + x + 2) mod 3 is a witness, and no irreducible polynomial."""
    x = sympy.Symbol("x")
    b = sympy.Poly((x**2 + 1) * (x**2 + x + 2), x, modulus=3)
    inverse = sympy.invert(b.diff(), b)
    s = write_coefficients([int(c) % 3 for c in reversed(inverse.all_coeffs())])
    factor = write_coefficients([int(c) % 3 for c in reversed(b.all_coeffs())])
    proof = refutation(
        [("x^4 + x^3 + 3*x^2 + x + 2", "1")], "5", [], outside("3", factor, s), None, "1/2"
    )
    checked = check(text("x^4 + x^3 + 3*x^2 + x + 2", "1", proof), arithmetic="both")
    assert checked.facts.reduction.factor_is_irreducible is False  # type: ignore[union-attr]


def test_irreducibility_of_a_long_factor_is_not_looked_at() -> None:
    """Above degree 40 the checker says nothing about it."""
    x = sympy.Symbol("x")
    for degree, shown in ((39, True), (43, False)):
        b = sympy.Poly(x**degree + x + 1, x, modulus=2)
        s = sympy.invert(b.diff(), b)
        witness = outside(
            "2", f"x^{degree} + x + 1",
            write_coefficients([int(c) % 2 for c in reversed(s.all_coeffs())]),
        )  # fmt: skip
        proof = refutation([(f"x^{degree} + x + 1", "1")], "2", [], witness, None, "1/2")
        found = check(text(f"x^{degree} + x + 1", "1", proof), arithmetic="both").facts
        irreducible = found.reduction.factor_is_irreducible  # type: ignore[union-attr]
        assert irreducible == (b.is_irreducible if shown else None)


def test_a_late_counter_prime() -> None:
    """(x^2 - 18001)*y' = y: 18001 is a square modulo all smaller good primes."""
    d = 18_001
    p = next(
        q for q in sympy.primerange(3, 1000) if d % q and sympy.legendre_symbol(d % q, q) == -1
    )
    inverse = pow(2 * d, -1, p)  # 1/(2x) = x/(2d) modulo x^2 - d
    proof = refutation(
        [(f"x^2 - {d}", "1")], "3", [],
        outside(str(p), f"x^2 + {-d % p}", f"{inverse}*x".removeprefix("1*") or "x"),
        None, "1/2",
    )  # fmt: skip
    late = text(f"x^2 - {d}", "1", proof)
    found = check(late, arithmetic="both").facts
    assert isinstance(found, NoAlgebraicFacts)
    assert [s.p for s in found.smaller_primes] == list(sympy.primerange(p))
    assert {s.status for s in found.smaller_primes} == {"bad", "zero"}
    assert found.strip[-1].p == max(p, 37)


def test_large_degrees_and_late_primes_show_no_strip() -> None:
    """Above degree 60 no prime but the ones that the proof needs is classified."""
    proof = refutation(
        [], "2", [polynomial_part("x")], {"p": "2", "kind": "polynomial_part"}, None, "1"
    )
    assert check(text("1", "x", proof)).facts.strip  # type: ignore[union-attr]
    for degree, shown in ((60, True), (61, False)):
        proof = refutation(
            [(f"x^{degree} + x + 1", "1")], "2", [polynomial_part("1")],
            {"p": "2", "kind": "polynomial_part"}, None, "1",
        )  # fmt: skip
        later = text(f"x^{degree} + x + 1", f"x^{degree} + x + 2", proof)
        strip = check(later, arithmetic="both").facts.strip  # type: ignore[union-attr]
        assert bool(strip) == shown


# --------------------------------------------------------------------------
# hostile sizes


@ARITHMETICS
def test_a_long_reduction_modulo_a_factor_meets_a_limit(arithmetic: Any) -> None:
    """A factor with 6,100 digits and 61 more poles: a LimitError before the division."""
    c = "1" + "0" * 6_098 + "1"
    b = f"x^63 + x^62 + {c}*x^61 + x^2 + x + "
    proof = refutation(
        [(f"x^2 + x + {c}", "1"), ("x^61 + 1", "1")], "2",
        [polynomial_part("1"), irrational(f"x^2 + x + {c}", "x^2 - 2", "3")],
        {"p": "2", "kind": "polynomial_part"}, None, "1",
    )  # fmt: skip
    long = text(b + c, f"{b}{c[:-1]}2", proof)
    with pytest.raises(LimitError, match="too long"):
        check(long, arithmetic=arithmetic)


@ARITHMETICS
@pytest.mark.parametrize(
    "change",
    [
        {"squarefree_decomposition": [{"factor": "x", "multiplicity": "9" * 20_000}]},
        {"squarefree_decomposition": [{"factor": "x^10000 - 2", "multiplicity": "9999999"}]},
        {"obstructions": [irrational("x^2 - x - 1", "x^10000 - 2", "999999999989")]},
        {"obstructions": [irrational("x^10000 - 2", "5*x^2 - 1", "3")]},
        {"obstructions": [multiple_pole("x", "9" * 20_000)]},
        {"obstructions": [polynomial_part("x^10000")]},
        {"density": {"bound": "1/2", "witnesses": [{"p": "3", "order": "9" * 20_000}]}},
        {"p_curvature": {"numerator": "x^10000"}},
        {"counter_prime": outside("999999999989", "x^10000", "x^9999")},
        {"counter_prime": outside("999999999989", "x^10001", "x^9999")},
    ],
    ids=lambda change: next(iter(change)),
)
def test_hostile_numbers_end_in_an_error_of_ours(change: Any, arithmetic: Any) -> None:
    """Huge multiplicities, orders, degrees and primes: one short message each."""
    with pytest.raises(CertgenError) as caught:
        check(drifting(**change), arithmetic=arithmetic)
    assert len(str(caught.value)) < 400
