"""The rules of the algebraic side: the classic traps, and the facts by another route."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import pytest
import sympy
from hypothesis import given, settings
from hypothesis import strategies as st

from certgen.checker import check
from certgen.checker.facts import AlgebraicFacts, ClosedFormFacts, IdentitySpot
from certgen.errors import CertgenError, LimitError, RejectedError
from tests.handmade import (
    ARCHES,
    Json,
    algebraic,
    certificate,
    claim,
    handmade,
    powers,
    stored,
)
from tests.mutants import write_coefficients
from tests.test_checker_kernel import ARITHMETICS, code_of

X = sympy.Symbol("x")


def arches(**changes: Any) -> str:
    """The text of "harbour-arches" with other values in the proof."""
    obj = handmade("harbour-arches")
    obj["proof"].update(changes)
    return stored(obj)


def code_of_proof(b: str, a: str, proof: Json, arithmetic: Any = "both") -> str:
    return code_of(stored(certificate(claim("trap", b, a), "proved", proof)), arithmetic)


# --------------------------------------------------------------------------
# traps


@ARITHMETICS
def test_n_is_zero(arithmetic: Any) -> None:
    """N = 0 makes 0 = 0 of the identity and would prove every equation."""
    assert code_of(arches(degree="0"), arithmetic) == "vacuous"


@ARITHMETICS
def test_the_empty_product_solves_only_the_constant_equation(arithmetic: Any) -> None:
    """An empty solution with degree 1 is right for y' = 0 and for no other equation."""
    empty = algebraic([], [], "1", [], [], "2", None)
    assert code_of_proof("1", "0", empty, arithmetic) == ""
    for b, a in (("1", "1"), ("x", "1"), ("2*x^3 - 2*x", "3*x^2 - 1")):
        assert code_of_proof(b, a, empty, arithmetic) == "empty-solution"


@ARITHMETICS
def test_a_product_for_the_constant_equation(arithmetic: Any) -> None:
    """For y' = 0 no base may be listed, not even with all else consistent."""
    proof = algebraic(powers(("x", "1")), [("x", "1")], "1", powers(("x", "1")), [], "2", None)
    assert code_of_proof("1", "0", proof, arithmetic) == "denominator-identity"
    proof = algebraic(
        powers(("2*x + 1", "1")), [("2*x + 1", "1")], "1", powers(("2*x + 1", "1")), [], "3",
        None,
    )  # fmt: skip
    assert code_of_proof("1", "0", proof, arithmetic) == "denominator-identity"


@ARITHMETICS
def test_a_constant_base(arithmetic: Any) -> None:
    """2^(1/7) leaves the identity true and forges the degree 14."""
    solution = powers(("2", "1/7"), ("x^3 - x", "1/2"))
    assert code_of(arches(solution=solution, degree="14"), arithmetic) == "vacuous"


@ARITHMETICS
def test_a_repeated_base(arithmetic: Any) -> None:
    """x^(1/6)*x^(1/3) is x^(1/2), of degree 2 and not 6."""
    solution = powers(("x", "1/6"), ("x", "1/3"))
    proof = algebraic(solution, [("x", "1/2")], "6", powers(("x", "3")), [], "3", None)
    assert code_of_proof("2*x", "1", proof, arithmetic) == "not-canonical"


@ARITHMETICS
def test_bases_with_a_common_root(arithmetic: Any) -> None:
    """x^(1/2)*(x^2 + x)^(-1/2): the bases are not coprime, and b is not x*(x^2 + x)."""
    proof = algebraic(
        powers(("x", "1/2"), ("x^2 + x", "-1/2")), [("x", "1/2"), ("x^2 + x", "-1/2")], "2",
        powers(("x", "1")), powers(("x^2 + x", "1")), "3", None,
    )  # fmt: skip
    assert code_of_proof("2*x + 2", "-1", proof, arithmetic) == "denominator-identity"
    # the equation not in lowest terms, so that both identities hold: V = x^2*(x + 1)
    equation = "2*x^3 + 2*x^2", "-x^2"
    assert code_of_proof(*equation, proof, arithmetic) == "not-squarefree"


