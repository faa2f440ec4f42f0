"""The specification and the schema: complete, true, and in agreement with the checker."""

from __future__ import annotations

import hashlib
import json
import re
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pytest
from jsonschema import Draft202012Validator

from certgen.checker import check
from certgen.checker.codes import CODES
from certgen.codec import read_certificate, write_certificate
from certgen.errors import CertgenError, RejectedError
from certgen.format import read_schema, read_specification
from tests.handmade import NAMES, algebraic, certificate, claim, handmade, powers, stored
from tests.mutants import single_field_mutants
from tests.rejected import TAMPERED
from tests.second_checker import judge

SAMPLES = Path(__file__).parent.parent / "samples"
CERTIFICATES = sorted((SAMPLES / "certificates").glob("*.json"))
REJECTED = sorted((SAMPLES / "rejected").glob("*.json"))
EXAMPLES = re.findall(r"```json\n(.*?)```", read_specification(), re.DOTALL)
SCHEMA = Draft202012Validator(json.loads(read_schema()))


def answer(text: str) -> tuple[int, str | None]:
    try:
        check(text, arithmetic="plain")
    except RejectedError as error:
        return 1, error.code
    except CertgenError as error:
        return error.status, None
    return 0, None


def name_of(path: Path) -> str:
    return path.stem


def subschemas(value: Any) -> Iterator[dict[str, Any]]:
    if isinstance(value, dict):
        yield value
        value = list(value.values())
    if isinstance(value, list):
        for item in value:
            yield from subschemas(item)


def test_the_samples_are_there() -> None:
    """The parametrised tests below have something to run on."""
    assert len(CERTIFICATES) >= 12
    assert len(REJECTED) >= 30
    assert len(EXAMPLES) == 2


# --------------------------------------------------------------------------
# the schema


def test_the_schema_is_a_schema() -> None:
    """It is valid under draft 2020-12, and every object of it is closed."""
    Draft202012Validator.check_schema(SCHEMA.schema)
    objects = [s for s in subschemas(SCHEMA.schema) if s.get("type") == "object"]
    assert len(objects) >= 20
    for shape in objects:
        assert shape["additionalProperties"] is False
        assert set(shape["required"]) == set(shape["properties"])


@pytest.mark.parametrize("path", CERTIFICATES, ids=name_of)
def test_the_schema_accepts_the_samples(path: Path) -> None:
    """Every sample certificate has the shape of the schema."""
    SCHEMA.validate(json.loads(path.read_text(encoding="ascii")))


@pytest.mark.parametrize("name", NAMES)
def test_the_schema_accepts_what_is_accepted(name: str) -> None:
    """The schema is necessary: no accepted change of a certificate violates it."""
    for mutant in single_field_mutants(handmade(name)):
        text = stored(mutant.obj)
        if answer(text)[0] == 0:
            assert SCHEMA.is_valid(json.loads(text)), mutant.what


@pytest.mark.parametrize(
    ("path", "value"),
    [
        (["format"], "certgen/2"),
        (["digest"], "0" * 63),
        (["digest"], "0" * 64 + "\n"),
        (["digest"], "A" * 64),
        (["verdict"], "plausible"),
        (["verified"], "yes"),
        (["claim", "kind"], "second-order"),
        (["claim", "id"], "../x"),
        (["claim", "id"], "-x"),
        (["claim", "equation"], "y' = y"),
        (["claim", "equation"], "(0)*y' = (1)*y"),
        (["claim", "equation"], "(-x)*y' = (1)*y"),
        (["claim", "equation"], "(1/2*x)*y' = (1)*y"),
        (["claim", "letters", "variable"], "xx"),
        (["claim", "letters", "variable"], "pi"),
        (["claim", "title"], "two\nlines"),
        (["claim", "title"], "t" * 201),
        (["claim", "note"], "bell \x07"),
        (["claim", "as_written"], "\x7f"),
        (["claim", "solution"], []),
        (["claim", "solution_as_written"], "1"),
        (["claim", "asserts"], "rational"),
        (["claim", "subject"], "no solution"),
        (["proof", "kind"], "authority"),
        (["proof", "degree"], 2),
        (["proof", "degree"], "0"),
        (["proof", "degree"], "-2"),
        (["proof", "degree"], "2.0"),
        (["proof", "degree"], None),
        (["proof", "squarefree_prime"], "1"),
        (["proof", "squarefree_prime"], "1000000000000"),
        (["proof", "eisenstein"], {}),
        (["proof", "eisenstein", "point"], "-0"),
        (["proof", "eisenstein", "point"], "+1"),
        (["proof", "eisenstein", "point"], "02"),
        (["proof", "eisenstein", "constant"], "0"),
        (["proof", "solution"], {}),
        (["proof", "solution", 0, "exponent"], "0"),
        (["proof", "solution", 0, "exponent"], "1/1"),
        (["proof", "solution", 0, "exponent"], "1/02"),
        (["proof", "solution", 0, "exponent"], "0/2"),
        (["proof", "solution", 0, "exponent"], "0.5"),
        (["proof", "minimal_polynomial", "numerator", 0, "exponent"], "1/2"),
        (["proof", "solution", 0, "base"], "2"),
        (["proof", "solution", 0, "base"], "-x"),
        (["proof", "solution", 0, "base"], "1/2*x"),
        (["proof", "solution", 0, "base"], "x^1"),
        (["proof", "solution", 0, "base"], "x^0"),
        (["proof", "solution", 0, "base"], "x^10001"),
        (["proof", "solution", 0, "base"], "1*x"),
        (["proof", "solution", 0, "base"], "x+1"),
        (["proof", "solution", 0, "base"], "x + -1"),
        (["proof", "solution", 0, "base"], "x + 0"),
        (["proof", "solution", 0, "base"], " x"),
        (["proof", "solution", 0, "base"], "x\n"),
        (["proof", "solution", 0, "base"], "2x"),
        (["proof", "solution", 0, "base"], "y"),
        (["proof", "solution", 0, "base"], ""),
    ],
)
def test_the_schema_refuses(path: list[Any], value: object) -> None:
    """A wrong type, word, spelling or key violates the schema, and is not accepted."""
    obj = handmade("harbour-arches")
    at: Any = obj
    for key in path[:-1]:
        at = at[key]
    at[path[-1]] = value
    text = stored(obj)
    if path == ["digest"]:
        text = json.dumps({**obj, "digest": value}, sort_keys=True, indent=1) + "\n"
    assert not SCHEMA.is_valid(json.loads(text))
    assert answer(text)[0] != 0
    assert answer(text) == judge(text)


