"""Every single-field change of a certificate is rejected, or as true as before.

PARI says what is true; the mutants come from `mutants`, the certificates from
`handmade` and from the samples.  Two stand-ins for a checker show that the mutants
would find a checker that does not check.
"""

from __future__ import annotations

import json
from collections import Counter
from collections.abc import Callable
from functools import cache
from pathlib import Path

import pytest

from certgen.checker import check
from certgen.codec import read_certificate
from certgen.errors import CertgenError, RejectedError
from tests.handmade import NAMES, Json, handmade, stored, with_digest
from tests.mutants import (
    AUTHORS_WORDS,
    Mutant,
    read_coefficients,
    single_field_mutants,
    transplants,
    write_coefficients,
)
from tests.pari_judge import judge_all, judge_is_true

SAMPLES = sorted((Path(__file__).parents[1] / "samples" / "certificates").glob("*.json"))
SIZE = 40_000  # larger samples have too many fields for one test


def _sources() -> dict[str, Json]:
    out = {name: handmade(name) for name in NAMES}
    for path in SAMPLES:
        if path.stem not in NAMES and path.stat().st_size <= SIZE:
            obj = json.loads(path.read_text(encoding="ascii"))
            del obj["digest"]
            out[f"samples/{path.stem}"] = obj
    return out


SOURCES = _sources()


@cache
def mutants(name: str) -> tuple[Mutant, ...]:
    others = [handmade(other) for other in NAMES]
    return (*single_field_mutants(SOURCES[name]), *transplants(SOURCES[name], others))


def checked(obj: Json) -> str:
    """"" when both arithmetics accept, else the code or the kind of refusal."""
    try:
        check(stored(obj), arithmetic="both")
    except RejectedError as error:
        return error.code
    except CertgenError as error:
        return type(error).__name__
    return ""


def parsed(obj: Json) -> str:
    """A stand-in that only reads the text."""
    try:
        read_certificate(stored(obj))
    except CertgenError as error:
        return type(error).__name__
    return ""


def waved_through(obj: Json) -> str:
    """A stand-in that accepts everything."""
    return ""


@pytest.mark.needs_gp
def test_the_certificates_themselves_are_true() -> None:
    """Control of the judge: PARI finds every unchanged certificate true."""
    assert dict(zip(SOURCES, judge_all(SOURCES.values()), strict=True)) == dict.fromkeys(
        SOURCES, ""
    )


@pytest.mark.needs_gp
@pytest.mark.parametrize("name", SOURCES)
def test_every_mutant_is_rejected_or_equally_true(name: str) -> None:
    """Each with its control: before the change the same text is accepted."""
    accepted, refusals = [], Counter[str]()
    control = stored(SOURCES[name])
    for mutant in mutants(name):
        check(control, arithmetic="flint")
        answer = checked(mutant.obj)
        refusals[answer] += 1
        if not answer and mutant.path not in AUTHORS_WORDS:
            accepted.append(mutant)
    verdicts = judge_all(mutant.obj for mutant in accepted)
    wrong = [(m.path, m.what, v) for m, v in zip(accepted, verdicts, strict=True) if v]
    assert wrong == []
    total, words = sum(refusals.values()), refusals[""] - len(accepted)
    print(f"{name}: {total} mutants, {total - refusals['']} refused "
          f"({len(refusals) - 1} ways), {len(accepted)} equally true, {words} author's words")
    assert total >= 250
    assert total - refusals[""] >= 0.85 * total
    assert len(refusals) >= 6


def test_the_author_s_words_change_nothing_but_themselves() -> None:
    """Title, note, id and letters may change; the digest follows, the mathematics stays."""
    for name in NAMES:
        for mutant in mutants(name):
            if mutant.path in AUTHORS_WORDS and not checked(mutant.obj):
                changed = check(stored(mutant.obj), arithmetic="plain")
                before = check(stored(SOURCES[name]), arithmetic="plain")
                assert changed.facts == before.facts
                assert changed.digest != before.digest


def test_the_mutants_are_many_and_different() -> None:
    """At least 6,500 in all; none equals its certificate; all fields are reached."""
    total = 0
    for name in NAMES:
        texts = {stored(mutant.obj) for mutant in mutants(name)}
        assert stored(SOURCES[name]) not in texts
        total += len(texts)
        paths = {mutant.path for mutant in mutants(name)}
        assert _paths(SOURCES[name], "$") <= paths
    print(f"{total} different mutants of {len(NAMES)} certificates")
    assert total >= 6_500


def _paths(value: object, path: str) -> set[str]:
    if isinstance(value, dict):
        return {path}.union(*(_paths(v, f"{path}.{k}") for k, v in value.items()))
    if isinstance(value, list):
        return {path}.union(*(_paths(v, f"{path}[{i}]") for i, v in enumerate(value)))
    return {path}


@pytest.mark.needs_gp
@pytest.mark.parametrize("stand_in", [waved_through, parsed])
def test_the_mutants_find_a_checker_that_does_not_check(
    stand_in: Callable[[Json], str],
) -> None:
    """What the stand-in accepts and PARI calls false: some of it for every certificate."""
    for name in NAMES:
        readable = [m for m in mutants(name) if not parsed(m.obj)]
        assert stand_in(SOURCES[name]) == ""
        let_through = [m for m in readable if not stand_in(m.obj)]
        false = [v for v in judge_all(m.obj for m in let_through) if v]
        assert len(false) >= 10, name


@pytest.mark.needs_gp
def test_the_judge_calls_lies_by_their_names() -> None:
    """Control of the judge: it is no stand-in itself."""
    lies = {
        "harbour-arches": [
            ("squarefree_prime", "9", "squarefree prime"), ("degree", "4", "degree"),
            ("eisenstein", {"point": "2", "constant": "23"}, "eisenstein"),
            ("partial_fractions", [], "partial fractions"),
            ("solution", [{"base": "x^3 - x", "exponent": "1/3"}], "solution"),
        ],
        "drifting-pairs": [
            ("lowest_terms_prime", "4", "lowest terms"),
            ("p_curvature", {"numerator": "1"}, "p-curvature"),
            ("density", {"bound": "2/3", "witnesses": []}, "density"),
            ("counter_prime", {"p": "7", "kind": "polynomial_part"}, "smallest"),
            ("counter_prime", {"p": "3", "kind": "polynomial_part"}, "witness"),
            ("counter_prime", {"p": "5", "kind": "polynomial_part"}, "counter-prime"),
        ],
    }  # fmt: skip
    for name, changes in lies.items():
        for key, value, what in changes:
            obj = handmade(name)
            obj["proof"][key] = value
            assert judge_all([obj]) == [what]
    obj = handmade("ferry")
    assert judge_is_true(obj)
    obj["verdict"] = "refuted"
    assert not judge_is_true(obj)


def test_the_generator_reads_and_writes_polynomials() -> None:
    """Its own little reader and writer, by hand."""
    for text in ("-3/2*x^2 + x - 1", "0", "5", "-x^3 - 4", "2*x", "23*x^3 + 3*x - 1", "-x"):
        assert write_coefficients(read_coefficients(text)) == text
    assert read_coefficients("-3/2*x^2 + x - 1") == [-1, 1, -1.5]


def test_mutants_leave_the_certificate_alone() -> None:
    """The object that is mutated stays as it was."""
    for name in NAMES:
        assert with_digest(SOURCES[name]) == with_digest(handmade(name))
