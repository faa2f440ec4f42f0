"""The samples are what this version makes of samples/claims.toml, byte for byte."""

from __future__ import annotations

import json
import re
import tomllib
from pathlib import Path

import pytest
import sympy

from certgen.cli import main

X = sympy.Symbol("x")

SAMPLES = Path(__file__).parent.parent / "samples"
STORED = SAMPLES / "certificates"
CLAIMS = tomllib.loads((SAMPLES / "claims.toml").read_text())["claim"]
IDS = [claim["id"] for claim in CLAIMS]

# From the stories in claims.toml, by hand: the claims that are wrong on purpose.
WRONG = {"hasty-claim", "misprint"}


@pytest.fixture(scope="module")
def made(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The samples as this version makes them; two claims are refuted, hence status 1."""
    folder = tmp_path_factory.mktemp("samples")
    assert main(["certify", str(SAMPLES / "claims.toml"), "--out", str(folder)]) == 1
    return folder


def test_the_stored_samples_are_what_certify_makes(made: Path) -> None:
    """The same names with the same bytes; nothing stale lies beside them."""
    new = {path.name: path.read_bytes() for path in made.iterdir()}
    stored = {path.name: path.read_bytes() for path in STORED.iterdir()}
    assert set(new) == {f"{name}.{kind}" for name in IDS for kind in ("json", "tex")}
    assert sorted(stored) == sorted(new)
    assert [name for name in new if new[name] != stored[name]] == []


def test_the_samples_cover_both_kinds_of_claims() -> None:
    """At least twelve claims, both assertions, both subjects, with title and note."""
    assert len(set(IDS)) == len(IDS) >= 12
    assert {claim.get("asserts", "algebraic") for claim in CLAIMS} == {
        "algebraic",
        "transcendental",
    }
    assert any(claim.get("subject") == "some solution" for claim in CLAIMS)
    assert all("title" in claim and "note" in claim for claim in CLAIMS)


@pytest.mark.parametrize("name", IDS)
def test_each_sample_has_the_verdict_of_its_story(name: str) -> None:
    """All claims hold but the two that are wrong on purpose."""
    verdict = json.loads((STORED / f"{name}.json").read_text())["verdict"]
    assert verdict == ("refuted" if name in WRONG else "proved")


@pytest.mark.parametrize("name", IDS)
def test_sympy_differentiates_the_solution_of_each_sample(name: str) -> None:
    """y = product base^exponent satisfies b*y' = a*y, by sympy's derivative.

    The polynomials are read coefficient by coefficient with the standard library.
    """
    stored = json.loads((STORED / f"{name}.json").read_text())
    proof = stored["proof"].get("actual", stored["proof"])
    match = re.fullmatch(r"\((.*)\)\*y' = \((.*)\)\*y", stored["claim"]["equation"])
    assert match is not None
    if "solution" not in proof:
        assert proof["kind"] == "no-algebraic-solution"
        return
    y = sympy.prod(
        polynomial(power["base"]) ** sympy.Rational(power["exponent"])
        for power in proof["solution"]
    )
    b, a = polynomial(match[1]), polynomial(match[2])
    assert sympy.simplify(sympy.together((b * sympy.diff(y, X) - a * y) / y)) == 0


def polynomial(text: str) -> sympy.Expr:
    """An integral polynomial of the strict notation, as a sympy expression."""
    total = sympy.Integer(0)
    for term in text.replace(" - ", " + -").split(" + "):
        match = re.fullmatch(r"(-?)([0-9]*)\*?(x?)\^?([0-9]*)", term)
        assert match is not None
        exponent = int(match[4] or 1) if match[3] else 0
        total += int(match[1] + (match[2] or "1")) * X**exponent
    return total


@pytest.mark.parametrize("arithmetic", ["plain", "flint", "both"])
def test_the_stored_samples_are_accepted(
    arithmetic: str, capsys: pytest.CaptureFixture[str]
) -> None:
    """By each arithmetic, in one summary line."""
    assert main(["check", str(STORED), "--arithmetic", arithmetic]) == 0
    proved = len(IDS) - len(WRONG)
    last = capsys.readouterr().out.splitlines()[-1]
    assert last == (
        f"{len(IDS)} files: {len(IDS)} accepted ({proved} proved, {len(WRONG)} refuted)"
    )
