r"""The printed spot checks of the sample appendices, recomputed by PARI.

What is printed is read from the LaTeX fragment; what it should be is computed by
gp from the equation and the solution in the stored certificate alone.
"""

from __future__ import annotations

import json
import re
import subprocess
from collections import Counter
from collections.abc import Sequence
from itertools import pairwise
from pathlib import Path
from typing import Any

import pytest

from certgen.api import load
from certgen.certificate import IrrationalResidue, NoAlgebraicSolution
from certgen.checker.facts import NoAlgebraicFacts

FOLDER = Path(__file__).parent.parent / "samples/certificates"
FILES = sorted(FOLDER.glob("*.json"))
_EQUATION = re.compile(r"\((.*)\)\*y' = \((.*)\)\*y")

pytestmark = pytest.mark.needs_gp


def gp(expressions: Sequence[str]) -> list[str]:
    """The values of all expressions, by one gp process."""
    lines = [f'print("value: ", {text})' for text in expressions]
    done = subprocess.run(
        ["gp", "-q", "-f"], input="\n".join([*lines, "\\q", ""]),
        capture_output=True, text=True, timeout=120, check=True,
    )  # fmt: skip
    prefix = "value: "
    values = [s[len(prefix) :] for s in done.stdout.splitlines() if s.startswith(prefix)]
    assert len(values) == len(expressions), done.stderr
    return values


def fragment_of(path: Path) -> str:
    """The fragment in one line, without places to break."""
    text = re.sub(r"%\n\s*", "", load(path).appendix())
    text = " ".join(re.sub(r"\\certgen(?:break|digits)\b ?", "", text).split())
    # a tagged number is a formula of its own: join it with its neighbours
    text = re.sub(r"\\certgenformula\{[a-z0-9-]+\}\{([-\d]+)\}", r"$\1$", text)
    return re.sub(r"\$ ?\$", "", text).replace("{}", "")


def chains(text: str) -> list[tuple[str, list[str]]]:
    """Every `$... = n = n ...$`: what stands before the first number, and the numbers."""
    out = []
    for formula in re.findall(r"\$([^$]*)\$", text):
        sides = [side.strip() for side in re.split(r"=", formula)]
        numbers = [s for s in (_arithmetic(side) for side in sides) if s]
        if numbers and len(sides) > 1:
            name = "" if _arithmetic(sides[0]) else sides[0].replace(r"\,", "").replace(" ", "")
            out.append((name, numbers))
    return out


def _arithmetic(side: str) -> str | None:
    """The side in the notation of PARI if it is made of integers only."""
    text = re.sub(r"\\,|\\certgenformula\{[a-z0-9-]*\}", "", side.rstrip(".,;: "))
    text = text.replace(r"\cdot", "*")
    return text if re.fullmatch(r"[-+*^()\d\s]*\d[-+*^()\d\s]*", text) else None


def spot_passage(text: str) -> tuple[str, str] | None:
    """The point of Step 2's spot check and the text that belongs to it."""
    match = re.search(r"Spot check at \$[^=$]*= ?(-?\d+)\$(.*?)\\certgenstep", text)
    return None if match is None else (match[1], match[2])


def solution_of(obj: dict[str, Any]) -> list[dict[str, str]]:
    proof = obj["proof"].get("actual", obj["proof"])
    return list(proof.get("solution", []))


def equation_of(obj: dict[str, Any]) -> tuple[str, str]:
    """(a, b) of the stored equation."""
    match = _EQUATION.fullmatch(obj["claim"]["equation"])
    assert match is not None
    return match[2], match[1]


def spot_question(obj: dict[str, Any], point: str) -> str:
    """a, b, N*a, the bases, their derivatives and the terms at the point, for gp."""
    a, b = equation_of(obj)
    solution = solution_of(obj)
    bases = ", ".join(power["base"] for power in solution)
    exponents = ", ".join(power["exponent"] for power in solution)
    return (
        f"my(v = [{bases}], e = [{exponents}], N = denominator(e), V = vecprod(v)); "
        f"subst(concat([[{a}, {b}, N * ({a})], v, v', "
        f"vector(#v, i, N * e[i] * v[i]' * V / v[i])]), x, {point})"
    )


