"""The walls of the house, read from the syntax trees of the sources."""

from __future__ import annotations

import ast
import json
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path

import pytest

import certgen

PACKAGE = Path(certgen.__file__).parent
SOURCES = sorted(PACKAGE.rglob("*.py"))

DATA = {"errors", "polynomial", "claim", "certificate"}
CHECKING = DATA | {"codec", "strict_json"}
LIBRARY = CHECKING | {
    "checker", "exact", "notation", "claims_file", "prover", "appendix", "files",
}  # fmt: skip

# room -> (rooms it may import, third-party packages it may import)
WALLS: dict[str, tuple[set[str], set[str]]] = {
    "errors": (set(), set()),
    "polynomial": ({"errors"}, set()),
    "claim": ({"errors", "polynomial"}, set()),
    "certificate": ({"errors", "polynomial", "claim"}, set()),
    "strict_json": ({"errors"}, set()),
    "codec": (DATA | {"strict_json"}, set()),
    "checker": (CHECKING, set()),
    "exact": ({"errors", "polynomial"}, {"flint"}),
    "notation": ({"claim", "errors", "polynomial", "exact"}, {"pylatexenc"}),
    "claims_file": ({"claim", "notation", "errors", "files"}, set()),
    "prover": (DATA | {"exact"}, {"flint"}),
    "appendix": (DATA | {"notation", "checker", "files"}, {"jinja2", "markupsafe"}),
    "format": (set(), set()),
    "files": ({"errors"}, set()),
    "pool": (set(), set()),
    "sympy_notation": ({"claim", "errors", "polynomial"}, set()),
    "report": (DATA | {"checker"}, set()),
    "store": (CHECKING | {"appendix", "files", "api"}, set()),
    "api": (LIBRARY | {"report", "store", "sympy_notation"}, set()),
    "batch": ({"errors", "api", "report", "pool"}, set()),
    "cli_help": (set(), set()),
    "commands": (LIBRARY | {"api", "batch", "report", "store"}, set()),
    "cli": ({"batch", "cli_help", "commands", ""}, set()),
    "__main__": ({"cli"}, set()),
    "": ({"api", "errors"}, set()),
}

# The only place of the checker where python-flint may come in.
CHECKER_FLINT = PACKAGE / "checker" / "flint_arithmetic.py"


def _room(path: Path) -> str:
    first = path.relative_to(PACKAGE).parts[0].removesuffix(".py")
    return "" if first == "__init__" else first


def _imported(path: Path) -> Iterator[str]:
    """Yield the full names of the modules that a source imports, anywhere in it."""
    for node in ast.walk(ast.parse(path.read_text())):
        if isinstance(node, ast.Import):
            yield from (alias.name for alias in node.names)
        elif isinstance(node, ast.ImportFrom):
            if node.level:
                yield "." * node.level + (node.module or "")
            elif node.module == "certgen":
                yield from (f"certgen.{alias.name}" for alias in node.names)
            else:
                yield node.module or ""


def _rooms(path: Path) -> set[str]:
    names = {name.split(".")[1] for name in _imported(path) if name.startswith("certgen.")}
    # `from certgen import __version__` asks the package itself
    return {"" if name == "__version__" else name for name in names} - {_room(path)}


def _third_party(path: Path) -> set[str]:
    tops = {name.split(".")[0] for name in _imported(path)}
    return tops - set(sys.stdlib_module_names) - {"certgen", ""}


def _identify(path: Path) -> str:
    return str(path.relative_to(PACKAGE))


@pytest.mark.parametrize("path", SOURCES, ids=_identify)
def test_a_room_imports_only_what_its_wall_lets_through(path: Path) -> None:
    """Every import in every source, lazy ones included, is in the table."""
    rooms, third_party = WALLS[_room(path)]
    if path == CHECKER_FLINT:
        third_party = third_party | {"flint"}
    assert _rooms(path) <= rooms
    assert _third_party(path) <= third_party


def test_no_source_imports_relatively() -> None:
    """Relative imports would pass the test above unseen."""
    assert [p for p in SOURCES if any(name.startswith(".") for name in _imported(p))] == []


