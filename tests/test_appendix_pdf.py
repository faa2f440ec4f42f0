"""Appendices through TeX: they compile, no box is over- or underfull, numbers arrive."""

from __future__ import annotations

import os
import random
import re
import subprocess
from pathlib import Path

import pytest

from certgen.api import certify
from certgen.appendix import build_pdf, standalone, typeset, typeset_many
from certgen.checker import CheckedCertificate, check
from certgen.errors import DefectError, FileError, LimitError
from certgen.polynomial import write_integer
from tests.handmade import NAMES, handmade, stored

CLASSES = {
    "one column": r"\documentclass{article}",
    "two columns": r"\documentclass[twocolumn]{article}",
    "amsart": r"\documentclass{amsart}",
}


def _polynomial(rng: random.Random, degree: int, size: int) -> str:
    terms = [f"({rng.randint(-size, size)})*x^{k}" for k in range(degree)]
    return " + ".join([*terms, f"{rng.randint(1, size)}*x^{degree}"])


def _equations() -> dict[str, str]:
    rng = random.Random(20)
    logs = " + ".join(
        f"{rng.randint(1, 5)}/{d}*({_derivative(c)})/({_written(c)})"
        for d, c in zip(
            (2, 3, 4, 5, 6, 7) * 2,
            [[rng.randint(1, 9) for _ in range(6)] for _ in range(12)],
            strict=True,
        )
    )
    return {
        "twelve-factors": f"y' = ({logs})*y",
        "long-digits": f"({_polynomial(rng, 2, 10**400)})*y' = (x + 10^399)*y",
        "degree-sixty": f"({_polynomial(rng, 60, 10**20)})*y'"
        f" = ({_polynomial(rng, 59, 10**20)})*y",
        "polynomial-part": f"({_polynomial(rng, 4, 99)})*y' = ({_polynomial(rng, 30, 99)})*y",
        "beyond-limits": f"y' = ({_polynomial(rng, 450, 9)})*y",
        "greek-letters": r"d\omega/dt = \frac{3}{7t} \omega",
        "clashing-letters": "(z^2-3)*p' = (z+1)*p",
    }


def _written(c: list[int]) -> str:
    return " + ".join(f"{v}*x^{k}" for k, v in enumerate(c))


def _derivative(c: list[int]) -> str:
    return " + ".join(f"{k * v}*x^{k - 1}" for k, v in enumerate(c) if k)


def handmade_checked() -> list[CheckedCertificate]:
    hard = handmade("ferry")
    hard["claim"].update(
        id="f" + "-very" * 12, title="W" * 150, note="wide " * 100 + "_^~\\{}%$#&" * 20
    )
    return [*(check(stored(handmade(name))) for name in NAMES), check(stored(hard))]


@pytest.fixture(scope="module")
def fragments() -> dict[str, str]:
    made = {item.certificate.claim.id: typeset(item) for item in handmade_checked()}
    for name, equation in _equations().items():
        made[name] = typeset(certify(equation, id=name).checked)
    made["many"] = typeset_many(handmade_checked())
    return made


def compiled(document: str, folder: Path) -> str:
    """The log of pdflatex; an error of TeX fails the test."""
    (folder / "paper.tex").write_text(document, encoding="ascii")
    done = subprocess.run(
        ["pdflatex", "-no-shell-escape", "-interaction=nonstopmode", "-halt-on-error",
         "paper.tex"],
        cwd=folder, capture_output=True, timeout=120, check=False,
    )  # fmt: skip
    log = (folder / "paper.log").read_text(encoding="latin-1")
    assert done.returncode == 0, re.findall(r"^!.*", log, re.MULTILINE)
    return log


@pytest.mark.needs_pdflatex
@pytest.mark.parametrize("name", CLASSES)
def test_no_box_is_overfull_or_underfull(
    name: str, fragments: dict[str, str], tmp_path: Path
) -> None:
    """Samples, 12 factors, 400 digits, degree 60: no box complaint, amsmath alone."""
    for key, fragment in fragments.items():
        log = compiled(
            f"{CLASSES[name]}\n\\usepackage{{amsmath}}\n\\begin{{document}}\nBefore.\n\n"
            f"{fragment}\nAfter.\n\\end{{document}}\n",
            tmp_path,
        )
        assert not re.findall(r"(?:Over|Under)full.*", log), key


