"""The Python interface: every way in, one certificate out."""

from __future__ import annotations

import dataclasses
from pathlib import Path
from typing import Any

import pytest
import sympy
from sympy.abc import x, y, z

import certgen
from certgen.certificate import AlgebraicSolution, Certificate
from certgen.errors import (
    CertgenError,
    ClaimError,
    DefectError,
    FileError,
    LimitError,
    MalformedError,
    RejectedError,
)
from certgen.sympy_notation import is_sympy, write_equation

f = sympy.Function("f")
u = sympy.Function("u")

# (1 - 4x) y' = 2y, by hand: the solutions are c*(1 - 4x)^(-1/2), of degree 2
PAIRS = "(4*x - 1)*y' = (-2)*y"
WAYS_IN: list[Any] = [
    "(1 - 4*x)*y' = 2*y",
    r"y'(x) = \frac{2}{1-4x}\,y(x)",
    2 / (1 - 4 * x),
    sympy.Eq((1 - 4 * x) * f(x).diff(x), 2 * f(x)),
    sympy.Eq(f(x).diff(x) / f(x), 2 / (1 - 4 * x)),
    (1 - 4 * z) * u(z).diff(z) - 2 * u(z),
    2 / (1 - 4 * y),
]


@pytest.mark.parametrize("claim", WAYS_IN, ids=str)
def test_all_ways_in_lead_to_the_same_claim(claim: object) -> None:
    """Text, LaTeX, a sympy r and sympy equations: one canonical equation, one id."""
    result = certgen.certify(claim)
    assert str(result.claim.equation) == PAIRS
    assert result.claim.id == certgen.certify("(1 - 4*x)*y' = 2*y").claim.id
    assert result.verdict == "proved"
    proof = result.certificate.proof
    assert isinstance(proof, AlgebraicSolution)
    assert proof.degree == 2


def test_a_claim_object_is_taken_as_it_is() -> None:
    """Its id and its text stay; keywords beside it are refused, not ignored."""
    claim = certgen.certify("y' = y", id="growth", asserts="transcendental").claim
    assert certgen.certify(claim).claim == claim
    with pytest.raises(ClaimError, match="its own id, note"):
        certgen.certify(claim, id="other", note="n")


def test_the_keywords_are_those_of_a_claims_file() -> None:
    """Each reaches the claim; a wrong closed form is refuted."""
    result = certgen.certify(
        "u'(t) = 9/(1 - 27t) u(t)",
        id="cubic", subject="some solution", solution=r"\frac{1}{\sqrt[3]{1-27t}}",
        title="T", note="N",
    )  # fmt: skip
    claim = result.claim
    assert (claim.id, claim.subject, claim.title, claim.note) == (
        "cubic", "some solution", "T", "N",
    )  # fmt: skip
    assert result.verdict == "proved"
    assert certgen.certify("y' = y/(3*x)", solution="x^(1/2)").verdict == "refuted"
    assert certgen.certify("y' = y").verdict == "refuted"
    assert certgen.certify("y' = y", asserts="transcendental").verdict == "proved"


@pytest.mark.parametrize("claim", [17, None, b"y' = y", 1.5, ["y' = y"]])
def test_other_types_are_refused_by_name(claim: object) -> None:
    """The message says what was given and what is taken."""
    with pytest.raises(ClaimError, match=type(claim).__name__):
        certgen.certify(claim)


def test_a_keyword_that_is_no_text_is_refused() -> None:
    """Before anything reads it."""
    with pytest.raises(ClaimError, match="title must be a text, not int"):
        certgen.certify("y' = y", title=3)  # type: ignore[arg-type]


REFUSED: list[tuple[Any, str]] = [
    (0.5 / x, "floating-point"),
    (sympy.pi / x, "pi"),
    (sympy.sqrt(2) / x, "not built from rational numbers"),
    (sympy.sqrt(x), "not built from rational numbers"),
    (sympy.I / x, "not built from rational numbers"),
    (sympy.sin(x), "not built from rational numbers"),
    (sympy.zoo, "not built from rational numbers"),
    (sympy.nan, "not built from rational numbers"),
    (x**y, "not built from rational numbers"),
    (x / y, "two symbols"),
    (sympy.Eq(f(x).diff(x), u(x)), "two functions"),
    (sympy.Eq(x, 2 * x, evaluate=False), "no unknown function"),
    (sympy.true, "has become 'True'"),
    (sympy.Lt(f(x), x), "not built from rational numbers"),
    (f(2) + f(x).diff(x), "not a function of one symbol"),
    (f(x, y) - x, "not a function of one symbol"),
    (sympy.Derivative(x * f(x), x) - f(x), "not a derivative of the unknown function"),
    (f(x).diff(x, 40) - f(x), "order 40"),
    (sympy.Symbol("x + 1"), "not one letter"),
    (sympy.Symbol("__import__('os')"), "not one letter"),
    (sympy.Function("y'")(x) - x, "not one letter"),
]