@ARITHMETICS
def test_a_base_with_a_double_root(arithmetic: Any) -> None:
    """(x^2)^(1/4) is x^(1/2), of degree 2 and not 4."""
    for prime in ("2", "3", "5", "999999999989"):
        proof = algebraic(
            powers(("x^2", "1/4")), [("x^2", "1/4")], "4", powers(("x^2", "1")), [], prime, None
        )
        assert code_of_proof("2*x^2", "x", proof, arithmetic) == "not-squarefree"


@ARITHMETICS
def test_an_equation_that_is_not_in_lowest_terms(arithmetic: Any) -> None:
    """(x + 1)*2x*y' = (x + 1)*y: the right solution does not give this b."""
    root, one = powers(("x", "1/2")), powers(("x", "1"))
    proof = algebraic(root, [("x", "1/2")], "2", one, [], "3", None)
    assert code_of_proof("2*x", "1", proof, arithmetic) == ""
    assert code_of_proof("2*x^2 + 2*x", "x + 1", proof, arithmetic) == "denominator-identity"


@ARITHMETICS
@pytest.mark.parametrize("p", ["1", "0", "-3", "4", "9", "91", str(2**2000 + 1)])
def test_numbers_that_are_no_primes(p: str, arithmetic: Any) -> None:
    """9 and 91 = 7*13 leave x^3 - x squarefree and are no primes; huge ones are not tried."""
    assert code_of(arches(squarefree_prime=p), arithmetic) == "not-prime"


@ARITHMETICS
def test_a_prime_that_divides_the_leading_coefficient(arithmetic: Any) -> None:
    """Modulo 5 the base (5x + 1)*x^2 would lose its degree: nothing is shown."""
    proof = algebraic(
        powers(("5*x^2 + x", "1/2")), [("x", "1/2"), ("5*x + 1", "1/2")], "2",
        powers(("5*x^2 + x", "1")), [], "5", None,
    )  # fmt: skip
    equation = "10*x^2 + 2*x", "10*x + 1"
    assert code_of_proof(*equation, proof, arithmetic) == "prime-divides-leading-coefficient"
    proof["squarefree_prime"] = "3"
    assert code_of_proof(*equation, proof, arithmetic) == ""


@ARITHMETICS
def test_a_residue_off_by_one(arithmetic: Any) -> None:
    """Exponent 3/2 in the place of 1/2, consistently: another equation is solved."""
    proof = algebraic(
        powers(("x^3 - x", "3/2")),
        [("x - 1", "3/2"), ("x", "3/2"), ("x + 1", "3/2")],
        "2", powers(("x^3 - x", "3")), [], "3", None,
    )  # fmt: skip
    assert code_of(arches(**proof), arithmetic) == "numerator-identity"


@ARITHMETICS
def test_a_dropped_factor(arithmetic: Any) -> None:
    """Without the pole -1 the product of the bases is not b."""
    proof = algebraic(
        powers(("x^2 - x", "1/2")), [("x - 1", "1/2"), ("x", "1/2")], "2",
        powers(("x^2 - x", "1")), [], "3", None,
    )  # fmt: skip
    assert code_of(arches(**proof), arithmetic) == "denominator-identity"


@ARITHMETICS
def test_a_doubled_degree_with_scaled_exponents(arithmetic: Any) -> None:
    """Y^4 = (x^3 - x)^2 is true of the solution and is not its minimal polynomial."""
    minimal = {"degree": "4", "numerator": powers(("x^3 - x", "2")), "denominator": []}
    assert code_of(arches(degree="4", minimal_polynomial=minimal), arithmetic) == "degree"
    assert code_of(arches(minimal_polynomial=minimal), arithmetic) == "minimal-polynomial"


@ARITHMETICS
def test_a_minimal_polynomial_on_the_wrong_side(arithmetic: Any) -> None:
    """Y^2 = 1/(x^3 - x) is that of the inverse."""
    minimal = {"degree": "2", "denominator": powers(("x^3 - x", "1")), "numerator": []}
    assert code_of(arches(minimal_polynomial=minimal), arithmetic) == "minimal-polynomial"


@ARITHMETICS
def test_another_claim_s_proof(arithmetic: Any) -> None:
    """The proof of one lantern claim under another: rejected, digest or not."""
    obj = handmade("ferry")
    obj["proof"] = handmade("harbour-arches")["proof"]
    assert code_of(stored(obj), arithmetic) == "denominator-identity"


