"""The format of stored certificates, for readers and for other implementers.

`specification.md` states the format and every check, `certificate.schema.json` (JSON
Schema, draft 2020-12) the shape.  The schema is a necessary condition of acceptance:
primes, lowest terms, orders and all mathematics are the specification's.
"""

from __future__ import annotations

from importlib.resources import files

__all__ = ["read_schema", "read_specification"]


def read_schema() -> str:
    """Return the text of the JSON Schema of a stored certificate."""
    return _read("certificate.schema.json")


def read_specification() -> str:
    """Return the text of the specification (Markdown)."""
    return _read("specification.md")


def _read(name: str) -> str:
    return files(__name__).joinpath(name).read_text(encoding="utf-8")
