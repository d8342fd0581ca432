"""Files written whole or not at all.

Owns the way from bytes to the disk: a new file beside the old one, then one exchange. Imports nothing of ours.
"""

from __future__ import annotations

import contextlib
import os
import secrets
import stat
from collections.abc import Iterator, Mapping
from pathlib import Path


class OutputError(Exception):
    """A file cannot be written; what stood in its place is as it was."""


def write_whole(files: Mapping[Path, bytes]) -> None:
    """Write every file, or none: all are on the disk under passing names before the first takes its place.

    A link is followed and what it points to is replaced. Raises OutputError.
    """
    with contextlib.ExitStack() as passing:
        ready = []
        for path, data in files.items():
            with _explained(path):
                target = _target(path)
                ready.append((path, passing.enter_context(_beside(target, data)), target))
        _exchange(ready)


def _exchange(ready: list[tuple[Path, Path, Path]]) -> None:
    done: list[str] = []
    for path, temporary, target in ready:
        with _explained(path, done):
            temporary.replace(target)
        done.append(str(path))


@contextlib.contextmanager
def _explained(path: Path, done: list[str] | None = None) -> Iterator[None]:
    """Turns the system's refusal into a sentence."""
    try:
        yield
    except (OSError, ValueError) as error:
        # A null character in a name is a ValueError.
        reason = (error.strerror if isinstance(error, OSError) else None) or str(error)
        already = f"; {' and '.join(done)} was written" if done else ""
        raise OutputError(f"{path}: cannot be written: {reason}; what was there is as it was{already}") from None


def _target(path: Path) -> Path:
    """The file that will be replaced. Raises OSError where that is no file, or one that may not be written."""
    target = Path(os.path.realpath(path))
    _check_folder(target.parent)
    try:
        mode = target.stat().st_mode
    except FileNotFoundError:
        return target
    if stat.S_ISDIR(mode):
        raise OSError(0, "it is a folder")
    if not stat.S_ISREG(mode):
        raise OSError(0, "it is a device or a pipe, not a file")
    if not os.access(target, os.W_OK):
        raise OSError(0, "it is read-only")
    return target


def _check_folder(folder: Path) -> None:
    if not folder.exists():
        raise OSError(0, f"there is no folder {folder}")
    if not folder.is_dir():
        raise OSError(0, f"{folder} is not a folder")


@contextlib.contextmanager
def _beside(target: Path, data: bytes) -> Iterator[Path]:
    """The bytes on the disk in a new file of the target's folder, which is gone afterwards unless it was moved."""
    temporary = target.with_name(f".{secrets.token_hex(8)}.part")
    try:
        # Only ever a file that this process makes ("x"), with the rights that the process gives to new files.
        with temporary.open("xb") as file:
            file.write(data)
            file.flush()
            os.fsync(file.fileno())
        _keep_rights(target, temporary)
        yield temporary
    finally:
        with contextlib.suppress(OSError):
            temporary.unlink(missing_ok=True)


def _keep_rights(target: Path, temporary: Path) -> None:
    with contextlib.suppress(FileNotFoundError, PermissionError):
        temporary.chmod(stat.S_IMODE(target.stat().st_mode))