@ARITHMETICS
def test_the_verdict_follows_from_claim_and_proof(arithmetic: Any) -> None:
    """Of the three words one is right, and which one depends on what is asserted."""
    for asserts, right in (("algebraic", "proved"), ("transcendental", "refuted")):
        for word in ("proved", "refuted", "undecided"):
            obj = handmade("harbour-arches")
            obj["claim"]["asserts"], obj["verdict"] = asserts, word
            assert code_of(stored(obj), arithmetic) == ("" if word == right else "verdict")


# --------------------------------------------------------------------------
# Eisenstein constants


def coefficients(point: int, constant: int, count: int = 40) -> list[Fraction]:
    """The series of (v(x0 + L*t)/v(x0))^(1/2), v = x^3 - x, by the recurrence of powers."""
    v = [point**3 - point, 3 * point**2 - 1, 3 * point, 1]
    w = [Fraction(c * constant**k, v[0]) for k, c in enumerate(v)]
    out = [Fraction(1)]
    for n in range(1, count):
        terms = (
            (Fraction(3, 2) * k - n) * w[k] * out[n - k] for k in range(1, min(n, 3) + 1)
        )
        out.append(sum(terms, Fraction(0)) / n)
    return out


@pytest.mark.parametrize("point", [2, -2, 3, 4])
def test_accepted_eisenstein_constants_make_the_series_integral(point: int) -> None:
    """Of the constants 1 to 300 those that the rule accepts have integer coefficients."""
    accepted = []
    for constant in range(1, 301):
        value = {"point": str(point), "constant": str(constant)}
        if code_of(arches(eisenstein=value), "plain") == "":
            accepted.append(constant)
            series = coefficients(point, constant)
            assert all(c.denominator == 1 for c in series), constant
    assert 4 * abs(point**3 - point) in accepted or abs(point**3 - point) > 75


def test_the_rejected_example_is_really_none() -> None:
    """12 at 2: the coefficient of t^2 is 23/2."""
    assert coefficients(2, 12)[:3] == [1, 11, Fraction(23, 2)]


@ARITHMETICS
@pytest.mark.parametrize("point", ["0", "1", "-1"])
def test_the_point_is_no_zero(point: str, arithmetic: Any) -> None:
    """At a zero of a base the series does not begin with 1."""
    value = {"point": point, "constant": "24"}
    assert code_of(arches(eisenstein=value), arithmetic) == "eisenstein-point"


@ARITHMETICS
def test_smaller_constants_need_the_taylor_coefficients(arithmetic: Any) -> None:
    """At 4 the value is 60; 4*60 = 240 always suffices, 120 does not divide and is tried."""
    for constant, code in (("240", ""), ("480", ""), ("120", "eisenstein-constant")):
        value = {"point": "4", "constant": constant}
        assert code_of(arches(eisenstein=value), arithmetic) == code
    # base x + 8 at 8: c = 4*16 = 64; L = 64 suffices, 32 does not
    proof = algebraic(
        powers(("x^2 + 4", "1/2")), [("x^2 + 4", "1/2")], "2", powers(("x^2 + 4", "1")), [],
        "3", ("0", "4"),
    )  # fmt: skip
    # sqrt(1 + L^2 t^2/4): 16 divides L^2 = 16, and the Taylor coefficient of t is 0
    assert code_of_proof("x^2 + 4", "x", proof, arithmetic) == ""
    proof["eisenstein"]["constant"] = "2"
    assert code_of_proof("x^2 + 4", "x", proof, arithmetic) == "eisenstein-constant"


# --------------------------------------------------------------------------
# closed forms


def _with_closed_form(name: str, *pairs: tuple[str, str]) -> Json:
    obj = handmade(name)
    obj["claim"]["solution"], obj["claim"]["solution_as_written"] = powers(*pairs), "?"
    return obj


