"""samples/rejected: every file is refused for the reason in its name."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest

from certgen.checker import check
from certgen.checker.__main__ import main
from certgen.checker.codes import CODES
from certgen.codec import read_certificate
from certgen.errors import CertgenError, RejectedError
from certgen.notation import verify_as_written
from tests.make_rejected import FOLDER, files
from tests.rejected import UNREADABLE

STATUS = {f"{u.name}.json": u.status for u in UNREADABLE}
FILES = sorted(FOLDER.glob("*.json"))
REFUSED_UNREAD = [path for path in FILES if path.name in STATUS]
TAMPERED = [path for path in FILES if path.name not in STATUS]


def whole_check(path: Path, arithmetic: Any) -> None:
    """What `certgen check` does: the checker, and the author's text."""
    verify_as_written(check(path.read_bytes(), arithmetic=arithmetic).certificate.claim)


def test_the_folder_is_what_the_script_writes() -> None:
    """`python -m tests.make_rejected` has been run since the last change."""
    found = {path.name: path.read_text(encoding="ascii") for path in FOLDER.iterdir()}
    assert found == files()


def test_there_is_a_file_for_every_code() -> None:
    """Every code that can occur in a stored file; the README names each file."""
    assert {path.stem for path in TAMPERED} == set(CODES) - {"arithmetics-disagree"}
    readme = (FOLDER / "README.md").read_text()
    assert all(f"`{path.name}`" in readme for path in FILES)


@pytest.mark.parametrize("arithmetic", ["plain", "flint", "both"])
@pytest.mark.parametrize("path", TAMPERED, ids=lambda path: path.stem)
def test_each_file_is_rejected_with_its_own_code(path: Path, arithmetic: Any) -> None:
    """The code is the name of the file."""
    with pytest.raises(RejectedError) as caught:
        whole_check(path, arithmetic)
    assert (caught.value.code, caught.value.status) == (path.stem, 1)


@pytest.mark.parametrize("arithmetic", ["plain", "flint"])
@pytest.mark.parametrize("path", REFUSED_UNREAD, ids=lambda path: path.stem)
def test_what_is_not_read_has_its_status(
    path: Path, arithmetic: str, capsys: pytest.CaptureFixture[str]
) -> None:
    """malformed 2, limit 3, unsupported 4; also from the command of the checker."""
    status = {"malformed": 2, "limit": 3, "unsupported": 4}[path.stem.split("-")[0]]
    assert STATUS[path.name] == status
    assert main(["--arithmetic", arithmetic, str(path)]) == status
    assert str(path) in capsys.readouterr().out


def test_the_files_find_a_checker_that_does_not_check() -> None:
    """A parse-only checker lets almost every tampered file through, this one none."""

    def survives(path: Path, reader: Any) -> bool:
        try:
            reader(path)
        except CertgenError:
            return False
        return True

    by_reading = [p for p in FILES if survives(p, lambda p: read_certificate(p.read_bytes()))]
    assert {p.stem for p in TAMPERED} - {p.stem for p in by_reading} == {
        "vacuous", "not-canonical",
    }  # fmt: skip
    by_accepting = [p for p in FILES if survives(p, lambda p: None)]
    assert len(by_accepting) == len(FILES) == len(CODES) - 1 + len(UNREADABLE)
    assert not [p for p in FILES if survives(p, lambda p: whole_check(p, "both"))]


def test_only_the_author_s_text_escapes_the_checker_alone(
    capsys: pytest.CaptureFixture[str],
) -> None:
    """`python -m certgen.checker` says itself that it does not compare that text."""
    accepted = [p.stem for p in TAMPERED if main([str(p)]) == 0]
    assert accepted == ["as-written-differs"]
    assert "as_written" in capsys.readouterr().err