@pytest.mark.parametrize(("value", "message"), REFUSED, ids=str)
def test_what_is_not_exact_and_rational_is_refused(value: object, message: str) -> None:
    """Before any text is made of it, with the piece that is wrong."""
    with pytest.raises(ClaimError, match=message):
        certgen.certify(value)


def test_an_equation_of_second_order_is_refused() -> None:
    """It reaches the reader of equations, which knows the order."""
    with pytest.raises(CertgenError, match="order"):
        certgen.certify(f(x).diff(x, 2) - f(x))


def test_huge_sympy_expressions_are_refused() -> None:
    """Bounded depth and number of nodes, no stack overflow."""
    deep: Any = x
    for _ in range(400):
        deep = sympy.Add(sympy.Pow(deep, 2, evaluate=False), 1, evaluate=False)
    with pytest.raises(LimitError, match="depth"):
        write_equation(deep)


@pytest.mark.parametrize(
    "r",
    [
        x,
        sympy.Rational(-1, 3) / x,
        (x - 2) ** 3 / (x + 1) ** 2 - x / 7,
        -(x**2) / (3 - x),
        sympy.Mul(-1, sympy.Add(x, -1, evaluate=False), 1 / x, evaluate=False),
        sympy.Integer(-(10**5000)) / x,
    ],
)
def test_the_plain_notation_of_a_sympy_expression_means_the_same(r: Any) -> None:
    """The claim's a/b, rebuilt coefficient by coefficient in sympy, is r."""
    from certgen.claims_file import make_claim

    equation = make_claim(equation=write_equation(r)).equation

    def rebuild(p: Any) -> Any:
        return sum(sympy.Integer(c) * x**k for k, c in enumerate(p.numerators))

    difference = rebuild(equation.numerator) / rebuild(equation.denominator) - r
    assert sympy.simplify(difference) == 0


def test_sympy_objects_are_recognised_by_their_class() -> None:
    """Nothing else is: a text that looks like one is a text."""
    assert is_sympy(x) and is_sympy(sympy.true) and is_sympy(sympy.Integer(1))
    assert not is_sympy("x") and not is_sympy(1) and not is_sympy(None)


def test_checking_takes_text_bytes_and_paths(tmp_path: Path) -> None:
    """All give the certificate that was stored; a wrong file is an exception of ours."""
    result = certgen.certify("y' = y", id="growth")
    result.save(tmp_path)
    path = tmp_path / "growth.json"
    for source in (result.text, result.text.encode(), path, str(path)):
        assert certgen.check(source).certificate == result.certificate
    assert certgen.load(path).text == result.text
    with pytest.raises(FileError, match="no such file"):
        certgen.load(tmp_path / "none.json")
    with pytest.raises(MalformedError):
        certgen.check("{}")
    with pytest.raises(CertgenError):
        certgen.check("\u00e4".encode("latin-1"))


def test_a_tampered_text_is_rejected() -> None:
    """Another verdict in the same text."""
    text = certgen.certify("y' = y").text
    with pytest.raises(RejectedError):
        certgen.check(text.replace('"verdict": "refuted"', '"verdict": "proved"'))


def test_the_equation_as_written_must_be_the_claim() -> None:
    """A certificate about y' = y that shows the reader y' = y/(2x): rejected."""
    from certgen.codec import write_certificate

    honest = certgen.certify("y' = y").certificate
    claim = dataclasses.replace(honest.claim, as_written="y' = y/(2*x)")
    forged = write_certificate(dataclasses.replace(honest, claim=claim))
    with pytest.raises(RejectedError) as caught:
        certgen.check(forged)
    assert caught.value.path == "$.claim.as_written"


def test_what_the_checker_refuses_is_never_returned(monkeypatch: pytest.MonkeyPatch) -> None:
    """A prover that errs by one in the degree: a defect, not a certificate."""
    import certgen.prover

    honest = certgen.prover.prove

    def wrong(claim: Any, progress: Any = None) -> Certificate:
        certificate = honest(claim, progress)
        proof: Any = dataclasses.replace(certificate.proof, degree=3)  # type: ignore[type-var]
        return dataclasses.replace(certificate, proof=proof)

    monkeypatch.setattr(certgen.prover, "prove", wrong)
    with pytest.raises(DefectError, match="defect of certgen"):
        certgen.certify("(1 - 4*x)*y' = 2*y")