@ARITHMETICS
def test_closed_forms_need_no_canonical_shape(arithmetic: Any) -> None:
    """Bases may share roots, repeat them and be written in pieces: S'/S = a/b decides."""
    for pairs in (
        [("x", "1/2"), ("x^2 - 1", "1/2")],
        [("x - 1", "1/2"), ("x", "1/2"), ("x + 1", "1/2")],
        [("x", "-1/2"), ("x^4 - x^2", "1/2")],
        [("x^6 - 2*x^4 + x^2", "1/4")],
    ):
        obj = _with_closed_form("harbour-arches", *pairs)
        assert code_of(stored(obj), arithmetic) == ""
    for pairs in ([("x", "1/2")], [("x^3 - x", "1/3")], [("x^3 + x", "1/2")], []):
        obj = _with_closed_form("harbour-arches", *pairs)
        assert code_of(stored(obj), arithmetic) == "closed-form"


@ARITHMETICS
def test_a_closed_form_that_is_right_is_not_refuted(arithmetic: Any) -> None:
    """No factor shows a disagreement where there is none."""
    obj = handmade("misprint")
    obj["claim"]["solution"] = powers(("x", "1/2"), ("x^2 - 1", "1/2"))
    for factor in ("x", "x - 1", "x + 1", "x^2 - 1", "x - 7", "x^3 - x"):
        for claimed in ("1/3", "0", "1/4", "1"):
            obj["proof"]["disagreement"].update(factor=factor, residue_of_closed_form=claimed)
            assert code_of(stored(obj), arithmetic) in (
                "disagreement-residue", "disagreement-factor"
            )  # fmt: skip


@ARITHMETICS
def test_the_disagreement_s_prime(arithmetic: Any) -> None:
    """It is proved prime, keeps the degree of the factor and separates the bases."""
    obj = handmade("misprint")
    for prime, code in (
        ("9", "not-prime"), ("2", "disagreement-factor"), ("3", ""), ("5", ""),
    ):  # fmt: skip
        obj["proof"]["disagreement"]["prime"] = prime
        assert code_of(stored(obj), arithmetic) == code
    obj = handmade("stray-lamp")
    obj["proof"]["disagreement"].update(factor="3*x - 1", residue_of_closed_form="1", prime="3")
    assert code_of(stored(obj), arithmetic) == "prime-divides-leading-coefficient"


# --------------------------------------------------------------------------
# facts


def facts(name: str) -> Any:
    return check(stored(handmade(name)), arithmetic="both").facts


def test_the_facts_of_the_arches() -> None:
    """beta = 2, N*a = 6x^2 - 2, and both identities at 2, by hand."""
    found = facts("harbour-arches")
    assert isinstance(found, AlgebraicFacts)
    assert (found.degree, found.beta, found.numerators) == (2, 2, (1,))
    assert [str(f) for f in found.derivatives] == ["3*x^2 - 1"]
    assert found.products is not None and [str(f) for f in found.products] == ["3*x^2 - 1"]
    assert str(found.identity) == "6*x^2 - 2"
    assert found.squarefree_degree == 3
    assert found.spot == IdentitySpot(
        point=2, a=11, b=12, bases=(6,), derivatives=(11,), terms=(11,)
    )
    # 2*(x^3 - x): 2 divides the leading coefficient and the discriminant 4
    assert [(s.p, s.status) for s in found.strip][:4] == [
        (2, "bad"), (3, "zero"), (5, "zero"), (7, "zero"),
    ]  # fmt: skip
    assert [s.p for s in found.strip] == list(sympy.primerange(38))


def test_the_facts_of_two_bases_satisfy_the_identities() -> None:
    """b = beta*V and N*a = beta*sum of the products, expanded by sympy."""
    found = facts("mixed-knots")
    a, b = 3 * X - 1, 18 * X**2 - 2 * X
    assert sympy.expand(found.beta * X * (9 * X - 1) - b) == 0
    total = sum(sympy.Poly.from_list([int(c) for c in reversed(f.numerators)], X).as_expr()
                for f in found.products)  # fmt: skip
    assert sympy.expand(found.degree * a - found.beta * total) == 0
    spot = found.spot
    assert (spot.a, spot.b) == (a.subs(X, spot.point), b.subs(X, spot.point))
    assert found.degree * spot.a == found.beta * sum(spot.terms)
    assert spot.b == found.beta * spot.bases[0] * spot.bases[1]


def test_the_facts_of_the_constant_equation() -> None:
    """No bases, no spot, every prime good and every p-curvature zero."""
    found = facts("still-water")
    assert (found.degree, found.beta, found.products, found.spot) == (1, 1, (), None)
    assert {s.status for s in found.strip} == {"zero"}


