"""Certificates written by hand, as plain JSON objects: the ground of the checker's tests.

Nothing here comes from the prover or the codec.  The canonical text and its digest
are recomputed from the rule of the format, the mathematics is judged by PARI in
`test_mutants`.  The equations are those of the invented town of Tarnhaven.
"""

from __future__ import annotations

import hashlib
import json
from copy import deepcopy
from typing import Any

Json = dict[str, Any]

CLAIM = "first-order-homogeneous"


def with_digest(obj: Json) -> Json:
    """The object with the digest of its compact text without the digest."""
    rest = {key: value for key, value in obj.items() if key != "digest"}
    compact = json.dumps(rest, sort_keys=True, ensure_ascii=True, separators=(",", ":"))
    return {**rest, "digest": hashlib.sha256(compact.encode("ascii")).hexdigest()}


def canonical(obj: Json) -> str:
    """The text of an object as it is stored."""
    return json.dumps(obj, sort_keys=True, ensure_ascii=True, indent=1) + "\n"


def stored(obj: Json) -> str:
    """The text of an object as it is stored, its digest recomputed."""
    return canonical(with_digest(obj))


def powers(*pairs: tuple[str, str]) -> list[Json]:
    return [{"base": base, "exponent": exponent} for base, exponent in pairs]


def claim(
    identifier: str,
    b: str,
    a: str,
    as_written: str | None = None,
    *,
    letters: str = "xy",
    solution: list[Json] | None = None,
    solution_as_written: str | None = None,
    **more: str,
) -> Json:
    """The claim about (b)*y' = (a)*y."""
    equation = f"({b})*y' = ({a})*y"
    return {
        "kind": CLAIM,
        "id": identifier,
        "equation": equation,
        "as_written": equation if as_written is None else as_written,
        "letters": {"variable": letters[0], "function": letters[1]},
        "asserts": "algebraic",
        "subject": "every solution",
        "solution": solution,
        "solution_as_written": solution_as_written,
        "title": None,
        "note": None,
        **more,
    }


def algebraic(
    solution: list[Json],
    partial_fractions: list[tuple[str, str]],
    degree: str,
    numerator: list[Json],
    denominator: list[Json],
    prime: str,
    eisenstein: tuple[str, str] | None,
) -> Json:
    return {
        "kind": "algebraic-solution",
        "solution": solution,
        "partial_fractions": [{"factor": f, "residue": r} for f, r in partial_fractions],
        "degree": degree,
        "minimal_polynomial": {
            "degree": degree, "numerator": numerator, "denominator": denominator,
        },
        "squarefree_prime": prime,
        "eisenstein": None
        if eisenstein is None
        else {"point": eisenstein[0], "constant": eisenstein[1]},
    }  # fmt: skip


def refutation(
    decomposition: list[tuple[str, str]],
    lowest_terms_prime: str,
    obstructions: list[Json],
    counter_prime: Json,
    p_curvature: str | None,
    bound: str,
    *witnesses: tuple[str, str],
) -> Json:
    return {
        "kind": "no-algebraic-solution",
        "squarefree_decomposition": [
            {"factor": f, "multiplicity": m} for f, m in decomposition
        ],
        "lowest_terms_prime": lowest_terms_prime,
        "obstructions": obstructions,
        "counter_prime": counter_prime,
        "p_curvature": None if p_curvature is None else {"numerator": p_curvature},
        "density": {
            "bound": bound, "witnesses": [{"p": p, "order": order} for p, order in witnesses],
        },
    }  # fmt: skip


def polynomial_part(quotient: str) -> Json:
    return {"kind": "polynomial_part", "quotient": quotient}


def multiple_pole(factor: str, order: str) -> Json:
    return {"kind": "multiple_pole", "factor": factor, "order": order}


def irrational(factor: str, residue_polynomial: str, rootless_prime: str) -> Json:
    return {
        "kind": "irrational_residue",
        "factor": factor,
        "residue_polynomial": residue_polynomial,
        "rootless_prime": rootless_prime,
    }


def outside(p: str, factor: str, residue: str) -> Json:
    return {
        "p": p, "kind": "residue_outside_prime_field", "factor": factor, "residue": residue,
    }  # fmt: skip


def certificate(claimed: Json, verdict: str, proof: Json) -> Json:
    return {"format": "certgen/1", "claim": claimed, "verdict": verdict, "proof": proof}


ARCHES = algebraic(
    powers(("x^3 - x", "1/2")),
    [("x - 1", "1/2"), ("x", "1/2"), ("x + 1", "1/2")],
    "2",
    powers(("x^3 - x", "1")),
    [],
    "3",
    ("2", "24"),
)
"""y = (x^3 - x)^(1/2): y'/y = (3x^2 - 1)/(2x^3 - 2x); 24 = 4*(2^3 - 2)."""


def _tagless(proof: Json) -> Json:
    return {key: value for key, value in proof.items() if key != "kind"}


