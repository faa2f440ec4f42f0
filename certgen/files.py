"""Reading and writing files: bounded, regular files only, all or nothing.

A folder, a named pipe, a device or a huge file under the expected name is a
clear error and never a process that hangs or fills the memory.
"""

from __future__ import annotations

import os
import stat
from contextlib import suppress

from certgen.errors import FileError, LimitError, shorten

__all__ = ["make_folder", "read_bytes", "write_bytes_atomically", "write_text_atomically"]

_PATH_SHOWN = 300


def _reason(error: OSError | ValueError) -> str:
    text = getattr(error, "strerror", None) or str(error)
    return text[:1].lower() + text[1:]


def _failure(action: str, path: str | os.PathLike[str], why: str) -> FileError:
    return FileError(f"cannot {action} '{shorten(os.fspath(path), _PATH_SHOWN)}': {why}")


def read_bytes(path: str | os.PathLike[str], limit: int) -> bytes:
    """Return the bytes of a regular file of at most `limit` bytes.

    Raises FileError if the file is missing, not readable or not a regular file
    (symbolic links are followed), LimitError if it is longer than `limit`.
    """
    try:
        _require_regular(path, os.stat(path))
        # O_NONBLOCK: should a pipe take the file's place in between, do not wait.
        handle = os.open(path, os.O_RDONLY | getattr(os, "O_NONBLOCK", 0))
        with open(handle, "rb") as file:
            status = os.fstat(handle)
            _require_regular(path, status)
            data = b"" if status.st_size > limit else file.read(limit + 1)
    except (OSError, ValueError) as error:
        raise _failure("read", path, _reason(error)) from None
    if status.st_size > limit or len(data) > limit:
        raise LimitError(
            f"'{shorten(os.fspath(path), _PATH_SHOWN)}' is longer than the limit of "
            f"{limit} bytes"
        )
    return data


def _require_regular(path: str | os.PathLike[str], status: os.stat_result) -> None:
    if stat.S_ISDIR(status.st_mode):
        raise _failure("read", path, "it is a folder, not a file")
    if not stat.S_ISREG(status.st_mode):
        raise _failure("read", path, "it is not a regular file")


def make_folder(path: str | os.PathLike[str]) -> None:
    """Create the folder, and its parents, where missing; FileError if impossible."""
    try:
        os.makedirs(path, exist_ok=True)
    except (OSError, ValueError) as error:
        why = "there is a file of this name" if os.path.isfile(path) else _reason(error)
        raise _failure("create the folder", path, why) from None


def write_text_atomically(path: str | os.PathLike[str], text: str) -> None:
    """Write `text` (UTF-8, line ends as they are) as `write_bytes_atomically` does."""
    write_bytes_atomically(path, text.encode("utf-8"))


def write_bytes_atomically(path: str | os.PathLike[str], data: bytes) -> None:
    """Put `data` in place of the file `path`, at once and as a whole.

    Whatever happens, `path` holds the old bytes or the new ones, never a part.
    A symbolic link is replaced and not followed.  Raises FileError, and then
    leaves the old file and no temporary one.
    """
    folder = os.path.dirname(path) or "."
    temporary = os.path.join(folder, f".{os.urandom(8).hex()}.tmp")
    try:
        if os.path.isdir(path) and not os.path.islink(path):
            raise _failure("write", path, "there is a folder of this name")
        _write_synced(temporary, data)
        os.replace(temporary, path)
    except BaseException as error:
        with suppress(OSError, ValueError):
            os.unlink(temporary)
        if isinstance(error, (OSError, ValueError)):
            raise _failure("write", path, _reason(error)) from None
        raise
    _sync_folder(folder)


def _write_synced(path: str, data: bytes) -> None:
    with open(os.open(path, os.O_WRONLY | os.O_CREAT | os.O_EXCL, 0o666), "wb") as file:
        file.write(data)
        file.flush()
        os.fsync(file.fileno())


def _sync_folder(folder: str) -> None:
    """Make the new name durable; not every system can open a folder, and none must."""
    with suppress(OSError):
        handle = os.open(folder, os.O_RDONLY)
        try:
            os.fsync(handle)
        finally:
            os.close(handle)