def test_the_facts_of_a_disagreement() -> None:
    """x^2 - 2x + 1 has order 2 along x - 1, which does not divide the denominator 2x."""
    found = facts("stray-lamp")
    assert isinstance(found, ClosedFormFacts)
    assert found.disagreement.orders == (0, 2)
    assert not found.disagreement.divides_denominator
    assert facts("misprint").disagreement.divides_denominator
    assert facts("misprint").actual == facts("harbour-arches")


def _power(base: str, exponent: str, b: str, a: str) -> Any:
    solution = powers((base, exponent))
    proof = algebraic(solution, [(base, exponent)], "1", solution, [], "5", None)
    return check(stored(certificate(claim("spot", b, a), "proved", proof))).facts


def test_the_spot_is_where_the_numbers_are_small() -> None:
    """A pole at 2 moves the point; with large values everywhere the smallest is taken."""
    assert _power("x - 2", "1", "x - 2", "1").spot.point == 3
    c = 2**60 - 2  # 61 bits at 2 and at 3, 60 bits at -2
    assert _power(f"x + {c}", "1", f"x + {c}", "1").spot.point == -2
    f = sympy.Poly(sympy.prod(X - k for k in (2, 3, -2, 1, -1, 4, 5, -3)), X)
    product, derivative = _text(f), _text(f.diff())
    proof = algebraic(
        powers((product, "1")), [(product, "1")], "1", powers((product, "1")), [], "11", None
    )
    text = stored(certificate(claim("spot", product, derivative), "proved", proof))
    assert check(text, arithmetic="both").facts.spot is None


def test_large_degrees_show_less() -> None:
    """Above degree 40 nothing is expanded, above 60 no strip, above 200 no spot."""
    border = {40: "psi", 41: "si", 60: "si", 61: "i", 200: "i", 201: ""}
    for degree, shown in border.items():
        base = f"x^{degree} + x + 1"
        found = _power(base, "1", base, f"{degree}*x^{degree - 1} + 1")
        assert ("p" in shown) == (found.products is not None) == (found.identity is not None)
        assert ("s" in shown) == bool(found.strip)
        assert ("i" in shown) == (found.spot is not None)


# --------------------------------------------------------------------------
# random products, solved by sympy and not by us

EXPONENTS = st.fractions(-3, 3, max_denominator=12).filter(bool)


@given(st.dictionaries(st.integers(-6, 6), EXPONENTS, min_size=1, max_size=4))
@settings(max_examples=60, deadline=None)
def test_random_products_are_accepted_and_their_neighbours_are_not(
    product: dict[int, Fraction],
) -> None:
    """y = prod (x - k)^e: the equation is differentiated by sympy; e + 1 is rejected."""
    groups: dict[Fraction, Any] = {}
    for k, e in product.items():
        groups[e] = groups.get(e, sympy.Integer(1)) * (X - k)
    r = sympy.together(sum(sympy.Rational(str(e)) / (X - k) for k, e in product.items()))
    top, bottom = (sympy.Poly(f, X, domain="QQ") for f in sympy.fraction(sympy.cancel(r)))
    top, bottom = _clear(top, bottom)
    bases = sorted(
        ((sympy.Poly(f, X), e) for e, f in groups.items()),
        key=lambda pair: (pair[0].degree(), [int(c) for c in pair[0].all_coeffs()]),
    )
    n = int(sympy.ilcm(1, *(e.denominator for e in product.values())))
    solution = powers(*((_text(f), str(e)) for f, e in bases))

    def proof(solution: list[Json]) -> Json:
        sides: list[list[Json]] = [[], []]
        for item in solution:
            e = n * Fraction(item["exponent"])
            sides[e < 0].append({"base": item["base"], "exponent": str(abs(e))})
        fractions = sorted(
            (-k, _text(sympy.Poly(X - k, X)), str(e)) for k, e in product.items()
        )
        return algebraic(
            solution, [(f, e) for _, f, e in fractions], str(n), sides[0], sides[1], "101", None
        )

    equation = _text(bottom), _text(top)
    assert code_of_proof(*equation, proof(solution)) == ""
    for item in solution:
        right = item["exponent"]
        item["exponent"] = str(Fraction(right) + 1)
        if item["exponent"] != "0" and len({i["exponent"] for i in solution}) == len(solution):
            assert code_of_proof(*equation, proof(solution)) == "numerator-identity"
        item["exponent"] = right


