r"""Papers for the typesetting tests: classes, compiling, what TeX complains of, the text.

The classes are those of texlive-latex-base and texlive-publishers.  No page has a
number or a head, so that the text of the PDF is the formulas and nothing else.
"""

from __future__ import annotations

import os
import re
import subprocess
from pathlib import Path

_TITLE = "\\title{Lanterns}\n\\author{A. Lighter}\n"
_CLASSES = {
    "article": ("\\documentclass{article}", ""),
    "article in two columns": ("\\documentclass[twocolumn]{article}", ""),
    "amsart": ("\\documentclass{amsart}", _TITLE + "\\maketitle\n"),
    "IEEEtran": ("\\documentclass[journal]{IEEEtran}", _TITLE + "\\maketitle\n"),
    "elsarticle": (
        "\\documentclass{elsarticle}",
        f"\\begin{{frontmatter}}\n{_TITLE}\\end{{frontmatter}}\n",
    ),
}
CLASSES = tuple(_CLASSES)

_COMPLAINT = re.compile(
    r"^(?:(?:Over|Under)full \\[hv]box.*|.*undefined (?:on input line|references).*"
    r"|Missing character.*|.*multiply defined.*)$",
    re.MULTILINE,
)


def paper(document_class: str, body: str, *, hyperref: bool = False) -> str:
    """Return a document of this class with amsmath, and hyperref if asked for."""
    first, opening = _CLASSES[document_class]
    links = "\\usepackage{hyperref}\n" if hyperref else ""
    return (
        f"{first}\n\\usepackage{{amsmath}}\n{links}\\pagestyle{{empty}}\n"
        f"\\begin{{document}}\n{opening}\\thispagestyle{{empty}}\n"
        f"Before.\n\n{body}\nAfter.\n\\end{{document}}\n"
    )


def run_pdflatex(source: Path) -> str:
    """Compile the file in its folder and return the log; an error of TeX fails."""
    done = subprocess.run(
        ["pdflatex", "-no-shell-escape", "-interaction=nonstopmode", "-halt-on-error",
         source.name],
        cwd=source.parent, env={**os.environ, "max_print_line": "1000"},
        capture_output=True, timeout=120, check=False,
    )  # fmt: skip
    log = source.with_suffix(".log").read_text(encoding="latin-1")
    if done.returncode:
        raise AssertionError(re.findall(r"^!.*(?:\n.*){0,4}", log, re.MULTILINE))
    return log


def complaints(log: str) -> list[str]:
    """The lines of a log about boxes, references and missing characters."""
    return _COMPLAINT.findall(log)


def text_of(pdf: Path) -> str:
    """The text of a PDF in the order of TeX, without white space, minus as -, prime as '."""
    done = subprocess.run(
        ["pdftotext", "-raw", "-enc", "UTF-8", str(pdf), "-"],
        capture_output=True, check=True, timeout=60,
    )  # fmt: skip
    text = re.sub(r"\s", "", done.stdout.decode("utf-8"))
    return text.replace("\u2212", "-").replace("\u2032", "'")