def test_every_room_of_the_table_exists() -> None:
    """A renamed room takes its wall along."""
    assert {_room(path) for path in SOURCES} | {"format"} == set(WALLS)


def test_the_reading_of_imports_sees_all_forms(tmp_path: Path) -> None:
    """Control: plain, from, package, relative and nested imports are all seen."""
    source = tmp_path / "room.py"
    source.write_text(
        "import a.b, c\nfrom d.e import f\nfrom certgen import cli\nfrom . import g\n"
        "def h():\n    from i import j\n"
    )
    assert set(_imported(source)) == {"a.b", "c", "d.e", "certgen.cli", ".", "i"}


def _calls(path: Path, name: str) -> list[int]:
    """Return the lines on which `name` is called or handed to a call (not to isinstance)."""
    tree = ast.parse(path.read_text())
    return [
        node.lineno
        for node in ast.walk(tree)
        if isinstance(node, ast.Call)
        and not (isinstance(node.func, ast.Name) and node.func.id == "isinstance")
        for part in [node.func, *node.args, *(keyword.value for keyword in node.keywords)]
        if (isinstance(part, ast.Name) and part.id == name)
        or (isinstance(part, ast.Attribute) and part.attr == name)
    ]


def test_only_the_checker_makes_a_checked_certificate() -> None:
    """Outside certgen/checker nothing calls the constructor or copies such an object."""
    outside = [path for path in SOURCES if _room(path) != "checker"]
    makers = [path for path in SOURCES if _calls(path, "CheckedCertificate")]
    assert [path for path in makers if path in outside] == []
    assert makers, "the checker itself makes one"
    for path in outside:
        for name in ("__new__", "__setattr__"):
            assert _calls(path, name) == [], f"{path}: {name}"


def test_there_is_no_assert_statement_in_the_package() -> None:
    """`python -O` removes asserts, so no check may be one."""
    found = [
        (_identify(path), node.lineno)
        for path in SOURCES
        for node in ast.walk(ast.parse(path.read_text()))
        if isinstance(node, ast.Assert)
    ]
    assert found == []


def test_nothing_in_the_package_evaluates_text() -> None:
    """No eval, exec, sympify, parse_expr: untrusted text never becomes code."""
    names = {"eval", "exec", "compile", "sympify", "parse_expr", "parse_latex", "__import__"}
    found = [
        (_identify(path), node.lineno)
        for path in SOURCES
        for node in ast.walk(ast.parse(path.read_text()))
        if isinstance(node, ast.Call)
        and isinstance(node.func, ast.Name)
        and node.func.id in names
    ]
    assert found == []


def _loaded_by(statement: str) -> set[str]:
    script = f"{statement}\nimport sys, json; print(json.dumps(sorted(sys.modules)))"
    done = subprocess.run(
        [sys.executable, "-c", script],
        capture_output=True, text=True, check=True, cwd=PACKAGE.parent,
    )  # fmt: skip
    return {name.split(".")[0] for name in json.loads(done.stdout)}


@pytest.mark.parametrize(
    ("statement", "unwanted"),
    [
        ("import certgen", {"sympy", "flint", "jinja2", "pylatexenc", "argparse"}),
        ("import certgen.cli", {"sympy", "flint", "jinja2", "pylatexenc"}),
        ("import certgen.checker", {"sympy", "flint", "jinja2", "pylatexenc"}),
        ("import certgen.api, certgen.batch", {"sympy", "flint", "jinja2", "pylatexenc"}),
    ],
)
def test_importing_stays_cheap(statement: str, unwanted: set[str]) -> None:
    """What an import loads in a fresh interpreter."""
    assert _loaded_by(statement) & unwanted == set()


def test_public_names_are_loaded_on_first_use() -> None:
    """Every name of certgen.__all__ is there, in dir() too, and no other."""
    assert set(certgen.__all__) <= set(dir(certgen))
    for name in certgen.__all__:
        assert getattr(certgen, name).__name__ == name
    with pytest.raises(AttributeError, match="no attribute 'assert_nothing'"):
        _ = certgen.assert_nothing
