"""Every source that the code names can be found: one bibliography and one list."""

from __future__ import annotations

import re
from pathlib import Path

import certgen

ROOT = Path(__file__).parent.parent
CITATION = re.compile(r"\b([A-Z][a-z]+) (1[6-9][0-9]{2}|20[0-9]{2})\b")


def test_every_cited_source_is_listed() -> None:
    """Name and year stand in certgen.bib as one entry, or together in DEVELOPERS.md."""
    bib = (ROOT / "templates" / "certgen.bib").read_text()
    entries = [(key, year) for key, year in re.findall(r"\{([A-Z][a-z]+)(\d{4}),", bib)]
    listed = set(entries) | set(CITATION.findall((ROOT / "DEVELOPERS.md").read_text()))
    cited = {
        citation
        for path in Path(certgen.__file__).parent.rglob("*")
        if path.suffix in (".py", ".md")
        for citation in CITATION.findall(path.read_text())
    }
    assert ("Cartier", "1957") in cited and ("Jordan", "1872") in cited
    assert cited - listed == set()
