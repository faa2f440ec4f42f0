"""The invented note: it states the claims, includes the appendices and compiles."""

from __future__ import annotations

import json
import re
import shutil
from pathlib import Path
from typing import Any

import pytest

from certgen.claim import FirstOrderEquation
from certgen.notation import read_equation
from tests.latex_documents import complaints, run_pdflatex, text_of

SAMPLES = Path(__file__).parent.parent / "samples"
NOTE = (SAMPLES / "manuscript/note.tex").read_text(encoding="ascii")
STATED = dict(re.findall(r"\\item \\certificate\{([a-z-]*)\}:\s*\$([^$]*)\$", NOTE))


def _certificate(name: str) -> dict[str, Any]:
    stored: dict[str, Any] = json.loads((SAMPLES / "certificates" / f"{name}.json").read_text())
    return stored


def test_the_note_states_at_least_six_claims_and_includes_their_appendices() -> None:
    """Each claim that is stated has its appendix included, in the same order."""
    assert len(STATED) >= 6
    assert re.findall(r"\\input\{\.\./certificates/([a-z-]*)\}", NOTE) == list(STATED)


@pytest.mark.parametrize("name", STATED)
def test_the_equation_in_the_note_is_the_one_that_was_certified(name: str) -> None:
    """Read from the note in its notation, it is the stored equation; the claim is proved."""
    stored = _certificate(name)
    assert stored["verdict"] == "proved"
    found = read_equation(re.sub(r"\\[bB]ig[lr]", "", STATED[name])).equation
    assert isinstance(found, FirstOrderEquation)
    assert str(found) == stored["claim"]["equation"]


@pytest.mark.parametrize("name", STATED)
def test_the_note_and_the_certificates_give_the_same_numbers(name: str) -> None:
    """Degree or counter-prime as the note says, and in the proposition for its kind."""
    proof = _certificate(name)["proof"]
    after = NOTE[NOTE.index(rf"\item \certificate{{{name}}}") :]
    first = NOTE.index(r"\end{proposition}")
    if "degree" in proof:
        assert NOTE.index(rf"\item \certificate{{{name}}}") < first
        degree = re.search(r"degree(?:\s+is)?\s+\$(\d+)\$", after)
        assert degree is not None and degree[1] == proof["degree"]
    else:
        assert NOTE.index(rf"\item \certificate{{{name}}}") > first
        row = re.search(rf"\\texttt\{{{name}\}}.*& \$(\d+)\$", NOTE)
        assert row is not None and row[1] == proof["counter_prime"]["p"]


@pytest.mark.needs_pdflatex
@pytest.mark.needs_pdftotext
def test_the_note_compiles_without_any_complaint(tmp_path: Path) -> None:
    """Two pages and the appendices; no box, no reference, no warning."""
    shutil.copytree(SAMPLES, tmp_path / "samples")
    source = tmp_path / "samples/manuscript/note.tex"
    run_pdflatex(source)
    log = run_pdflatex(source)
    assert complaints(log) == []
    assert "Warning" not in log
    appendix = r"\contentsline {section}{\numberline {A}Certificates}{3}"
    assert appendix in source.with_suffix(".aux").read_text()
    text = text_of(source.with_suffix(".pdf"))
    for name in STATED:
        assert f"Certificate{name}." in text
        assert _certificate(name)["digest"] in text
    assert "??" not in text
