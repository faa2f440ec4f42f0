"""The stored text: one canonical spelling, everything else refused."""

from __future__ import annotations

import json
import sys
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

import certgen.strict_json
from certgen.codec import NESTING_LIMIT, read_certificate, write_certificate
from certgen.errors import (
    CertgenError,
    LimitError,
    MalformedError,
    RejectedError,
    UnsupportedVersionError,
)
from tests.handmade import NAMES, Json, canonical, handmade, stored, with_digest
from tests.rejected import TAMPERED, UNREADABLE, Unreadable


@pytest.mark.parametrize("name", NAMES)
def test_reading_and_writing_are_inverse(name: str) -> None:
    """A text written by hand is read, and written back byte for byte."""
    text = stored(handmade(name))
    read = read_certificate(text)
    assert read == read_certificate(text.encode("ascii"))
    assert write_certificate(read.certificate) == text
    assert read.digest == read.stored_digest == json.loads(text)["digest"]


def test_the_digest_is_that_of_the_compact_text() -> None:
    """The digest ignores what is stored as digest, and covers everything else."""
    obj = with_digest(handmade("ferry"))
    read = read_certificate(canonical({**obj, "digest": "0" * 64}))
    assert (read.digest, read.stored_digest) == (obj["digest"], "0" * 64)
    obj["claim"]["title"] = "Another title"
    assert read_certificate(canonical(obj)).digest != obj["digest"]


@pytest.mark.parametrize("case", UNREADABLE, ids=lambda case: case.name)
def test_unreadable_texts_have_their_status(case: Unreadable) -> None:
    """Malformed 2, limits 3, other versions 4."""
    with pytest.raises(CertgenError) as caught:
        read_certificate(case.text)
    assert caught.value.status == case.status


@pytest.mark.parametrize(
    "data",
    [
        b"", "", b"\xef\xbb\xbf{}", "\ufeff{}", b"\xff", "{", "[]", '"text"', "null", "3",
        "true", "{}", "{} {}", "[1,]", "// c\n{}", "{'a': 1}", '{"a"}', "NaN",
        '{"format": "certgen/1"}', '{"format": null}', '{"format": ["certgen/1"]}',
        '{"format": "certgen/1", "digest": "0"}', '"' + '\\"' * 200_000, "\x00",
        '{"format": 1}', '{"format": 1.5}', '{"format": true}', '{"format": Infinity}',
    ],
)  # fmt: skip
def test_texts_that_are_no_certificates(data: bytes | str) -> None:
    """Every one is malformed; none leads to another exception or takes long."""
    with pytest.raises(MalformedError):
        read_certificate(data)


def test_versions_are_unsupported_whatever_else_stands_there() -> None:
    """Another format is neither accepted nor rejected nor called malformed."""
    for text in ('{"format": "certgen/2"}', '{"format": "2.0", "extra": 1}'):
        with pytest.raises(UnsupportedVersionError):
            read_certificate(text)


def test_limits_of_the_text(monkeypatch: pytest.MonkeyPatch) -> None:
    """Bytes and nesting are bounded before the text is parsed."""
    for deep in ("[" * 100_000, '{"a":' * (NESTING_LIMIT + 1)):
        with pytest.raises(LimitError, match="nesting"):
            read_certificate(deep)
    with pytest.raises(MalformedError):
        read_certificate("[" * NESTING_LIMIT + "]" * NESTING_LIMIT)
    text = stored(handmade("ferry"))
    monkeypatch.setattr(certgen.strict_json, "BYTES_LIMIT", len(text) - 1)
    with pytest.raises(LimitError, match="bytes"):
        read_certificate(text)


def test_brackets_in_strings_are_no_nesting() -> None:
    """A title may hold any number of brackets and quotes."""
    obj = handmade("ferry")
    obj["claim"]["title"] = '[{"\\' * 40
    assert read_certificate(stored(obj)).certificate.claim.title == '[{"\\' * 40


