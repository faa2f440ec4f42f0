"""Shared by all tests: the tools that a test needs, and skipping without them.

Use `@pytest.mark.needs_gp` (or `needs_pdflatex`, ...), or the fixture of the same
name.  The reason of every such skip ends in "is missing"; `.ci/run` fails on it.
"""

from __future__ import annotations

import shutil
from collections.abc import Callable

import pytest

TOOLS = ("gp", "latexml", "pdflatex", "pdftoppm", "pdftotext")


def _skip_without(tool: str) -> None:
    if shutil.which(tool) is None:
        pytest.skip(f"{tool} is missing")


def pytest_configure(config: pytest.Config) -> None:
    for tool in TOOLS:
        config.addinivalue_line("markers", f"needs_{tool}: skipped where {tool} is missing")


def pytest_runtest_setup(item: pytest.Item) -> None:
    for tool in TOOLS:
        if item.get_closest_marker(f"needs_{tool}") is not None:
            _skip_without(tool)


def _fixture(tool: str) -> Callable[[], None]:
    @pytest.fixture(name=f"needs_{tool}")
    def needs() -> None:
        _skip_without(tool)

    return needs


needs_gp = _fixture("gp")
needs_latexml = _fixture("latexml")
needs_pdflatex = _fixture("pdflatex")
needs_pdftoppm = _fixture("pdftoppm")
needs_pdftotext = _fixture("pdftotext")
