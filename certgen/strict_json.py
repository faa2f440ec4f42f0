"""Strict JSON: the text of a stored file, its canonical form, values with their paths.

There are no JSON numbers: numbers are strings in strict notation.
"""

from __future__ import annotations

import json
import re
from collections.abc import Iterator
from contextlib import contextmanager
from typing import Any

from certgen.errors import (
    ClaimError,
    InvariantError,
    LimitError,
    MalformedError,
    RejectedError,
    shorten,
)

__all__ = [
    "BYTES_LIMIT",
    "NESTING_LIMIT",
    "JsonValue",
    "canonical",
    "read_json",
    "read_text",
]

BYTES_LIMIT = 64 * 1024 * 1024
NESTING_LIMIT = 16


def canonical(obj: object) -> str:
    """The one text of a JSON value: sorted keys, an indent of one space, ASCII."""
    return json.dumps(obj, sort_keys=True, ensure_ascii=True, indent=1) + "\n"


def read_text(data: bytes | str) -> str:
    """Return the text of a stored file: ASCII, not empty, within BYTES_LIMIT."""
    if len(data) > BYTES_LIMIT:
        raise LimitError(f"a text of {len(data)} bytes; the limit is {BYTES_LIMIT}")
    if not data:
        raise MalformedError("the file is empty")
    try:
        if isinstance(data, bytes):
            return data.decode("ascii")
        data.encode("ascii")
    except UnicodeError as error:
        place = getattr(error, "start", 0)
        raise MalformedError(f"byte {place + 1} is not ASCII") from None
    return data


# a string that does not end is one token too: the scan stays linear
# (and possessive: it needs no memory)
_TOKEN = re.compile(r'"(?:[^"\\]++|\\.)*+"?|[\[{]|[\]}]')


def _check_nesting(text: str) -> None:
    depth = 0
    for match in _TOKEN.finditer(text):
        token = match[0][0]
        if token in "[{":
            depth += 1
        elif token in "]}":
            depth -= 1
        if depth > NESTING_LIMIT:
            raise LimitError(f"nesting deeper than the limit of {NESTING_LIMIT}")


class _Number:
    """A JSON number, NaN or Infinity: kept until its path is known, then refused."""

    def __init__(self, literal: str) -> None:
        self.literal = literal


def _unique(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    out: dict[str, Any] = {}
    for key, value in pairs:
        if key in out:
            raise MalformedError(f"the key '{shorten(key)}' stands twice")
        out[key] = value
    return out


def read_json(text: str) -> Any:
    """Parse JSON without duplicate keys; numbers are kept and refused by `JsonValue`."""
    _check_nesting(text)
    try:
        return json.loads(
            text,
            object_pairs_hook=_unique,
            parse_int=_Number,
            parse_float=_Number,
            parse_constant=_Number,
        )
    except json.JSONDecodeError as error:
        raise MalformedError(
            f"not JSON: {error.msg} at line {error.lineno}, column {error.colno}"
        ) from None
    except RecursionError:
        raise LimitError(f"nesting deeper than the limit of {NESTING_LIMIT}") from None


class JsonValue:
    """A value of the parsed JSON together with its path."""

    def __init__(self, value: Any, path: str) -> None:
        self.value = value
        self.path = path

    def fail(self, expected: str) -> MalformedError:
        names = {dict: "an object", list: "a list", str: "a string", bool: "a boolean"}
        found = names.get(type(self.value), "null")
        if isinstance(self.value, _Number):
            found = f"the bare number {shorten(self.value.literal, 30)}"
        return MalformedError(f"expected {expected}, found {found}", path=self.path)

    def keys(self, *names: str) -> None:
        if not isinstance(self.value, dict):
            raise self.fail("an object")
        for key in self.value:
            if key not in names:
                raise MalformedError(f"unknown key '{shorten(key)}'", path=self.path)
        for name in names:
            if name not in self.value:
                raise MalformedError(f"the key '{name}' is missing", path=self.path)

    def child(self, name: str) -> JsonValue:
        return JsonValue(self.value[name], f"{self.path}.{name}")

    def peek(self, name: str) -> str:
        """The string at a key that decides how the rest is read."""
        if not isinstance(self.value, dict):
            raise self.fail("an object")
        if name not in self.value:
            raise MalformedError(f"the key '{name}' is missing", path=self.path)
        return self.child(name).text()

    def without(self, *names: str) -> JsonValue:
        rest = {k: v for k, v in self.value.items() if k not in names}
        return JsonValue(rest, self.path)

    def items(self) -> Iterator[JsonValue]:
        if not isinstance(self.value, list):
            raise self.fail("a list")
        for i, item in enumerate(self.value):
            yield JsonValue(item, f"{self.path}[{i}]")

    def text(self) -> str:
        if not isinstance(self.value, str):
            raise self.fail("a string")
        return self.value

    @contextmanager
    def building(self) -> Iterator[None]:
        """Turn the errors of constructors into errors at this path."""
        try:
            yield
        except InvariantError as error:
            raise RejectedError(
                error.code, self.path, str(error), shorten(json.dumps(self.value), 100)
            ) from None
        except ClaimError as error:
            raise MalformedError(str(error), path=self.path) from None