def test_progress_is_told() -> None:
    """The last step before a certificate is its check."""
    steps: list[str] = []
    certgen.certify("y' = y", progress=steps.append)
    assert steps[-1] == "checking"


def test_a_certificate_shows_as_text_and_as_mathematics() -> None:
    """Plain ASCII within 79 columns; LaTeX in the author's letters for a notebook."""
    result = certgen.certify(r"F'(z) = \frac{2}{1-4z} F(z)", id="pairs", title="H\u00f6he")
    lines = str(result).splitlines()
    assert lines[0] == "pairs"
    assert all(line.isascii() and len(line) <= 79 for line in lines)
    assert " verdict       proved" in lines
    assert " degree        2" in lines
    assert any("F = c * (4*z - 1)^(-1/2)" in line for line in lines)
    latex = result._repr_latex_()
    assert latex.startswith("$") and latex.endswith("$")
    assert "F'" in latex and "z" in latex and "x" not in latex.replace("text", "")
    assert repr(result).startswith("<Certified pairs: proved, digest ")


def test_typesetting_takes_what_checking_takes(tmp_path: Path) -> None:
    """One fragment for one certificate, one for several, a document on request."""
    first = certgen.certify("y' = y", id="growth")
    second = certgen.certify("(1 - 4*x)*y' = 2*y", id="pairs")
    assert certgen.typeset(first) == first.appendix() == certgen.typeset(first.text)
    both = certgen.typeset(first, second)
    assert first.digest[:8] in both and second.digest[:8] in both
    assert "\\documentclass" not in both
    assert "\\documentclass" in certgen.typeset(first, standalone=True)
    with pytest.raises(ClaimError, match="no certificate"):
        certgen.typeset()
    with pytest.raises(RejectedError):
        certgen.typeset(first.text.replace('"verdict": "refuted"', '"verdict": "proved"'))


def test_saving_twice_changes_nothing(tmp_path: Path) -> None:
    """The same claim is made byte-identically; the folder is made where missing."""
    folder = tmp_path / "new" / "folder"
    saved = certgen.certify("y' = y", id="growth").save(folder)
    assert [file.state for file in saved] == ["written", "written"]
    before = {path.name: path.read_bytes() for path in folder.iterdir()}
    assert set(before) == {"growth.json", "growth.tex"}
    saved = certgen.certify("y' = y", id="growth").save(folder)
    assert [file.state for file in saved] == ["unchanged", "unchanged"]
    assert {path.name: path.read_bytes() for path in folder.iterdir()} == before


def test_another_claim_of_the_same_id_is_not_replaced(tmp_path: Path) -> None:
    """Another equation or another assertion: refused; a new note is the same claim."""
    certgen.certify("y' = y", id="growth").save(tmp_path)
    before = {path.name: path.read_bytes() for path in tmp_path.iterdir()}
    for other in (
        certgen.certify("y' = 2*y", id="growth"),
        certgen.certify("y' = y", id="growth", asserts="transcendental"),
    ):
        with pytest.raises(FileError, match="another claim"):
            other.save(tmp_path)
        assert {path.name: path.read_bytes() for path in tmp_path.iterdir()} == before
    renamed = certgen.certify("y' = y", id="growth", note="new").save(tmp_path)
    assert [file.state for file in renamed] == ["replaced", "replaced"]
    certgen.certify("y' = 2*y", id="growth").save(tmp_path, replace=True)
    assert str(certgen.load(tmp_path / "growth.json").claim.equation) == "(1)*y' = (2)*y"


@pytest.mark.parametrize("name", ["growth.tex", "growth.json"])
def test_a_file_that_somebody_wrote_is_not_replaced(tmp_path: Path, name: str) -> None:
    """A manuscript or a note under the name of the claim survives, and nothing is written."""
    (tmp_path / name).write_text("\\documentclass{article}\n% years of work\n")
    with pytest.raises(FileError, match="--replace"):
        certgen.certify("y' = y", id="growth").save(tmp_path)
    assert [path.name for path in tmp_path.iterdir()] == [name]
    assert "years of work" in (tmp_path / name).read_text()
    certgen.certify("y' = y", id="growth").save(tmp_path, replace=True)
    assert "years of work" not in (tmp_path / name).read_text()


def test_a_certificate_is_a_text_or_a_path() -> None:
    """Anything else is an error of the hierarchy, from all three functions."""
    for use in (certgen.check, certgen.load, certgen.typeset):
        with pytest.raises(ClaimError, match="not int"):
            use(3)  # type: ignore[operator]


def test_the_package_shows_its_public_names_only() -> None:
    """`dir(certgen)` is the interface and the version."""
    assert set(dir(certgen)) == {"__version__", *certgen.__all__}
