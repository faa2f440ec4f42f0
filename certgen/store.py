"""Putting a checked certificate and its appendix into a folder.

`<id>.json` and `<id>.tex` (and `<id>.pdf`) stand side by side.  Nothing that is
not an older version of the same certificate is ever replaced without being
told to: neither a certificate of another claim nor a file that somebody wrote.
"""

from __future__ import annotations

import os
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Literal

from certgen.errors import CertgenError, FileError, LimitError, shorten
from certgen.files import make_folder, read_bytes, write_text_atomically

if TYPE_CHECKING:
    from certgen.api import Certified
    from certgen.claim import FirstOrderClaim

__all__ = ["SavedFile", "save", "save_appendix"]


@dataclass(frozen=True, slots=True)
class SavedFile:
    """A file, and whether it is new, replaces an older one, or held the same text."""

    path: Path
    state: Literal["written", "replaced", "unchanged"]


def save(
    certified: Certified,
    folder: str | os.PathLike[str] = ".",
    *,
    replace: bool = False,
    pdf: bool = False,
) -> tuple[SavedFile, ...]:
    """Write `<id>.json` and `<id>.tex` (`pdf`: and `<id>.pdf`) into `folder`.

    The folder is created where missing.  Raises FileError, before anything is
    written, if one of the names belongs to another claim or to a file that
    certgen did not make, unless `replace` is true.
    """
    claim = certified.claim
    fragment = certified.appendix()
    _require_pdflatex(pdf)
    make_folder(folder)
    base = Path(folder, claim.id)
    if not replace:
        _refuse_other_claim(base.with_suffix(".json"), claim)
        _refuse_foreign(base, fragment, pdf)
    saved = [
        _write(base.with_suffix(".json"), certified.text),
        _write(base.with_suffix(".tex"), fragment),
    ]
    if pdf:
        saved.append(_write_pdf(base.with_suffix(".pdf"), fragment))
    return tuple(saved)


def save_appendix(
    fragment: str,
    folder: str | os.PathLike[str],
    name: str,
    *,
    replace: bool = False,
    pdf: bool = False,
) -> tuple[SavedFile, ...]:
    """Write `name`.tex (`pdf`: and `name`.pdf) into `folder`, as `save` does."""
    _require_pdflatex(pdf)
    make_folder(folder)
    base = Path(folder, name)
    if not replace:
        _refuse_foreign(base, fragment, pdf)
    saved = [_write(base.with_suffix(".tex"), fragment)]
    if pdf:
        saved.append(_write_pdf(base.with_suffix(".pdf"), fragment))
    return tuple(saved)


def _require_pdflatex(pdf: bool) -> None:
    if pdf:
        from certgen.appendix.document import require_pdflatex

        require_pdflatex()


def _write(path: Path, text: str) -> SavedFile:
    old = _old_bytes(path)
    if old == text.encode("utf-8"):
        return SavedFile(path, "unchanged")
    write_text_atomically(path, text)
    return SavedFile(path, "written" if old is None else "replaced")


def _write_pdf(path: Path, fragment: str) -> SavedFile:
    from certgen.appendix import build_pdf, standalone

    build_pdf(standalone(fragment), path)
    return SavedFile(path, "written")


def _old_bytes(path: Path) -> bytes | None:
    """Return what the file holds, None if there is none or a symbolic link."""
    from certgen.codec import BYTES_LIMIT

    if path.is_symlink() or not path.exists():
        return None
    try:
        return read_bytes(path, BYTES_LIMIT)
    except LimitError:
        return b""


def _refuse_other_claim(path: Path, claim: FirstOrderClaim) -> None:
    from certgen.codec import read_certificate

    old = _old_bytes(path)
    if old is None:
        return
    try:
        other = read_certificate(old).certificate.claim
    except CertgenError:
        raise _occupied(path, "is not a certificate that this version can read") from None
    if _key(other) != _key(claim):
        raise _occupied(
            path, f"is a certificate of another claim, {shorten(other.equation)}"
        )


def _key(claim: FirstOrderClaim) -> tuple[object, ...]:
    return (claim.equation, claim.asserts, claim.subject, claim.solution)


def _refuse_foreign(base: Path, fragment: str, pdf: bool) -> None:
    """Refuse to replace a .tex that does not begin as our appendices do, or its .pdf."""
    tex = base.with_suffix(".tex")
    old = _old_bytes(tex)
    if old is not None and not old.startswith(_signature(fragment)):
        raise _occupied(tex, "was not made by certgen")
    if pdf and old is None and base.with_suffix(".pdf").exists():
        raise _occupied(base.with_suffix(".pdf"), "was perhaps not made by certgen")


def _signature(fragment: str) -> bytes:
    """The words with which every appendix begins: its first line up to the id."""
    return " ".join(fragment.split("\n", 1)[0].split()[:2]).encode("utf-8")


def _occupied(path: Path, why: str) -> FileError:
    return FileError(
        f"'{shorten(path, 300)}' exists and {why}; it was not replaced. Choose another "
        "id or folder, or replace it with --replace"
    )
