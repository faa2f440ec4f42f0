"""Published first-order equations, each record of truths/order_one.json with its source."""

from __future__ import annotations

import json
from fractions import Fraction
from pathlib import Path

import pytest
from flint import fmpz_poly

from certgen.certificate import AlgebraicSolution, NoAlgebraicSolution
from certgen.claim import FirstOrderEquation
from certgen.polynomial import Polynomial
from certgen.prover import prove
from certgen.prover.counter_prime import good_primes
from tests.first_order_samples import expand, make_claim

RECORDS = json.loads(
    (Path(__file__).parent / "truths" / "order_one.json").read_text(encoding="ascii")
)["records"]

LEFT_OUT: dict[str, str] = {}  # id -> reason; none is left out

ALGEBRAIC = [r for r in RECORDS if r["data"]["expected"]["algebraic"]]
TRANSCENDENTAL = [r for r in RECORDS if not r["data"]["expected"]["algebraic"]]


def _name(record: dict) -> str:
    return record["id"]


def _proof(record: dict):
    data = record["data"]
    equation = FirstOrderEquation(
        numerator=Polynomial.from_integers(data["r_num"]),
        denominator=Polynomial.from_integers(data["r_den"]),
    )
    return prove(make_claim(equation))


def test_no_record_is_forgotten() -> None:
    """All 30 records are used, 16 algebraic and 14 not, and each names its source."""
    assert (len(RECORDS), len(ALGEBRAIC), len(TRANSCENDENTAL)) == (30, 16, 14)
    assert not LEFT_OUT
    assert all(record["source"] for record in RECORDS)


@pytest.mark.parametrize("record", ALGEBRAIC, ids=_name)
def test_algebraic_record(record: dict) -> None:
    """Verdict, degree, residues and minimal polynomial are those of the source."""
    certificate = _proof(record)
    expected, proof = record["data"]["expected"], certificate.proof
    assert certificate.verdict == "proved"
    assert isinstance(proof, AlgebraicSolution)
    degree = expected["degree_over_Cx"]
    assert proof.degree == proof.minimal_polynomial.degree == degree
    residues = sorted(Fraction(text.split(" at ")[0]) for text in expected["residues"])
    assert sorted({power.exponent for power in proof.solution}) == sorted(set(residues))
    coefficients = expected["minpoly_coeffs_in_y"]
    assert set(coefficients) == {"0", str(degree)}
    ours = expand(proof.minimal_polynomial.numerator) * fmpz_poly(coefficients[str(degree)])
    theirs = expand(proof.minimal_polynomial.denominator) * fmpz_poly(coefficients["0"])
    scale = theirs.leading_coefficient(), ours.leading_coefficient()
    assert ours * scale[0] == theirs * scale[1]


@pytest.mark.parametrize("record", TRANSCENDENTAL, ids=_name)
def test_transcendental_record(record: dict) -> None:
    """Verdict, smallest counter-prime and the primes before it are those of the source."""
    certificate = _proof(record)
    expected, proof = record["data"]["expected"], certificate.proof
    assert certificate.verdict == "refuted"
    assert isinstance(proof, NoAlgebraicSolution)
    assert proof.counter_prime.p == expected["smallest_counter_prime"]
    b = fmpz_poly(record["data"]["r_den"])
    radical = b // b.gcd(b.derivative())
    before = []
    for p in good_primes(b, radical):
        if p >= proof.counter_prime.p:
            break
        before.append(p)
    assert before == expected["good_primes_with_zero_p_curvature_before_it"]
