"""The Jinja environment: wording comes from templates, everything else escaped."""

from __future__ import annotations

from functools import cache
from importlib.util import find_spec
from pathlib import Path

from jinja2 import Environment, FileSystemLoader, StrictUndefined, Undefined

from certgen.errors import DefectError
from certgen.notation.latex_writer import LATEX_MACROS, Latex, escape, integer

__all__ = ["render"]


def _finalize(value: object) -> str:
    """Let LaTeX of ours through, escape text, refuse anything else.

    So escaping is the default, and a number reaches the page only through a
    context builder that has written it as LaTeX.
    """
    if isinstance(value, Latex):
        return value
    if type(value) is str:
        return escape(value)
    if isinstance(value, Undefined):
        return str(value)  # raises UndefinedError with the name
    raise DefectError(f"a template prints a value of type {type(value).__name__}")


def _folder() -> Path:
    """The templates: an installed package, or the folder of a source checkout."""
    spec = find_spec("certgen.templates")
    if spec is not None and spec.submodule_search_locations:
        return Path(next(iter(spec.submodule_search_locations)))
    return Path(__file__).resolve().parents[2] / "templates"


@cache
def _environment() -> Environment:
    environment = Environment(
        loader=FileSystemLoader(_folder()),
        block_start_string="<*",
        block_end_string="*>",
        variable_start_string="<<",
        variable_end_string=">>",
        comment_start_string="<#",
        comment_end_string="#>",
        undefined=StrictUndefined,
        finalize=_finalize,
        autoescape=False,
        trim_blocks=True,
        lstrip_blocks=True,
        keep_trailing_newline=True,
    )
    environment.filters["number"] = integer
    environment.globals["latex_macros"] = Latex(LATEX_MACROS.rstrip())
    return environment


def render(template: str, **context: object) -> str:
    """Return the template (its file name) filled with these frozen contexts."""
    return _environment().get_template(template).render(context)