@pytest.mark.needs_pdflatex
def test_two_fragments_live_in_one_paper(fragments: dict[str, str], tmp_path: Path) -> None:
    """The macros are provided twice, and nothing leaks out of a fragment."""
    body = "\n".join([fragments["ferry"], "Between.", fragments["whirlpool"]])
    marks = r"\newskip\before\before=\rightskip" + "\n"
    after = (
        "\n" r"\ifdim\before=\rightskip\else\errmessage{a skip has leaked}\fi"
        "\n" r"\ifnum\binoppenalty=10000 \errmessage{a penalty has leaked}\fi"
    )
    compiled(
        "\\documentclass{article}\n\\usepackage{amsmath}\n\\begin{document}\n"
        f"{marks}{body}{after}\n\\end{{document}}\n",
        tmp_path,
    )


@pytest.mark.needs_pdflatex
@pytest.mark.needs_pdftotext
def test_every_coefficient_is_found_in_the_text_of_the_pdf(tmp_path: Path) -> None:
    """Twenty-digit coefficients arrive in the PDF in their order, digit by digit."""
    item = certify(_equations()["degree-sixty"], id="degree-sixty").checked
    out = tmp_path / "out.pdf"
    build_pdf(standalone(typeset(item)), out)
    done = subprocess.run(
        ["pdftotext", "-raw", str(out), "-"], capture_output=True, check=True, timeout=60
    )
    digits = re.sub(rb"\s", b"", done.stdout)
    for side in (item.certificate.claim.equation.numerator,
                 item.certificate.claim.equation.denominator):  # fmt: skip
        position = 0
        for value in reversed(side.numerators):
            position = digits.find(write_integer(abs(value)).encode(), position)
            assert position >= 0, value


@pytest.mark.needs_pdflatex
def test_the_same_document_makes_the_same_pdf(tmp_path: Path) -> None:
    """No clock and no path gets into the PDF."""
    document = standalone(typeset(check(stored(handmade("ferry")))))
    build_pdf(document, tmp_path / "one.pdf")
    build_pdf(document, tmp_path / "two.pdf")
    one = (tmp_path / "one.pdf").read_bytes()
    assert one == (tmp_path / "two.pdf").read_bytes()
    assert one.startswith(b"%PDF") and str(tmp_path).encode() not in one
    assert sorted(p.name for p in tmp_path.iterdir()) == ["one.pdf", "two.pdf"]


@pytest.mark.needs_pdflatex
def test_a_document_that_does_not_compile_is_a_clear_error(tmp_path: Path) -> None:
    """The first error of TeX is shown, and no file appears."""
    with pytest.raises(DefectError, match="Undefined control sequence"):
        build_pdf(standalone("\\certgenunknown"), tmp_path / "out.pdf")
    assert not list(tmp_path.iterdir())


@pytest.mark.needs_pdflatex
def test_tex_reads_and_writes_nothing_outside_of_its_folder(tmp_path: Path) -> None:
    """Should a payload ever get through, TeX itself refuses."""
    secret = tmp_path / "secret.tex"
    secret.write_text("the secret")
    with pytest.raises(DefectError):
        build_pdf(standalone(rf"\input{{{secret}}}"), tmp_path / "out.pdf")
    target = tmp_path / "written.txt"
    leak = rf"\newwrite\w\immediate\openout\w={target}\immediate\write\w{{x}}"
    with pytest.raises(DefectError):
        build_pdf(standalone(leak), tmp_path / "out.pdf")
    build_pdf(standalone(rf"x\immediate\write18{{touch {target}}}"), tmp_path / "out.pdf")
    assert not target.exists()


@pytest.mark.needs_pdflatex
def test_tex_that_never_ends_is_stopped(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """A time limit stops it."""
    monkeypatch.setattr("certgen.appendix.document.SECONDS_LIMIT", 1)
    with pytest.raises(LimitError, match="1 seconds"):
        build_pdf(standalone(r"\def\x{\x}\x"), tmp_path / "out.pdf")


def test_without_pdflatex_the_message_says_what_to_install(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """A missing TeX is told with the packages to install."""
    monkeypatch.setenv("PATH", os.fspath(tmp_path))
    with pytest.raises(FileError, match="texlive-latex-recommended"):
        build_pdf(standalone("x"), tmp_path / "out.pdf")


def test_a_folder_that_does_not_exist_is_a_clear_error(
    tmp_path: Path, needs_pdflatex: None
) -> None:
    """The PDF cannot be written: which file, and why."""
    with pytest.raises(FileError, match=r"nowhere/out\.pdf"):
        build_pdf(standalone("x"), tmp_path / "nowhere" / "out.pdf")
