"""Write a file whole or not at all."""

from __future__ import annotations

import contextlib
import os
import tempfile
from collections.abc import Iterator
from pathlib import Path

from ..problems import Problem, UnusableInput


@contextlib.contextmanager
def whole_file(path: Path) -> Iterator[Path]:
    """Give a name beside the final one to write to; on success flush it and rename it into place.

    A kill at any moment leaves the old file or the new one.

    Raises
    ------
    UnusableInput
        If the file can't be written; what was there stays.
    """
    temporary: Path | None = None
    try:
        path.parent.mkdir(parents=True, exist_ok=True)
        handle, name = tempfile.mkstemp(prefix=f".{path.name}.", suffix=".part", dir=path.parent)
        os.close(handle)
        temporary = Path(name)
        yield temporary
        os.chmod(temporary, 0o666 & ~_umask())
        with temporary.open("rb+") as written:
            os.fsync(written.fileno())
        os.replace(temporary, path)
        temporary = None
    except OSError as error:
        says = f"{path} can't be written: {error.strerror or error}."
        raise UnusableInput([Problem("", says, "Check the folder and the space left.")], str(path)) from None
    finally:
        if temporary is not None:
            temporary.unlink(missing_ok=True)


def _umask() -> int:
    mask = os.umask(0)
    os.umask(mask)
    return mask


def write_text(path: Path, text: str) -> None:
    """Write a text as UTF-8 with plain line ends, whole or not at all."""
    with whole_file(path) as temporary:
        temporary.write_text(text, encoding="utf-8", newline="\n")