def test_a_recursion_error_of_json_is_a_limit(monkeypatch: pytest.MonkeyPatch) -> None:
    """Whatever json says about its stack, the answer is of our hierarchy."""

    def overflow(*_: object, **__: object) -> None:
        raise RecursionError

    monkeypatch.setattr(certgen.codec.json, "loads", overflow)
    with pytest.raises(LimitError, match="nesting"):
        read_certificate("{}")


BARE = {
    "3": "the bare number 3", "true": "a boolean", "null": "null", "[]": "a list",
    "{}": "an object", "NaN": "the bare number NaN", "1e2": "the bare number 1e2",
}  # fmt: skip


@pytest.mark.parametrize("literal", BARE)
def test_values_of_another_type_are_named_with_their_path(literal: str) -> None:
    """There are no JSON numbers at all; the error says what was found and where."""
    text = stored(handmade("ferry")).replace('"degree": "1"', f'"degree": {literal}')
    with pytest.raises(MalformedError, match=BARE[literal]) as caught:
        read_certificate(text)
    assert caught.value.path == "$.proof.degree"


@pytest.mark.parametrize(
    ("path", "value"),
    [
        ("claim.id", "A B"),
        ("claim.letters", {"variable": "x", "function": "x"}),
        ("claim.letters", "xy"),
        ("claim.letters", ["x", "y"]),
        ("claim.title", "a\nb"),
        ("claim.note", "\ud800"),
        ("claim.equation", "y' = y"),
        ("claim.equation", "(x)*y' = ((1))*y"),
        ("claim.asserts", "rational"),
        ("claim", []),
        ("proof", None),
        ("proof.solution", {}),
        ("proof.kind", 3),
        ("proof.kind", None),
        ("proof.eisenstein", []),
        ("verdict", "Proved"),
        ("digest", "0" * 63),
        ("digest", "A" * 64),
    ],
)
def test_wrong_values_are_malformed(path: str, value: Any) -> None:
    """Each with the path at which it stands."""
    obj = with_digest(handmade("ferry"))
    at: Any = obj
    *keys, last = path.split(".")
    for key in keys:
        at = at[key]
    at[last] = value
    with pytest.raises(MalformedError) as caught:
        read_certificate(canonical(obj))
    assert caught.value.path.startswith("$." + path.split(".")[0])


def _objects(value: Any, path: str = "$") -> list[tuple[str, Json]]:
    if isinstance(value, list):
        return [o for i, v in enumerate(value) for o in _objects(v, f"{path}[{i}]")]
    if not isinstance(value, dict):
        return []
    return [(path, value)] + [o for k, v in value.items() for o in _objects(v, f"{path}.{k}")]


@pytest.mark.parametrize("name", NAMES)
def test_keys_are_exactly_those_of_the_format(name: str) -> None:
    """In every object every key is needed, and no other is let in."""
    obj = with_digest(handmade(name))
    for path, inner in _objects(obj):
        inner["verified"] = "true"
        with pytest.raises(MalformedError, match="verified"):
            read_certificate(canonical(obj))
        del inner["verified"]
        for key in list(inner):
            value = inner.pop(key)
            with pytest.raises(MalformedError, match=f"'{key}' is missing"):
                read_certificate(canonical(obj))
            inner[key] = value
        assert path
    read_certificate(canonical(obj))


@pytest.mark.parametrize(
    "rewrite",
    [
        lambda text: text + "\n",
        lambda text: " " + text,
        lambda text: text.replace("\n", "\r\n"),
        lambda text: text.replace('": "', '":"', 1),
        lambda text: json.dumps(json.loads(text), sort_keys=True) + "\n",
        lambda text: json.dumps(dict(reversed(json.loads(text).items())), indent=1) + "\n",
        lambda text: text.replace('"proved"', '"\\u0070roved"'),
        lambda text: text.replace("\n ", "\n\t"),
    ],
)
def test_another_spelling_of_the_same_object_is_malformed(rewrite: Any) -> None:
    """Equal values are equal texts: order, spaces, escapes, line ends."""
    text = stored(handmade("ferry"))
    assert rewrite(text) != text
    with pytest.raises(MalformedError, match="not canonical"):
        read_certificate(rewrite(text))


