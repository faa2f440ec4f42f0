"""Tampered certificates: for every code of the checker a lie that provokes exactly it.

Each entry starts from a certificate of `handmade`, changes what its `tamper` says and
gets its digest recomputed, so that nothing but the mathematics gives it away.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from tests.handmade import (
    Json,
    algebraic,
    canonical,
    certificate,
    claim,
    handmade,
    irrational,
    multiple_pole,
    outside,
    powers,
    refutation,
    stored,
    with_digest,
)

__all__ = ["AS_WRITTEN_DIFFERS", "TAMPERED", "UNREADABLE", "Tampered", "Unreadable"]


@dataclass(frozen=True)
class Tampered:
    """A false certificate: its code, where the checker sees it, what is wrong."""

    name: str
    code: str
    path: str
    wrong: str
    make: Callable[[], Json]

    @property
    def text(self) -> str:
        obj = self.make()
        return canonical(obj) if "digest" in obj else stored(obj)


def _changed(name: str, tamper: Callable[[Json], None]) -> Callable[[], Json]:
    def make() -> Json:
        obj = handmade(name)
        tamper(obj)
        return obj

    return make


def _put(name: str, **values: object) -> Callable[[], Json]:
    """Change single values; the keyword spells the keys with `__` between them."""

    def tamper(obj: Json) -> None:
        for place, value in values.items():
            *keys, last = [int(k) if k.isdigit() else k for k in place.split("__")]
            at: object = obj
            for key in keys:
                at = at[key]  # type: ignore[index]
            at[last] = value  # type: ignore[index]

    return _changed(name, tamper)


def _proof(name: str, proof: Json) -> Callable[[], Json]:
    return _put(name, proof=proof)


TAMPERED: list[Tampered] = []


def _add(name: str, code: str, path: str, wrong: str, make: Callable[[], Json]) -> None:
    TAMPERED.append(Tampered(name, code, path, wrong, make))


# --------------------------------------------------------------------------
# read by the codec

_add(
    "vacuous", "vacuous", "$.proof.solution[0]",
    "The base 2 with the exponent 1/7 joins the solution: the identity stays true and a "
    "degree of 14 would be forged.",
    _proof("harbour-arches", algebraic(
        powers(("2", "1/7"), ("x^3 - x", "1/2")),
        [("x - 1", "1/2"), ("x", "1/2"), ("x + 1", "1/2")],
        "14", powers(("x^3 - x", "7")), [], "3", None,
    )),
)  # fmt: skip
_add(
    "not-canonical", "not-canonical", "$.proof",
    "The same base stands twice, with the exponents 1/6 and 1/3 in the place of 1/2: the "
    "product is right, the degree 6 is not.",
    _proof("harbour-arches", algebraic(
        powers(("x^3 - x", "1/6"), ("x^3 - x", "1/3")),
        [("x - 1", "1/2"), ("x", "1/2"), ("x + 1", "1/2")],
        "6", powers(("x^3 - x", "3")), [], "3", None,
    )),
)  # fmt: skip

# the frame

_add(
    "verdict", "verdict", "$.verdict",
    "The verdict word is flipped: the proof shows that no solution is algebraic, and the "
    "claim says that every solution is.",
    _put("hasty-claim", verdict="proved"),
)
_add(
    "digest", "digest", "$.digest",
    "Everything is true but the digest, whose last digit is another one.",
    lambda: _with_wrong_digest(handmade("ferry")),
)


def _with_wrong_digest(obj: Json) -> Json:
    digest = with_digest(obj)["digest"]
    last = "0" if digest[-1] != "0" else "1"
    return {**obj, "digest": digest[:-1] + last}


# primes

_add(
    "not-prime", "not-prime", "$.proof.squarefree_prime",
    "91 = 7 * 13 is called a prime.",
    _put("harbour-arches", proof__squarefree_prime="91"),
)
_add(
    "prime-divides-leading-coefficient", "prime-divides-leading-coefficient",
    "$.proof.squarefree_prime",
    "Modulo 3 the base 9x - 1 is a constant, so that squarefreeness modulo 3 says nothing.",
    _put("mixed-knots", proof__squarefree_prime="3"),
)

# the algebraic side

_add(
    "empty-solution", "empty-solution", "$.proof.solution",
    "The empty product, degree 1: right for y' = 0 and for nothing else.",
    _proof("lantern-pairs", algebraic([], [], "1", [], [], "3", None)),
)
_add(
    "degree", "degree", "$.proof.degree",
    "The degree is doubled and the exponents of the minimal polynomial with it.",
    _put("harbour-arches", proof__degree="4",
         proof__minimal_polynomial={"degree": "4", "numerator": powers(("x^3 - x", "2")),
                                    "denominator": []}),
)
_add(
    "denominator-identity", "denominator-identity", "$.proof.solution",
    "The factor x + 1 is dropped everywhere.",
    _proof("harbour-arches", algebraic(
        powers(("x^2 - x", "1/2")), [("x - 1", "1/2"), ("x", "1/2")],
        "2", powers(("x^2 - x", "1")), [], "3", None,
    )),
)  # fmt: skip
_add(
    "numerator-identity", "numerator-identity", "$.proof.solution",
    "The residue is 1/3 in the place of 1/2, consistently.",
    _proof("harbour-arches", algebraic(
        powers(("x^3 - x", "1/3")),
        [("x - 1", "1/3"), ("x", "1/3"), ("x + 1", "1/3")],
        "3", powers(("x^3 - x", "1")), [], "3", None,
    )),
)  # fmt: skip
_add(
    "not-squarefree", "not-squarefree", "$.proof.squarefree_prime",
    "x^3 - x = x*(x + 1)^2 modulo 2: this prime does not show squarefreeness.",
    _put("harbour-arches", proof__squarefree_prime="2"),
)
_add(
    "partial-fractions", "partial-fractions", "$.proof.partial_fractions",
    "The displayed decomposition lacks the term of x + 1.",
    _changed("harbour-arches", lambda obj: obj["proof"]["partial_fractions"].pop()),
)
_add(
    "minimal-polynomial", "minimal-polynomial", "$.proof.minimal_polynomial",
    "The right-hand side of the minimal polynomial is squared.",
    _put("harbour-arches", proof__minimal_polynomial__numerator__0__exponent="2"),
)
_add(
    "eisenstein-point", "eisenstein-point", "$.proof.eisenstein.point",
    "The point 1 is a zero of the solution.",
    _put("harbour-arches", proof__eisenstein__point="1"),
)
_add(
    "eisenstein-constant", "eisenstein-constant", "$.proof.eisenstein.constant",
    "With 12 in the place of 24 the series begins 1 + 11*t + 23/2*t^2.",
    _put("harbour-arches", proof__eisenstein__constant="12"),
)
_add(
    "closed-form", "closed-form", "$.claim.solution",
    "The author's closed form has the exponent 1/3 where the equation has -1/3.",
    _put("mixed-knots", claim__solution__1__exponent="1/3",
         claim__solution_as_written="s^(1/2) * (1 - 9*s)^(1/3)"),
)

# a wrong closed form

_add(
    "no-closed-form", "no-closed-form", "$.claim.solution",
    "A closed form is refuted that the claim does not name.",
    _put("misprint", claim__solution=None, claim__solution_as_written=None),
)
_add(
    "disagreement-factor", "disagreement-factor", "$.proof.disagreement.factor",
    "The factor x^2 - x mixes the pole 0, where the closed form is right, with the pole 1.",
    _put("misprint", proof__disagreement__factor="x^2 - x"),
)
_add(
    "disagreement-residue", "disagreement-residue",
    "$.proof.disagreement.residue_of_closed_form",
    "The closed form's residue at 1 is 1/3 and not -1/3.",
    _put("misprint", proof__disagreement__residue_of_closed_form="-1/3"),
)

# the refutation

_add(
    "squarefree-decomposition", "squarefree-decomposition",
    "$.proof.squarefree_decomposition",
    "The double pole is moved from 0 to 1, in the obstruction too.",
    _put("whirlpool",
         proof__squarefree_decomposition__0__multiplicity="2",
         proof__squarefree_decomposition__1__multiplicity="1",
         proof__obstructions=[multiple_pole("x - 1", "2")]),
)
_add(
    "not-lowest-terms", "not-lowest-terms", "$.proof.lowest_terms_prime",
    "Both sides are multiplied by x - 3: the equation is no longer in lowest terms.",
    lambda: certificate(
        claim("drifting-pairs", "x^3 - 4*x^2 + 2*x + 3", "x - 3", asserts="transcendental"),
        "proved",
        refutation(
            [("x - 3", "1"), ("x^2 - x - 1", "1")], "2",
            [irrational("x^2 - x - 1", "5*x^2 - 1", "3")],
            outside("3", "x^2 + 2*x + 2", "x + 1"), "2", "1/2", ("3", "2"),
        ),
    ),
)  # fmt: skip
_add(
    "bad-prime", "bad-prime", "$.proof.counter_prime.p",
    "The solution (x/(x + 5))^(1/5) is algebraic. Modulo 5 the two poles fall together, a "
    "double pole appears and the 5-curvature is not zero: 5 is not good and proves nothing.",
    lambda: certificate(
        claim("ebb", "x^2 + 5*x", "1", "y' = y/(x(x + 5))", asserts="transcendental"),
        "proved",
        refutation(
            [("x", "1"), ("x + 5", "1")], "2", [],
            {"p": "5", "kind": "multiple_pole", "factor": "x"}, None, "1/2",
        ),
    ),
)  # fmt: skip
_add(
    "counter-prime-witness", "counter-prime-witness", "$.proof.counter_prime.residue",
    "At the poles 0 and 1 the residues are 1 and 2. The witness x + 1 is not constant and "
    "yet has values in F_3: it shows no obstruction.",
    lambda: certificate(
        claim("two-landings", "x^4 - x^3 - 2*x^2 + 2*x", "3*x^3 - 7*x + 2",
              "y' = (1/x + 2/(x - 1) + 1/(x^2 - 2)) y", asserts="transcendental"),
        "proved",
        refutation(
            [("x - 1", "1"), ("x", "1"), ("x^2 - 2", "1")], "3", [],
            outside("3", "x^2 + 2*x", "x + 1"), None, "1/2", ("3", "2"),
        ),
    ),
)  # fmt: skip
_add(
    "not-smallest", "not-smallest", "$.proof.counter_prime.p",
    "7 is a counter-prime with a right witness, but so is 3.",
    _put("drifting-pairs", proof__counter_prime=outside("7", "x^2 + 6*x + 6", "6*x + 4"),
         proof__p_curvature=None),
)
_add(
    "obstructions", "obstructions", "$.proof.obstructions",
    "The double pole at 0 is not listed.",
    _put("every-trouble", proof__obstructions=[
        {"kind": "polynomial_part", "quotient": "1/2*x"},
        irrational("x^2 - 2", "128*x^2 - 160*x + 49", "3"),
    ]),
)  # fmt: skip
_add(
    "irrational-residue", "irrational-residue", "$.proof.obstructions[0].rootless_prime",
    "5x^2 - 1 has the roots 3 and 8 modulo 11.",
    _put("drifting-pairs", proof__obstructions__0__rootless_prime="11"),
)
_add(
    "p-curvature", "p-curvature", "$.proof.p_curvature.numerator",
    "The 3-curvature is 2/b^3 and not 1/b^3.",
    _put("drifting-pairs", proof__p_curvature__numerator="1"),
)
_add(
    "density", "density", "$.proof.density.witnesses[0].order",
    "The residues are quadratic: Frobenius at 3 has order 2, not 3, and the density is 1/2.",
    _put("drifting-pairs", proof__density__bound="2/3",
         proof__density__witnesses__0__order="3"),
)

# further lies of the same codes

_add("vacuous-exponent", "vacuous", "$.proof.solution[0]", "An exponent 0.",
     _put("harbour-arches", proof__solution__0__exponent="0"))  # fmt: skip
_add("not-canonical-base", "not-canonical", "$.proof.solution[0]",
     "The base 2x^3 - 2x is not primitive.",
     _put("harbour-arches", proof__solution__0__base="2*x^3 - 2*x"))  # fmt: skip
_add("verdict-undecided", "verdict", "$.verdict", "A proof is there, so it is decided.",
     _put("ferry", verdict="undecided"))  # fmt: skip
_add("verdict-transcendental", "verdict", "$.verdict",
     "The claim says the opposite of what is proved.",
     _put("ferry", claim__asserts="transcendental"))  # fmt: skip
_add("verdict-closed-form", "verdict", "$.verdict",
     "A claim with a wrong closed form is refuted.",
     _put("misprint", verdict="proved"))  # fmt: skip
_add("not-prime-nine", "not-prime", "$.proof.squarefree_prime", "9 = 3 * 3.",
     _put("harbour-arches", proof__squarefree_prime="9"))  # fmt: skip
_add("not-prime-huge", "not-prime", "$.proof.lowest_terms_prime",
     "A prime that is too large to be proved one.",
     _put("drifting-pairs", proof__lowest_terms_prime=str(2**127 - 1)))  # fmt: skip
_add("not-prime-counter", "not-prime", "$.proof.counter_prime.p", "35 = 5 * 7.",
     _put("floating-lamps", proof__counter_prime__p="35"))  # fmt: skip
_add("not-prime-density", "not-prime", "$.proof.density.witnesses[0].p", "9 = 3 * 3.",
     _put("drifting-pairs", proof__density__witnesses__0__p="9"))  # fmt: skip
_add("bad-prime-leading-coefficient", "bad-prime", "$.proof.counter_prime.p",
     "5 divides the leading coefficient of 5x; x^(1/5) is algebraic.",
     lambda: certificate(
         claim("low-tide", "5*x", "1", asserts="transcendental"), "proved",
         refutation([("x", "1")], "2", [],
                    {"p": "5", "kind": "polynomial_part"}, None, "1/2")))  # fmt: skip
_add("bad-prime-density", "bad-prime", "$.proof.density.witnesses[0].p",
     "x^2 - x - 1 has a double root modulo 5.",
     _put("drifting-pairs", proof__density__witnesses__0__p="5"))  # fmt: skip
_add("partial-fractions-residues", "partial-fractions", "$.proof.partial_fractions",
     "A displayed residue that is not an exponent.",
     _put("harbour-arches", proof__partial_fractions__0__residue="1/3"))  # fmt: skip
_add("disagreement-residue-of-equation", "disagreement-residue",
     "$.proof.disagreement.residue_of_equation", "The equation's residue at 1 is 1/2.",
     _put("misprint", proof__disagreement__residue_of_equation="1/4"))  # fmt: skip
_add("disagreement-factor-of-equation", "disagreement-factor",
     "$.proof.disagreement.factor", "x^2 + x has one root at a pole and one elsewhere.",
     _put("stray-lamp", proof__disagreement__factor="x^2 + x"))  # fmt: skip
_add("witness-polynomial-part", "counter-prime-witness", "$.proof.counter_prime.kind",
     "1/(x^2 - x - 1) has no polynomial part modulo 3.",
     _put("drifting-pairs",
          proof__counter_prime={"p": "3", "kind": "polynomial_part"}))  # fmt: skip
_add("witness-multiple-pole", "counter-prime-witness", "$.proof.counter_prime.factor",
     "1 is a simple pole modulo 2.",
     _put("whirlpool", proof__counter_prime__factor="x + 1"))  # fmt: skip
_add("witness-factor", "counter-prime-witness", "$.proof.counter_prime.factor",
     "x^2 + 1 does not divide the denominator modulo 3.",
     _put("drifting-pairs", proof__counter_prime__factor="x^2 + 1"))  # fmt: skip
_add("witness-residue", "counter-prime-witness", "$.proof.counter_prime.residue",
     "The residue is off by one.",
     _put("drifting-pairs", proof__counter_prime__residue="x + 2"))  # fmt: skip
_add("witness-at-multiple-pole", "counter-prime-witness", "$.proof.counter_prime.factor",
     "x^2 divides the denominator, but a residue at a double pole is no quotient a/b'.",
     lambda: certificate(
         claim("eddy", "x^3", "x + 2", asserts="transcendental"), "proved",
         refutation([("x", "3")], "3", [multiple_pole("x", "3")],
                    outside("2", "x^2", "x"), None, "1")))  # fmt: skip
_add("quotient", "obstructions", "$.proof.obstructions[0].quotient",
     "The polynomial part is 1, not 2.",
     _put("floating-lamps", proof__obstructions__0__quotient="2"))  # fmt: skip
_add("no-polynomial-part", "obstructions", "$.proof.obstructions",
     "A polynomial part where there is none.",
     _put("drifting-pairs", proof__obstructions=[
         {"kind": "polynomial_part", "quotient": "1"}]))  # fmt: skip
_add("irrational-factor", "irrational-residue", "$.proof.obstructions[2].factor",
     "The residue polynomial is given for a factor with a multiple pole.",
     _put("every-trouble", proof__obstructions__2__factor="x"))  # fmt: skip
_add("irrational-polynomial", "irrational-residue",
     "$.proof.obstructions[0].residue_polynomial", "The residues are not roots of x^2 + 1.",
     _put("drifting-pairs", proof__obstructions__0__residue_polynomial="x^2 + 1"))  # fmt: skip
_add("irrational-too-large", "irrational-residue",
     "$.proof.obstructions[0].residue_polynomial",
     "A residue polynomial beyond the limit of the format.",
     _put("drifting-pairs",
          proof__obstructions__0__residue_polynomial="x^201 + x + 1",
          proof__obstructions__0__rootless_prime="2"))  # fmt: skip
_add("irrational-prime", "prime-divides-leading-coefficient",
     "$.proof.obstructions[0].rootless_prime", "5 divides the leading coefficient.",
     _put("drifting-pairs", proof__obstructions__0__rootless_prime="5"))  # fmt: skip
_add("density-bound", "density", "$.proof.density.bound", "1 - 1/2 is not 2/3.",
     _put("drifting-pairs", proof__density__bound="2/3"))  # fmt: skip
_add("density-all", "density", "$.proof.density",
     "With a double pole all primes but finitely many are counter-primes.",
     _put("whirlpool", proof__density__bound="1/2"))  # fmt: skip
_add("density-order", "density", "$.proof.density.witnesses[0].order",
     "An order beyond the limit of the format.",
     _put("drifting-pairs", proof__density__bound="1000/1001",
          proof__density__witnesses__0__order="1001"))  # fmt: skip
_add("density-reduction", "density", "$.proof.density.witnesses[0].order",
     "Modulo 2 the equation y' = 2y/(x^2 + x + 1) becomes y' = 0: no pole is left.",
     lambda: certificate(
         claim("slack-water", "x^2 + x + 1", "2", asserts="transcendental"), "proved",
         refutation([("x^2 + x + 1", "1")], "5",
                    [irrational("x^2 + x + 1", "3*x^2 + 4", "5")],
                    outside("5", "x^2 + x + 1", "2*x + 1"), None, "1/2",
                    ("2", "2"))))  # fmt: skip


AS_WRITTEN_DIFFERS = Tampered(
    "as-written-differs", "as-written-differs", "$.claim.as_written",
    "The author's text has 2x^2 where the equation has 3x^2; the proof is right for the "
    "equation. `certgen check` compares the two, `python -m certgen.checker` does not.",
    _put("harbour-arches", claim__as_written="y' = (2*x^2 - 1)/(2*(x^3 - x)) * y"),
)
"""The one tampering that the checker alone accepts: it does not read notation."""


# --------------------------------------------------------------------------
# texts that are not read at all


@dataclass(frozen=True)
class Unreadable:
    """A text that is refused before any mathematics, with its exit status."""

    name: str
    status: int
    wrong: str
    text: str


def _edited(name: str, old: str, new: str) -> str:
    text = stored(handmade(name))
    if text.count(old) < 1:
        raise ValueError(old)
    return text.replace(old, new, 1)


def _with(name: str, **values: object) -> str:
    return stored(_put(name, **values)())


UNREADABLE = [
    Unreadable("malformed-bare-number", 2, "The degree is a JSON number, not a string.",
               _edited("ferry", '"degree": "1"', '"degree": 1')),
    Unreadable("malformed-key-twice", 2, "The key `verdict` stands twice.",
               _edited("ferry", '"verdict": "proved"',
                       '"verdict": "proved",\n "verdict": "proved"')),
    Unreadable("malformed-spacing", 2, "An indent of two spaces is not canonical.",
               stored(handmade("ferry")).replace("\n ", "\n  ")),
    Unreadable("malformed-no-newline", 2, "The final newline is missing.",
               stored(handmade("ferry"))[:-1]),
    Unreadable("malformed-truncated", 2, "The second half is missing.",
               stored(handmade("ferry"))[:600]),
    Unreadable("malformed-unknown-key", 2, "A certificate does not vouch for itself.",
               _with("ferry", verified="true")),
    Unreadable("malformed-fraction", 2, "2/4 is not in lowest terms.",
               _with("harbour-arches", proof__solution__0__exponent="2/4")),
    Unreadable("malformed-polynomial", 2, "The terms are not in descending order.",
               _with("harbour-arches", proof__solution__0__base="-x + x^3")),
    Unreadable("unsupported-format", 4, "A format of another version.",
               _with("ferry", format="certgen/2")),
    Unreadable("unsupported-claim", 4, "A kind of claim of another version.",
               _with("ferry", claim__kind="tidal-wave")),
    Unreadable("unsupported-proof", 4, "A kind of proof of another version.",
               _with("ferry", proof__kind="divination")),
    Unreadable("limit-degree", 3, "A polynomial of degree 10^9.",
               _with("harbour-arches", proof__solution__0__base="x^1000000000 - x")),
]  # fmt: skip