def integers(answer: str) -> list[int]:
    return [int(text) for text in answer.strip("[]").split(",")]


def test_pari_finds_every_spot_value() -> None:
    """a, b, each base, its derivative and each term at the printed point."""
    names, questions, passages = [], [], []
    for path in FILES:
        obj = json.loads(path.read_text())
        found, solution = spot_passage(fragment_of(path)), solution_of(obj)
        assert (found is not None) == bool(solution), path.name
        if found is not None:
            point, passage = found
            named = dict(chains(passage))
            names.append((path.name, len(solution)))
            passages.append(passage)
            questions.append(spot_question(obj, point))
            questions.append(f"[{', '.join(named['b'])}]")
            questions.append(f"[{', '.join(named['Na'])}]")
    assert len(names) >= 9
    answers = list(map(integers, gp(questions)))
    for k, (name, count) in enumerate(names):
        (_, bottom, total, *rest), shown_b, shown_na = answers[3 * k : 3 * k + 3]
        assert len(shown_b) >= 2 and set(shown_b) == {bottom}, name
        assert len(shown_na) >= 2 and set(shown_na) == {total}, name
        numbers = Counter(
            int(n) for n in re.findall(r"(?<![\d.{_])-?\d+(?![\d.]*em)", passages[k])
        )
        wanted = Counter(rest if count > 1 else rest[:2])  # one base has no term of its own
        assert wanted <= numbers, name


def test_pari_finds_every_spot_value_of_the_residues() -> None:
    """R(A/B) with its denominator cleared is g times the cofactor, at the point too."""
    questions = []
    for path in FILES:
        item = load(path).checked
        proof, facts = item.certificate.proof, item.facts
        if not isinstance(facts, NoAlgebraicFacts):
            continue
        assert isinstance(proof, NoAlgebraicSolution)
        a, b = equation_of(json.loads(path.read_text()))
        those = [o for o in proof.obstructions if isinstance(o, IrrationalResidue)]
        for o, fact in zip(those, facts.irrational, strict=True):
            spot = fact.spot
            questions.append(
                f"my(g = {o.factor}, R = {o.residue_polynomial}, A = {fact.numerator}, "
                f"B = {fact.derivative}, n = poldegree(R), C = {fact.cofactor}, "
                f"T = sum(k = 0, n, polcoeff(R, k) * A^k * B^(n - k))); "
                f"[(A * ({b})' - B * ({a})) % g == 0, T == g * C, "
                f"subst([A, B, T, g, C], x, {spot.point}) == [{spot.numerator}, "
                f"{spot.derivative}, {spot.total}, {spot.factor}, {spot.cofactor}]]"
            )
    assert len(questions) >= 4
    assert set(gp(questions)) == {"[1, 1, 1]"}


def test_every_printed_chain_of_numbers_is_true() -> None:
    """Wherever a page says n = m with numbers written out, PARI finds them equal."""
    found = [
        (path.name, left, right)
        for path in FILES
        for _, numbers in chains(fragment_of(path))
        for left, right in pairwise(numbers)
    ]
    assert len(found) >= 20
    answers = gp([f"({left}) == ({right})" for _, left, right in found])
    assert [f for f, answer in zip(found, answers, strict=True) if answer != "1"] == []


def test_a_wrong_number_is_seen() -> None:
    """Control: chains are read as they stand, and PARI tells a wrong one."""
    text = r"$b = 68 = 2\cdot 2\cdot 17$, $N\,a = 6 \cdot 5 = 2\cdot (51 -36)$, $n = x$"
    read = chains(text)
    assert [name for name, _ in read] == ["b", "Na"]
    assert read[1][1] == ["6 * 5", "2* (51 -36)"]
    assert gp(["(6 * 5) == (2* (51 -36))", "(6 * 5) == (2* (51 -35))"]) == ["1", "0"]