def test_non_ascii_is_escaped() -> None:
    """An umlaut in a note is stored as an escape, and never raw."""
    obj = handmade("ferry")
    obj["claim"]["note"] = "h\u00f6her \U0001f3ee"
    text = stored(obj)
    assert read_certificate(text).certificate.claim.note == "h\u00f6her \U0001f3ee"
    raw = json.dumps(json.loads(text), sort_keys=True, indent=1, ensure_ascii=False) + "\n"
    for data in (raw, raw.encode()):
        with pytest.raises(MalformedError, match="not ASCII"):
            read_certificate(data)


@pytest.mark.parametrize(
    "case",
    [t for t in TAMPERED if t.code in ("vacuous", "not-canonical")],
    ids=lambda case: case.name,
)
def test_values_that_their_type_does_not_admit_are_rejections(case: Any) -> None:
    """Vacuous and not canonical values are false statements, not malformed texts."""
    with pytest.raises(RejectedError) as caught:
        read_certificate(case.text)
    assert (caught.value.code, caught.value.path) == (case.code, case.path)


@pytest.mark.parametrize(
    ("equation", "code"),
    [
        ("(0)*y' = (0)*y", "vacuous"),
        ("(x - x)*y' = (1)*y", None),
        ("(-x)*y' = (1)*y", "not-canonical"),
        ("(2*x)*y' = (2)*y", "not-canonical"),
        ("(x)*y' = (0)*y", "not-canonical"),
    ],
)
def test_equations_that_say_nothing(equation: str, code: str | None) -> None:
    """Vacuous and not canonical equations carry their code; the rest is malformed."""
    obj = handmade("ferry")
    obj["claim"]["equation"] = equation
    with pytest.raises((RejectedError, MalformedError)) as caught:
        read_certificate(stored(obj))
    assert getattr(caught.value, "code", None) == code
    assert caught.value.path == "$.claim.equation"


JSON_VALUES = st.recursive(
    st.none() | st.booleans() | st.integers() | st.floats() | st.text(max_size=6)
    | st.sampled_from(["x", "x^2 - 1", "1/2", "certgen/1", "algebraic-solution", "proved"]),
    lambda inner: st.lists(inner, max_size=4)
    | st.dictionaries(
        st.sampled_from(["format", "claim", "proof", "kind", "digest", "verdict", "p"])
        | st.text(max_size=4),
        inner, max_size=5,
    ),
    max_leaves=12,
)  # fmt: skip


@given(JSON_VALUES)
def test_random_json_never_gives_another_exception(value: Any) -> None:
    """Any JSON text whatsoever: an error of the hierarchy."""
    with pytest.raises(CertgenError):
        read_certificate(canonical(value))


@given(st.sampled_from(NAMES), st.data())
@settings(max_examples=300)
def test_certificates_with_a_random_part_never_give_another_exception(
    name: str, data: st.DataObject
) -> None:
    """One value of a certificate replaced by random JSON: read, or one of our errors."""
    obj = with_digest(handmade(name))
    _, inner = data.draw(st.sampled_from(_objects(obj)))
    inner[data.draw(st.sampled_from(sorted(inner)))] = data.draw(JSON_VALUES)
    try:
        read_certificate(canonical(obj))
    except CertgenError:
        return


@given(st.binary(max_size=60) | st.text(max_size=60))
def test_random_bytes_never_give_another_exception(data: bytes | str) -> None:
    """Bytes and text, well formed or not."""
    with pytest.raises(CertgenError):
        read_certificate(data)


def test_long_integers_need_no_setting_of_the_interpreter() -> None:
    """A certificate with 15,000-digit integers is read and written under limit 640."""
    obj = handmade("still-water")
    obj["proof"]["eisenstein"]["constant"] = "7" * 15_000
    text = stored(obj)
    before = sys.get_int_max_str_digits()
    sys.set_int_max_str_digits(640)
    try:
        assert write_certificate(read_certificate(text).certificate) == text
    finally:
        sys.set_int_max_str_digits(before)
