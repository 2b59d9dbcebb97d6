"""Results into files: whole or not at all, and never over an existing file unasked."""

from __future__ import annotations

import os
from collections.abc import Callable
from pathlib import Path

from igu.errors import OutputError
from igu.terminal.plain import HANDLER

Writer = Callable[[Path], None]


def refuse_existing(path: Path, *, force: bool) -> None:
    """Raise OutputError where the file exists and may not be replaced; to be asked before a long run."""
    if path.exists() and not path.is_file():
        raise OutputError(f"{path} is no ordinary file")
    if path.exists() and not force:
        raise OutputError(f"{path} exists already; --force replaces it")
    if not path.parent.is_dir():
        raise OutputError(f"{path}: there is no folder {path.parent}")


def write_text(path: Path, text: str, *, force: bool) -> None:
    """Write a text file in UTF-8."""
    write_whole(path, lambda part: _put(part, text), force=force)


def _put(path: Path, text: str) -> None:
    path.write_text(text if text.endswith("\n") else text + "\n", encoding="utf-8", errors=HANDLER)


def write_whole(path: Path, writer: Writer, *, force: bool) -> None:
    """Let the writer fill a file beside the target, then move it there in one step."""
    refuse_existing(path, force=force)
    import tempfile

    target = Path(os.path.realpath(path))  # a link stays a link
    part: Path | None = None
    try:
        handle, name = tempfile.mkstemp(dir=target.parent, prefix=".igu-", suffix=path.suffix)
        os.close(handle)
        part = Path(name)
        writer(part)
        part.chmod(0o666 & ~_umask())
        part.replace(target)
    except OSError as error:
        raise OutputError(f"{path} could not be written: {error.strerror or error}") from error
    finally:
        if part is not None:
            part.unlink(missing_ok=True)


def _umask() -> int:
    mask = os.umask(0)
    os.umask(mask)
    return mask
