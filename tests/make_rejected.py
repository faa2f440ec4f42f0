"""Write samples/rejected: `python -m tests.make_rejected`.

One tampered certificate for every code that can occur in a stored file, texts that
are not read at all, and a README that says what is wrong with each.
"""

from __future__ import annotations

from pathlib import Path

from certgen.checker.codes import CODES
from tests.rejected import AS_WRITTEN_DIFFERS, TAMPERED, UNREADABLE

FOLDER = Path(__file__).parents[1] / "samples" / "rejected"

HEAD = """\
# Rejected certificates

Certificates from Tarnhaven that somebody has tampered with. The digest was computed
again after each change (but in `digest.json`), so that only the mathematics, or the
form of the text, gives them away. Each file is named after the code with which the
checker rejects it; `malformed-`, `unsupported-` and `limit-` files are refused before
anything is computed.

    certgen check samples/rejected

The code `arithmetics-disagree` has no file: it would take a defect of the checker.

| file | what is wrong | code | exit status |
|---|---|---|---|
"""


def files() -> dict[str, str]:
    """The name and content of every file of the folder."""
    tampered = [t for t in TAMPERED if t.name in CODES] + [AS_WRITTEN_DIFFERS]
    rows = [(f"{t.name}.json", t.wrong, f"`{t.code}`", 1) for t in tampered]
    rows += [(f"{u.name}.json", u.wrong, "", u.status) for u in UNREADABLE]
    lines = ["| `{}` | {} | {} | {} |".format(*row) for row in rows]
    out = {f"{t.name}.json": t.text for t in [*tampered, *UNREADABLE]}
    return {**out, "README.md": HEAD + "\n".join(lines) + "\n"}


def main() -> None:
    FOLDER.mkdir(parents=True, exist_ok=True)
    for name, content in files().items():
        (FOLDER / name).write_text(content, encoding="ascii", newline="\n")


if __name__ == "__main__":
    main()