def _clear(top: sympy.Poly, bottom: sympy.Poly) -> tuple[sympy.Poly, sympy.Poly]:
    """The same fraction in the canonical form of an equation."""
    scale = sympy.ilcm(*(c.q for c in [*top.all_coeffs(), *bottom.all_coeffs()]))
    top, bottom = top * scale, bottom * scale
    content = sympy.igcd(*top.all_coeffs(), *bottom.all_coeffs()) * sympy.sign(bottom.LC())
    return (
        sympy.Poly([c / content for c in top.all_coeffs()], X),
        sympy.Poly([c / content for c in bottom.all_coeffs()], X),
    )


def _text(f: sympy.Poly) -> str:
    return write_coefficients([int(c) for c in reversed(f.all_coeffs())])


# --------------------------------------------------------------------------
# hostile sizes


@ARITHMETICS
def test_hostile_eisenstein_values_end_quickly(arithmetic: Any) -> None:
    """A huge point or constant at a high degree is refused before it is raised to powers."""
    base = "x^2000 - 2"
    for value, code in (
        (("7" * 15_000, "1"), "eisenstein-point"), (("2", "7" * 15_000), "eisenstein-constant"),
    ):  # fmt: skip
        proof = algebraic(
            powers((base, "1")), [(base, "1")], "1", powers((base, "1")), [], "3", value
        )
        assert code_of_proof(base, "2000*x^1999", proof, arithmetic) == code


@ARITHMETICS
def test_hostile_denominators_meet_a_limit(arithmetic: Any) -> None:
    """Exponents whose common denominator could not be stored: a LimitError, early."""
    obj = handmade("harbour-arches")
    obj["claim"]["solution"] = [
        {"base": f"x + {k}", "exponent": f"1/1{k:0>9000}"} for k in range(1, 200)
    ]
    obj["claim"]["solution_as_written"] = "?"
    with pytest.raises(LimitError, match="denominator"):
        check(stored(obj), arithmetic=arithmetic)


@ARITHMETICS
def test_a_closed_form_of_huge_total_degree_meets_a_limit(arithmetic: Any) -> None:
    """Two bases of degree 6,000: nothing is multiplied out."""
    obj = _with_closed_form("harbour-arches", ("x^6000 + 1", "1/2"), ("x^6000 + 2", "1/2"))
    with pytest.raises(LimitError, match="10000"):
        check(stored(obj), arithmetic=arithmetic)


@ARITHMETICS
@pytest.mark.parametrize(
    "change",
    [
        {"degree": "9" * 20_000},
        {"squarefree_prime": "9" * 20_000},
        {"squarefree_prime": "9" * 30_000},
        {"squarefree_prime": "-" + "9" * 20_000},
        {"solution": powers(("x^10000 - x", "1/2"))},
        {"solution": powers(("x^10001 - x", "1/2"))},
        {"solution": powers(("x^3 - x", "1/" + "9" * 19_999))},
        {"partial_fractions": [{"factor": "x^9999 - x", "residue": "1/2"}]},
    ],
    ids=lambda change: next(iter(change)),
)
def test_hostile_numbers_end_in_an_error_of_ours(change: Any, arithmetic: Any) -> None:
    """Huge degrees, primes and factors: a short message, no other exception."""
    with pytest.raises(CertgenError) as caught:
        check(arches(**change), arithmetic=arithmetic)
    assert len(str(caught.value)) < 400


def test_a_rejection_names_the_first_coefficient_that_differs() -> None:
    """From the top: 3x^2 + 1 in the place of 3x^2 - 1 differs at x^0."""
    obj = handmade("harbour-arches")
    obj["claim"]["equation"] = "(2*x^3 - 2*x)*y' = (3*x^2 + 1)*y"
    with pytest.raises(RejectedError) as caught:
        check(stored(obj))
    assert "x^0" in caught.value.expected
    assert (caught.value.expected.split()[0], caught.value.found) == ("-2", "2")
    obj["proof"] = {**ARCHES, "solution": powers(("x^50 - x", "1/2"))}
    with pytest.raises(RejectedError, match="degree 3; found total degree 50"):
        check(stored(obj))
