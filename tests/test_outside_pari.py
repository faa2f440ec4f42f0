"""PARI judges the prover: factorisation, residues, gcds and series are PARI's, not ours."""

from __future__ import annotations

import json
import random
import subprocess
from collections import Counter
from collections.abc import Sequence
from functools import cache

import pytest
from flint import fmpq_poly

from certgen.certificate import AlgebraicSolution, Certificate, NoAlgebraicSolution
from certgen.claim import FirstOrderEquation
from certgen.prover import prove
from tests.first_order_samples import (
    logarithmic_derivative,
    make_claim,
    make_equation,
    random_base,
    random_factors,
)

pytestmark = pytest.mark.needs_gp

COUNT = 360

GP = r"""
residue(a, b, f) = Mod(a, f) / Mod(deriv(b, x), f);
vanishes(a, b, p) = {
  my(A = a*Mod(1, p), B = b*Mod(1, p), g = gcd(A, B));
  if (A == 0, return(1));
  A = A/g; B = B/g;
  if (poldegree(A) >= poldegree(B), return(0));
  if (poldegree(gcd(B, B')) > 0, return(0));
  my(F = factor(B)[,1]);
  for (i = 1, #F, if (poldegree(lift(residue(A, B, F[i]))) > 0, return(0)));
  1
};
disc(v) = if (poldegree(v) <= 1, 1, poldisc(v));
isgood(b, p) = pollead(b) % p && disc(b/gcd(b, b')) % p;
counterprime(a, b) = forprime(p = 2,, if (isgood(b, p) && !vanishes(a, b, p), return(p)));
judge(a, b) = {
  my(F, s, ok = 1, L = List());
  if (gcd(a, b) != 1, print("not reduced"); return);
  ok = poldegree(a) < poldegree(b) && issquarefree(b);
  F = if (ok, factor(b)[,1], []);
  for (i = 1, #F,
    s = lift(residue(a, b, F[i]));
    if (poldegree(s) > 0, ok = 0; break);
    s = polcoef(s, 0);
    listput(L, [Vecrev(F[i]/content(F[i])*sign(pollead(F[i]))), numerator(s), denominator(s)]));
  if (ok, print("1 ", Vec(L)), print("0 ", counterprime(a, b)));
};
integral(powers, point, L) = {
  my(y = 1 + O(x^30), v);
  for (i = 1, #powers,
    v = subst(powers[i][1], x, point + L*x);
    y *= (v/polcoef(v, 0) + O(x^30))^powers[i][2]);
  print(denominator(Vec(y)) == 1)
};
"""


def _pol(coefficients: Sequence[int]) -> str:
    return f"Pol({list(reversed(coefficients))})"


def _gp(lines: list[str]) -> list[str]:
    done = subprocess.run(
        ["gp", "-q", "-f"],
        input=GP + "\n".join(lines) + "\nquit\n",
        capture_output=True,
        text=True,
        timeout=120,
        check=True,
    )
    assert done.stderr == ""
    return done.stdout.splitlines()


def _with_disturbance(rng: random.Random, kind: int) -> FirstOrderEquation:
    """A random product of powers whose equation is disturbed in one of four ways."""
    top, bottom = logarithmic_derivative(random_factors(rng, rng.randint(0, 3), 3))
    if kind == 0:  # a polynomial part
        part = fmpq_poly(random_base(rng, rng.randint(0, 2)))
        return make_equation(top + part * bottom, bottom)
    if kind == 1:  # a multiple pole
        v = fmpq_poly(random_base(rng, rng.randint(1, 2))) ** rng.randint(2, 3)
    elif kind == 2:  # the residues of 1/(x^2 - n)
        v = fmpq_poly([-rng.choice([2, 3, 5, 6, 7, 10, 1009]), 0, 1])
    else:  # anything
        v = fmpq_poly(random_base(rng, rng.randint(1, 5)))
    return make_equation(top * v + rng.randint(1, 6) * bottom, bottom * v)


@cache
def _equations() -> list[FirstOrderEquation]:
    rng = random.Random(20)
    plain = [
        make_equation(*logarithmic_derivative(random_factors(rng, rng.randint(1, 6), 4)))
        for _ in range(COUNT // 2)
    ]
    return plain + [_with_disturbance(rng, k % 4) for k in range(COUNT - len(plain))]


@cache
def _certificates() -> list[Certificate]:
    return [prove(make_claim(equation)) for equation in _equations()]


def _stated(certificate: Certificate) -> tuple[int, object]:
    """What our certificate says, in the form in which PARI answers."""
    proof = certificate.proof
    if isinstance(proof, NoAlgebraicSolution):
        return 0, proof.counter_prime.p
    assert isinstance(proof, AlgebraicSolution)
    return 1, sorted(
        [list(t.factor.numerators), t.residue.numerator, t.residue.denominator]
        for t in proof.partial_fractions
    )


def test_verdicts_residues_and_counter_primes() -> None:
    """On 360 random equations PARI finds the same verdict, the same irreducible factors
    with the same residues, and the same smallest counter-prime."""
    answers = _gp(
        [
            f"judge({_pol(e.numerator.numerators)}, {_pol(e.denominator.numerators)})"
            for e in _equations()
        ]
    )
    judged = [(int(a[0]), json.loads(a[2:])) for a in answers]
    judged = [(kind, sorted(data) if kind else data) for kind, data in judged]
    assert [_stated(c) for c in _certificates()] == judged
    counts = Counter(kind for kind, _ in judged)
    assert len(judged) == COUNT >= 300 and min(counts[0], counts[1]) >= 100


def test_eisenstein_constants() -> None:
    """PARI expands each algebraic solution at x0 + L*t: 30 integer coefficients."""
    lines = []
    for certificate in _certificates():
        proof = certificate.proof
        if isinstance(proof, AlgebraicSolution) and proof.eisenstein is not None:
            powers = ", ".join(
                f"[{_pol(power.base.numerators)}, {power.exponent}]" for power in proof.solution
            )
            point, constant = proof.eisenstein.point, proof.eisenstein.constant
            lines.append(f"integral([{powers}], {point}, {constant})")
    assert len(lines) >= 100
    assert set(_gp(lines)) == {"1"}


def test_the_judge_can_refuse() -> None:
    """(1 - 4x)^(1/2) has integer coefficients at 0, and with x/4 instead of x it has not."""
    assert _gp(["integral([[1 - 4*x, 1/2]], 0, 1)", "integral([[1 - 4*x, 1/2]], 0, 1/4)"]) == [
        "1",
        "0",
    ]
