"""Reading is bounded and takes regular files only; writing is all or nothing."""

from __future__ import annotations

import errno
import os
import signal
import subprocess
import sys
from pathlib import Path

import pytest

from certgen.errors import FileError, LimitError
from certgen.files import (
    make_folder,
    read_bytes,
    write_bytes_atomically,
    write_text_atomically,
)

ROOT = Path(__file__).parent.parent


def test_a_regular_file_is_read_up_to_the_limit(tmp_path: Path) -> None:
    """Exactly `limit` bytes are read, one more is refused with the limit in the message."""
    path = tmp_path / "a"
    path.write_bytes(b"12345")
    assert read_bytes(path, 5) == b"12345"
    with pytest.raises(LimitError, match="limit of 4 bytes"):
        read_bytes(path, 4)


def test_a_file_that_is_longer_than_its_size_says_is_still_bounded() -> None:
    """Files of /proc have size 0 and contents: the reading itself is bounded."""
    with pytest.raises(LimitError):
        read_bytes("/proc/self/status", 10)


def test_what_is_no_regular_file_is_refused_without_reading(tmp_path: Path) -> None:
    """A folder, a named pipe (which would block for ever) and /dev/zero (endless)."""
    pipe = tmp_path / "pipe.json"
    os.mkfifo(pipe)
    with pytest.raises(FileError, match="folder"):
        read_bytes(tmp_path, 10)
    for path in (pipe, Path("/dev/zero")):
        with pytest.raises(FileError, match="not a regular file"):
            read_bytes(path, 10)


def test_a_pipe_that_takes_the_place_of_a_file_does_not_block(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """Between looking and opening the file may be exchanged."""
    pipe, file = tmp_path / "pipe", tmp_path / "file"
    os.mkfifo(pipe)
    file.write_bytes(b"")
    regular = os.stat(file)
    monkeypatch.setattr(os, "stat", lambda path: regular)
    with pytest.raises(FileError, match="not a regular file"):
        read_bytes(pipe, 10)


def test_a_missing_or_forbidden_file_says_which_and_why(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """The reason is the system's own; a name with a zero byte is an error like others."""
    with pytest.raises(FileError, match=r"cannot read '.*none': no such file"):
        read_bytes(tmp_path / "none", 10)
    with pytest.raises(FileError, match="null"):
        read_bytes("a\0b", 10)

    def forbid(*_: object) -> int:
        raise PermissionError(errno.EACCES, os.strerror(errno.EACCES))

    (tmp_path / "a").touch()
    monkeypatch.setattr(os, "open", forbid)
    with pytest.raises(FileError, match="permission denied"):
        read_bytes(tmp_path / "a", 10)


def test_a_strange_file_name_is_shown_in_ascii(tmp_path: Path) -> None:
    """No control character of a file name reaches the terminal."""
    with pytest.raises(FileError) as caught:
        read_bytes(tmp_path / "\x1b[31mrot\udcff\u00e9", 10)
    assert str(caught.value).isascii()
    assert str(caught.value).isprintable()


def test_writing_replaces_the_whole_file(tmp_path: Path) -> None:
    """New and old files hold exactly the new text, line ends included, and nothing else."""
    path = tmp_path / "a.json"
    for text in ("first\r\nline\n", "second\n"):
        write_text_atomically(path, text)
        assert path.read_bytes() == text.encode()
    assert os.listdir(tmp_path) == ["a.json"]


def test_writing_does_not_follow_a_symbolic_link(tmp_path: Path) -> None:
    """The link is replaced by a file; what it pointed to keeps its text."""
    (tmp_path / "precious").write_text("keep")
    link = tmp_path / "a.json"
    link.symlink_to(tmp_path / "precious")
    write_text_atomically(link, "new")
    assert (tmp_path / "precious").read_text() == "keep"
    assert not link.is_symlink()
    assert link.read_text() == "new"


def test_the_new_file_has_ordinary_permissions(tmp_path: Path) -> None:
    """As open() would make it: the umask decides."""
    plain = tmp_path / "plain"
    plain.touch()
    write_text_atomically(tmp_path / "a", "x")
    assert (tmp_path / "a").stat().st_mode == plain.stat().st_mode


@pytest.mark.parametrize("name", ["fsync", "replace"])
@pytest.mark.parametrize("error", [OSError(errno.ENOSPC, "No space left"), KeyboardInterrupt()])
def test_a_failure_keeps_the_old_file_and_leaves_no_temporary_one(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, name: str, error: BaseException
) -> None:
    """A full disk is a FileError, an interruption stays one; both leave all as it was."""
    path = tmp_path / "a"
    path.write_text("old")

    def fail(*_: object) -> None:
        raise error

    monkeypatch.setattr(os, name, fail)
    expected = FileError if isinstance(error, OSError) else KeyboardInterrupt
    with pytest.raises(expected, match=None if error.args == () else "no space left"):
        write_text_atomically(path, "new")
    assert os.listdir(tmp_path) == ["a"]
    assert path.read_text() == "old"


def _python(script: str, *arguments: str) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-c", script, *arguments],
        capture_output=True, text=True, cwd=ROOT, check=False,
    )  # fmt: skip


def test_a_real_limit_of_the_system_keeps_the_old_file(tmp_path: Path) -> None:
    """The kernel refuses to write beyond 1000 bytes; the old file stays."""
    path = tmp_path / "a"
    path.write_text("old")
    done = _python(
        "import resource, sys\n"
        "from certgen.files import write_text_atomically\n"
        "resource.setrlimit(resource.RLIMIT_FSIZE, (1000, 1000))\n"
        "write_text_atomically(sys.argv[1], 'n' * 100000)",
        str(path),
    )
    assert "FileError: cannot write" in done.stderr
    assert os.listdir(tmp_path) == ["a"]
    assert path.read_text() == "old"


@pytest.mark.parametrize(("step", "text"), [("fsync", "old"), ("replace", "old")])
def test_a_killed_process_leaves_no_half_file(tmp_path: Path, step: str, text: str) -> None:
    """SIGKILL just before the name changes: the old text, whole."""
    path = tmp_path / "a"
    path.write_text("old")
    done = _python(
        "import os, sys\n"
        "from certgen.files import write_text_atomically\n"
        f"os.{step} = lambda *_: os.kill(os.getpid(), 9)\n"
        "write_text_atomically(sys.argv[1], 'new')",
        str(path),
    )
    assert done.returncode == -signal.SIGKILL
    assert path.read_text() == text


def test_a_place_that_cannot_be_written_is_a_file_error(tmp_path: Path) -> None:
    """A folder of that name, a missing folder, a file in the place of a folder."""
    (tmp_path / "file").write_text("x")
    with pytest.raises(FileError, match="folder of this name"):
        write_bytes_atomically(tmp_path, b"")
    with pytest.raises(FileError, match="cannot write"):
        write_bytes_atomically(tmp_path / "none" / "a", b"")
    with pytest.raises(FileError, match="cannot write"):
        write_bytes_atomically(tmp_path / "file" / "a", b"")
    assert os.listdir(tmp_path) == ["file"]


def test_a_folder_is_made_with_its_parents(tmp_path: Path) -> None:
    """Making it again changes nothing; a file in its place is a clear error."""
    for _ in range(2):
        make_folder(tmp_path / "a" / "b")
    assert (tmp_path / "a" / "b").is_dir()
    (tmp_path / "file").touch()
    with pytest.raises(FileError, match="there is a file of this name"):
        make_folder(tmp_path / "file")
    with pytest.raises(FileError, match="cannot create the folder"):
        make_folder(tmp_path / "file" / "below")