_ALL = [
    certificate(
        claim("still-water", "1", "0", "y' = 0"),
        "proved",
        algebraic([], [], "1", [], [], "2", ("0", "1")),
    ),
    certificate(
        claim(
            "harbour-arches", "2*x^3 - 2*x", "3*x^2 - 1",
            "y' = (3*x^2 - 1)/(2*(x^3 - x)) * y", title="Arches a boat may pass",
        ),
        "proved",
        ARCHES,
    ),
    certificate(
        claim(
            "mixed-knots", "18*x^2 - 2*x", "3*x - 1", "dw/ds = (1/(2s) + 3/(1 - 9s)) w",
            letters="sw",
            solution=powers(("x", "1/2"), ("9*x - 1", "-1/3")),
            solution_as_written="s^(1/2) * (1 - 9*s)^(-1/3)",
            note="Square roots from the reef knots, cube roots from the bowlines.",
        ),
        "proved",
        algebraic(
            powers(("x", "1/2"), ("9*x - 1", "-1/3")),
            [("x", "1/2"), ("9*x - 1", "-1/3")],
            "6",
            powers(("x", "3")),
            powers(("9*x - 1", "2")),
            "2",
            ("1", "72"),
        ),
    ),
    certificate(
        claim("ferry", "2*x^2 - 3*x + 1", "-4*x + 3", "F'(z) = (1/(1-z) + 2/(1-2z)) F(z)",
              letters="zF"),
        "proved",
        algebraic(
            powers(("2*x^2 - 3*x + 1", "-1")),
            [("x - 1", "-1"), ("2*x - 1", "-1")],
            "1",
            [],
            powers(("2*x^2 - 3*x + 1", "1")),
            "3",
            ("0", "1"),
        ),
    ),
    certificate(
        claim("lantern-pairs", "4*x - 1", "-2", "(1-4x)\\,y'(x) = 2\\,y(x)",
              solution=powers(("4*x - 1", "-1/2")),
              solution_as_written="\\frac{1}{\\sqrt{1-4x}}"),
        "proved",
        algebraic(
            powers(("4*x - 1", "-1/2")), [("4*x - 1", "-1/2")], "2", [],
            powers(("4*x - 1", "1")), "3", ("0", "1"),
        ),
    ),
    certificate(
        claim("misprint", "2*x^3 - 2*x", "3*x^2 - 1", "y' = (3*x^2 - 1)/(2*(x^3 - x)) * y",
              solution=powers(("x", "1/2"), ("x^2 - 1", "1/3")),
              solution_as_written="x^(1/2) * (x^2 - 1)^(1/3)"),
        "refuted",
        {
            "kind": "closed-form-disagrees",
            "actual": _tagless(ARCHES),
            "disagreement": {
                "factor": "x - 1",
                "residue_of_equation": "1/2",
                "residue_of_closed_form": "1/3",
                "prime": "3",
            },
        },
    ),
    certificate(
        claim("stray-lamp", "2*x", "1", "y' = y/(2x)",
              solution=powers(("x", "1/2"), ("x^2 - 2*x + 1", "1/2")),
              solution_as_written="x^(1/2) * (x^2 - 2x + 1)^(1/2)"),
        "refuted",
        {
            "kind": "closed-form-disagrees",
            "actual": _tagless(
                algebraic(powers(("x", "1/2")), [("x", "1/2")], "2", powers(("x", "1")), [],
                          "2", ("1", "4"))
            ),
            "disagreement": {
                "factor": "x - 1",
                "residue_of_equation": "0",
                "residue_of_closed_form": "1",
                "prime": "2",
            },
        },
    ),
    certificate(
        claim("floating-lamps", "2*x", "2*x + 1", "y' = (1 + 1/(2*x)) * y",
              asserts="transcendental"),
        "proved",
        refutation(
            [("x", "1")], "3", [polynomial_part("1")],
            {"p": "3", "kind": "polynomial_part"}, "2*x", "1",
        ),
    ),
    certificate(
        claim("whirlpool", "x^3 - x^2", "-2*x - 1", "x^2 (1-x)\\,y' - (2x+1)\\,y = 0",
              asserts="transcendental"),
        "proved",
        refutation(
            [("x - 1", "1"), ("x", "2")], "2", [multiple_pole("x", "2")],
            {"p": "2", "kind": "multiple_pole", "factor": "x"}, "x + 1", "1",
        ),
    ),
    certificate(
        claim("drifting-pairs", "x^2 - x - 1", "1", "(x^2 - x - 1) D y = y",
              asserts="transcendental", subject="some solution"),
        "proved",
        refutation(
            [("x^2 - x - 1", "1")], "2", [irrational("x^2 - x - 1", "5*x^2 - 1", "3")],
            outside("3", "x^2 + 2*x + 2", "x + 1"), "2", "1/2", ("3", "2"),
        ),
    ),
    certificate(
        claim("three-currents", "x^3 - x - 1", "1", "y' = y/(x^3 - x - 1)",
              asserts="transcendental"),
        "proved",
        refutation(
            [("x^3 - x - 1", "1")], "2",
            [irrational("x^3 - x - 1", "23*x^3 + 3*x - 1", "2")],
            outside("2", "x^3 + x + 1", "x"), "x", "5/6", ("2", "3"), ("5", "2"),
        ),
    ),
    certificate(
        claim("hasty-claim", "x^2 - 2", "x + 1", "y' = (x + 1)/(x^2 - 2) * y"),
        "refuted",
        refutation(
            [("x^2 - 2", "1")], "2", [irrational("x^2 - 2", "8*x^2 - 8*x + 1", "3")],
            outside("3", "x^2 + 1", "x + 2"), "2", "1/2", ("3", "2"),
        ),
    ),
    certificate(
        claim("every-trouble", "2*x^4 - 4*x^2", "x^5 + x + 1", asserts="transcendental"),
        "proved",
        refutation(
            [("x", "2"), ("x^2 - 2", "1")], "3",
            [
                polynomial_part("1/2*x"),
                multiple_pole("x", "2"),
                irrational("x^2 - 2", "128*x^2 - 160*x + 49", "3"),
            ],
            {"p": "3", "kind": "polynomial_part"}, None, "1",
        ),
    ),
]  # fmt: skip

NAMES = tuple(obj["claim"]["id"] for obj in _ALL)


def handmade(name: str) -> Json:
    """A fresh copy of the certificate with this id, without a digest."""
    return deepcopy(next(obj for obj in _ALL if obj["claim"]["id"] == name))