# --------------------------------------------------------------------------
# a second checker, which follows the specification and shares no code, agrees


@pytest.mark.parametrize("path", CERTIFICATES, ids=name_of)
def test_the_second_checker_accepts_the_samples(path: Path) -> None:
    """Every sample certificate is accepted by the checker that follows the specification."""
    assert judge(path.read_text(encoding="ascii")) == (0, None)


@pytest.mark.parametrize("path", REJECTED, ids=name_of)
def test_the_second_checker_gives_the_same_answer(path: Path) -> None:
    """Status and code of every tampered sample are those of the specification."""
    text = path.read_text(encoding="ascii")
    assert judge(text) == answer(text)


@pytest.mark.parametrize("lie", TAMPERED, ids=lambda lie: lie.name)
def test_the_second_checker_has_the_code(lie: Any) -> None:
    """Each single lie is rejected by the second checker with the code it was made for."""
    assert judge(lie.text) == (1, lie.code)


@pytest.mark.parametrize("name", NAMES)
def test_the_second_checker_agrees_on_every_change(name: str) -> None:
    """On each single-field change both checkers give the same status and code."""
    for mutant in single_field_mutants(handmade(name)):
        text = stored(mutant.obj)
        assert judge(text) == answer(text), (mutant.path, mutant.what)


def test_a_factor_that_is_not_squarefree_is_refused() -> None:
    """Along (x - 1)^2 the order of (x - 1)^2 is 1, and the residue is not half of 2*1/2."""
    obj = handmade("stray-lamp")
    obj["claim"]["solution"][1] = {"base": "x^2 - 2*x + 1", "exponent": "1/2"}
    obj["proof"]["disagreement"] = {
        "factor": "x^2 - 2*x + 1", "residue_of_equation": "0",
        "residue_of_closed_form": "1/2", "prime": "3",
    }  # fmt: skip
    text = stored(obj)
    assert judge(text) == (1, "disagreement-factor")
    assert answer(text) == (1, "disagreement-factor")


@pytest.mark.parametrize(
    ("degree", "constant", "status"), [(100, 4, 0), (100, 1, 1), (102, 4, 1), (102, 8, 0)]
)
def test_taylor_coefficients_count_up_to_degree_100(
    degree: int, constant: int, status: int
) -> None:
    """At 1, (x^n + 1)^(1/2) has c = 8; 4 suffices for even n, which counts for n <= 100."""
    base = f"x^{degree} + 1"
    text = stored(certificate(
        claim("tall-arch", base, f"{degree // 2}*x^{degree - 1}"), "proved",
        algebraic(powers((base, "1/2")), [(base, "1/2")], "2", powers((base, "1")), [], "7",
                  ("1", str(constant))),
    ))  # fmt: skip
    code = "eisenstein-constant" if status else None
    assert answer(text) == (status, code)
    assert judge(text) == (status, code)


# --------------------------------------------------------------------------
# the text of the specification


@pytest.mark.parametrize("code", sorted(CODES))
def test_every_code_is_specified(code: str) -> None:
    """The table of codes has a row for each code, with the meaning the checker gives it."""
    row = re.search(rf"^\| `{code}` \| ([^|]+) \| ([^|]+) \|$", read_specification(), re.M)
    assert row is not None
    assert row[2] == CODES[code]
    if row[1] != "-":
        body = read_specification().split("## 6. Codes")[0]
        assert f"[{code}]" in body


def test_no_code_is_invented() -> None:
    """The specification names no code that the checker does not know."""
    table = read_specification().split("## 6. Codes")[1].split("## 7.")[0]
    assert set(re.findall(r"^\| `([a-z-]+)` \|", table, re.M)) == set(CODES)


@pytest.mark.parametrize("text", EXAMPLES, ids=["algebraic", "not-algebraic"])
def test_the_worked_examples_are_certificates(text: str) -> None:
    """Accepted by both checkers, and byte for byte what the writer gives."""
    checked = check(text, arithmetic="plain")
    assert judge(text) == (0, None)
    assert write_certificate(read_certificate(text).certificate) == text
    rest = {key: value for key, value in json.loads(text).items() if key != "digest"}
    compact = json.dumps(rest, sort_keys=True, separators=(",", ":"))
    assert hashlib.sha256(compact.encode("ascii")).hexdigest() == checked.digest
    SCHEMA.validate(json.loads(text))
