"""LaTeXML, which makes the HTML of preprint servers, converts the appendices."""

from __future__ import annotations

import re
import subprocess
from pathlib import Path
from xml.etree import ElementTree

import pytest

from certgen.api import load
from certgen.certificate import (
    AlgebraicSolution,
    ClosedFormDisagrees,
    NoAlgebraicSolution,
)
from tests.latex_documents import paper

STORED = Path(__file__).parent.parent / "samples/certificates"
SAMPLES = {
    "five-ropes": AlgebraicSolution,
    "still-water": AlgebraicSolution,
    "misprint": ClosedFormDisagrees,
    "hasty-claim": NoAlgebraicSolution,
    "whirlpool": NoAlgebraicSolution,
    "floating-lamps": NoAlgebraicSolution,
}


def converted(document: str, folder: Path) -> tuple[list[str], ElementTree.Element]:
    """The problems that LaTeXML names, and the XML that it made.

    A formula that TeX sets in pieces is called "not_parsed": it is shown as it is,
    and that is no problem here.
    """
    source, out = folder / "paper.tex", folder / "paper.xml"
    source.write_text(document, encoding="ascii")
    subprocess.run(
        ["latexml", f"--dest={out}", f"--log={folder / 'log'}", str(source)],
        cwd=folder, capture_output=True, timeout=120, check=False,
    )  # fmt: skip
    log = (folder / "log").read_text(encoding="utf-8")
    problems = re.findall(r"^(?:Warning|Error|Fatal):(?!not_parsed:).*", log, re.MULTILINE)
    return problems, ElementTree.parse(out).getroot()


@pytest.mark.needs_latexml
@pytest.mark.parametrize("name", SAMPLES)
def test_an_appendix_is_converted_without_any_problem(name: str, tmp_path: Path) -> None:
    """No warning and no error, nothing marked as one, and what matters is there."""
    item = load(STORED / f"{name}.json")
    assert isinstance(item.certificate.proof, SAMPLES[name])
    problems, root = converted(paper("article", item.appendix()), tmp_path)
    assert problems == []
    assert not [e for e in root.iter() if e.tag.endswith("}ERROR")]
    text = " ".join("".join(root.itertext()).split())
    assert f"This claim is {item.verdict}." in text
    assert item.digest in text.replace(" ", "")
    assert "This certificate supports refereeing and never replaces it." in text
    formulas = " ".join(e.get("tex", "") for e in root.iter() if e.tag.endswith("}Math"))
    numbers = set(re.findall(r"\d+", re.sub(r"%\s*", "", formulas)))
    for value in item.claim.equation.denominator.numerators:
        assert abs(value) < 2 or str(abs(value)) in numbers


@pytest.mark.needs_latexml
def test_an_unknown_macro_is_seen(tmp_path: Path) -> None:
    """Control: LaTeXML tells of a macro that nobody defined, and marks it."""
    problems, root = converted(paper("article", "$\\certgenunknown$"), tmp_path)
    assert len(problems) == 1 and problems[0].startswith("Error:undefined:")
    assert [e for e in root.iter() if e.tag.endswith("}ERROR")]
