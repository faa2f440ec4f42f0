"""A stand-alone document around a fragment, and its PDF."""

from __future__ import annotations

import os
import shutil
import subprocess
import tempfile
from pathlib import Path

from certgen.appendix.environment import render
from certgen.errors import DefectError, FileError, LimitError, shorten
from certgen.files import write_bytes_atomically
from certgen.notation.latex_writer import Latex

__all__ = ["build_pdf", "standalone"]

SECONDS_LIMIT = 120
"""pdflatex is stopped after this time."""

_COMMAND = (
    "pdflatex",
    "-no-shell-escape",
    "-interaction=nonstopmode",
    "-halt-on-error",
    "appendix.tex",
)


def standalone(fragment: str) -> str:
    """Return a document of class article, with amsmath, around a fragment."""
    return render("standalone.tex.j2", fragment=Latex(fragment))


def build_pdf(tex: str, out: Path) -> None:
    """Compile a document in a folder of its own and put the PDF at `out`.

    The same document gives the same bytes with the same TeX installation.  TeX runs
    without shell escape and may neither read nor write outside of its folder and
    its own tree.  Raises FileError (pdflatex missing, `out` not writable),
    LimitError (too slow) and DefectError (the document does not compile).
    """
    require_pdflatex()
    with tempfile.TemporaryDirectory(prefix="certgen-") as folder:
        Path(folder, "appendix.tex").write_text(tex, encoding="ascii")
        _run(folder)
        write_bytes_atomically(out, Path(folder, "appendix.pdf").read_bytes())


def require_pdflatex() -> None:
    """Raise FileError, with what to install, where pdflatex is missing."""
    if shutil.which("pdflatex") is None:
        raise FileError(
            "pdflatex is missing; install a TeX distribution (on Debian: "
            "texlive-latex-recommended, texlive-fonts-recommended and lmodern), or "
            "go without the PDF"
        )


def _run(folder: str) -> None:
    try:
        done = subprocess.run(
            _COMMAND, cwd=folder, env=_environment(), timeout=SECONDS_LIMIT,
            stdin=subprocess.DEVNULL, capture_output=True, check=False,
        )  # fmt: skip
    except subprocess.TimeoutExpired:
        raise LimitError(
            f"pdflatex took more than {SECONDS_LIMIT} seconds and was stopped"
        ) from None
    if done.returncode != 0 or not Path(folder, "appendix.pdf").exists():
        raise DefectError(f"pdflatex failed: {_first_error(done.stdout)}")


def _environment() -> dict[str, str]:
    """The caller's environment, with TeX's own walls up and a fixed date."""
    return {
        **os.environ,
        "openin_any": "p",
        "openout_any": "p",
        "SOURCE_DATE_EPOCH": "0",
        "FORCE_SOURCE_DATE": "1",
    }


def _first_error(output: bytes) -> str:
    lines = output.decode("utf-8", errors="replace").splitlines()
    errors = [line for line in lines if line.startswith("!")]
    return shorten(errors[0] if errors else lines[-1] if lines else "no output", 200)
