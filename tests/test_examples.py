"""One table of examples, `handmade`, through prover, codec, checker and appendix.

The certificates of the table are written by hand; the prover has to find the same.
"""

from __future__ import annotations

import pytest

from certgen.appendix import typeset
from certgen.certificate import (
    AlgebraicSolution,
    ClosedFormDisagrees,
    MultiplePole,
    NoAlgebraicSolution,
    PolynomialPart,
)
from certgen.checker import check
from certgen.codec import read_certificate, write_certificate
from certgen.prover import prove
from tests.handmade import NAMES, handmade, stored


@pytest.mark.parametrize("name", NAMES)
def test_the_prover_finds_what_was_written_by_hand(name: str) -> None:
    """Same verdict, solution, degree, counter-prime and obstructions; accepted and typeset."""
    by_hand = read_certificate(stored(handmade(name))).certificate
    found = prove(by_hand.claim)
    checked = check(write_certificate(found), arithmetic="both")
    assert checked.certificate == found and found.verdict == by_hand.verdict
    assert name in typeset(checked)
    compare(found.proof, by_hand.proof)


def compare(found: object, by_hand: object) -> None:
    if isinstance(by_hand, ClosedFormDisagrees):
        assert isinstance(found, ClosedFormDisagrees)
        compare(found.actual, by_hand.actual)
    elif isinstance(by_hand, AlgebraicSolution):
        assert isinstance(found, AlgebraicSolution)
        assert found.solution == by_hand.solution and found.degree == by_hand.degree
        assert found.minimal_polynomial == by_hand.minimal_polynomial
    else:
        assert isinstance(found, NoAlgebraicSolution)
        assert isinstance(by_hand, NoAlgebraicSolution)
        assert found.counter_prime.p == by_hand.counter_prime.p
        assert complete(found) == complete(by_hand)


def complete(proof: NoAlgebraicSolution) -> list[object]:
    """The kinds of obstructions of which a certificate lists all."""
    return [o for o in proof.obstructions if isinstance(o, PolynomialPart | MultiplePole)]
