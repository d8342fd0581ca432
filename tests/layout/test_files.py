"""Files whole or not at all: what is written, what is refused, and what is left behind when something breaks."""

from __future__ import annotations

import os
import socket
import stat
import subprocess
import sys
from pathlib import Path

import pytest

from layout import files
from layout.files import OutputError, write_whole

posix = pytest.mark.skipif(os.name != "posix", reason="rights and links of POSIX")
OLD, NEW = b"as it was\n", b"new\n" * 5000


def names(folder: Path) -> list[str]:
    return sorted(path.name for path in folder.iterdir())


def test_files_are_written_and_nothing_else_is_left(tmp_path):
    write_whole({tmp_path / "a.pdf": NEW, tmp_path / "b.json": b"{}"})
    assert (tmp_path / "a.pdf").read_bytes() == NEW
    assert (tmp_path / "b.json").read_bytes() == b"{}"
    assert names(tmp_path) == ["a.pdf", "b.json"]


def test_an_old_file_is_replaced(tmp_path):
    (tmp_path / "a.pdf").write_bytes(OLD)
    write_whole({tmp_path / "a.pdf": NEW})
    assert (tmp_path / "a.pdf").read_bytes() == NEW


def test_a_name_without_a_folder_is_in_the_current_one(tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    write_whole({Path("stool – Łódź.pdf"): NEW})
    assert names(tmp_path) == ["stool – Łódź.pdf"]


def test_a_name_of_the_greatest_length_is_no_trouble(tmp_path):
    name = "x" * 251 + ".pdf"
    write_whole({tmp_path / name: NEW})
    assert names(tmp_path) == [name]


@posix
@pytest.mark.parametrize("umask", [0o022, 0o077])
def test_a_new_file_has_the_rights_that_new_files_have(tmp_path, umask):
    before = os.umask(umask)
    try:
        write_whole({tmp_path / "a.pdf": NEW})
    finally:
        os.umask(before)
    assert stat.S_IMODE((tmp_path / "a.pdf").stat().st_mode) == 0o666 & ~umask


@posix
def test_a_replaced_file_keeps_its_rights(tmp_path):
    (tmp_path / "a.pdf").write_bytes(OLD)
    (tmp_path / "a.pdf").chmod(0o640)
    write_whole({tmp_path / "a.pdf": NEW})
    assert stat.S_IMODE((tmp_path / "a.pdf").stat().st_mode) == 0o640


@posix
@pytest.mark.parametrize("there", [True, False])
def test_a_link_stays_and_what_it_points_to_is_replaced(tmp_path, there):
    (tmp_path / "real").mkdir()
    target, link = tmp_path / "real" / "a.pdf", tmp_path / "link.pdf"
    if there:
        target.write_bytes(OLD)
    link.symlink_to(target)
    write_whole({link: NEW})
    assert link.is_symlink()
    assert target.read_bytes() == NEW
    assert names(tmp_path) == ["link.pdf", "real"]
    assert names(tmp_path / "real") == ["a.pdf"]


def refused(path: Path, data: bytes = NEW) -> str:
    with pytest.raises(OutputError) as caught:
        write_whole({path: data})
    text = str(caught.value)
    assert text.startswith(str(path))
    assert "is as it was" in text
    return text


def test_a_folder_in_the_files_place_is_refused(tmp_path):
    (tmp_path / "a.pdf").mkdir()
    assert "it is a folder" in refused(tmp_path / "a.pdf")
    assert names(tmp_path) == ["a.pdf"]


def test_a_missing_folder_is_named(tmp_path):
    assert f"there is no folder {tmp_path / 'nowhere'}" in refused(tmp_path / "nowhere" / "a.pdf")


def test_a_file_in_the_folders_place_is_refused(tmp_path):
    (tmp_path / "plain").write_bytes(OLD)
    assert "is not a folder" in refused(tmp_path / "plain" / "a.pdf")
    assert (tmp_path / "plain").read_bytes() == OLD


def test_a_name_that_is_too_long_is_refused_before_anything_is_written(tmp_path):
    (tmp_path / "a.pdf").write_bytes(OLD)
    with pytest.raises(OutputError, match=r"x{300}"):
        write_whole({tmp_path / "a.pdf": NEW, tmp_path / ("x" * 300): NEW})
    assert (tmp_path / "a.pdf").read_bytes() == OLD
    assert names(tmp_path) == ["a.pdf"]


def test_a_name_that_no_system_takes_is_refused(tmp_path):
    with pytest.raises(OutputError):
        write_whole({tmp_path / "a\0b": NEW})
    assert names(tmp_path) == []


@posix
def test_a_pipe_is_refused_and_not_waited_for(tmp_path):
    os.mkfifo(tmp_path / "pipe")
    assert "a device or a pipe" in refused(tmp_path / "pipe")
    assert stat.S_ISFIFO((tmp_path / "pipe").stat().st_mode)


@posix
def test_devices_and_sockets_are_refused(tmp_path, monkeypatch):
    assert "a device or a pipe" in refused(Path("/dev/null"))
    monkeypatch.chdir(tmp_path)
    with socket.socket(socket.AF_UNIX) as listening:
        listening.bind("socket")
        assert "a device or a pipe" in refused(Path("socket"))


@posix
def test_a_ring_of_links_is_refused(tmp_path):
    (tmp_path / "one").symlink_to(tmp_path / "other")
    (tmp_path / "other").symlink_to(tmp_path / "one")
    refused(tmp_path / "one")


def test_a_file_that_may_not_be_written_is_left_alone(tmp_path, monkeypatch):
    (tmp_path / "a.pdf").write_bytes(OLD)
    (tmp_path / "a.pdf").chmod(0o444)
    # Whoever runs the tests may be allowed everything, so the question is answered as for others.
    monkeypatch.setattr(os, "access", lambda path, mode: Path(path).name != "a.pdf")
    assert "it is read-only" in refused(tmp_path / "a.pdf")
    assert (tmp_path / "a.pdf").read_bytes() == OLD


@posix
@pytest.mark.skipif(hasattr(os, "geteuid") and os.geteuid() == 0, reason="root writes everywhere")
def test_a_folder_that_may_not_be_written_is_refused(tmp_path):
    (tmp_path / "shut").mkdir(mode=0o555)
    assert "Permission denied" in refused(tmp_path / "shut" / "a.pdf")


FULL_DISK = """
import resource, sys
from pathlib import Path
from layout.files import OutputError, write_whole
resource.setrlimit(resource.RLIMIT_FSIZE, (4096, 4096))
try:
    write_whole({Path("small"): b"small", Path("a.pdf"): b"x" * 100_000})
except OutputError as error:
    print(error)
    sys.exit(7)
"""


@posix
def test_a_disk_that_fills_up_leaves_the_old_file_and_no_other(tmp_path, root):
    (tmp_path / "a.pdf").write_bytes(OLD)
    run = subprocess.run(
        [sys.executable, "-c", FULL_DISK], cwd=tmp_path, env=os.environ | {"PYTHONPATH": str(root)},
        capture_output=True, text=True,
    )  # fmt: skip
    assert run.returncode == 7, run.stderr
    assert run.stdout.startswith("a.pdf: cannot be written: File too large; what was there is as it was")
    assert (tmp_path / "a.pdf").read_bytes() == OLD
    assert names(tmp_path) == ["a.pdf"]


@pytest.mark.parametrize("stop", [KeyboardInterrupt, MemoryError])
def test_a_stop_in_the_middle_leaves_the_old_files_and_no_others(tmp_path, monkeypatch, stop):
    (tmp_path / "a.pdf").write_bytes(OLD)
    synced = []

    def fsync(handle: int) -> None:
        synced.append(handle)
        if len(synced) == 2:
            raise stop

    monkeypatch.setattr(files.os, "fsync", fsync)
    with pytest.raises(stop):
        write_whole({tmp_path / "a.pdf": NEW, tmp_path / "b.json": NEW})
    assert (tmp_path / "a.pdf").read_bytes() == OLD
    assert names(tmp_path) == ["a.pdf"]


def test_an_exchange_that_fails_halfway_says_which_file_is_new(tmp_path, monkeypatch):
    (tmp_path / "b.json").write_bytes(OLD)
    replace = Path.replace

    def locked(self: Path, target: Path) -> Path:
        if target.name == "b.json":
            raise PermissionError(13, "in use by another program")
        return replace(self, target)

    monkeypatch.setattr(Path, "replace", locked)
    with pytest.raises(OutputError, match=r"b\.json: cannot be written: in use .* as it was; .*a\.pdf was written"):
        write_whole({tmp_path / "a.pdf": NEW, tmp_path / "b.json": NEW})
    assert (tmp_path / "b.json").read_bytes() == OLD
    assert names(tmp_path) == ["a.pdf", "b.json"]


def test_all_files_are_on_the_disk_before_the_first_is_exchanged(tmp_path, monkeypatch):
    waiting = []
    replace = Path.replace

    def counted(self: Path, target: Path) -> Path:
        waiting.append(len([path for path in tmp_path.iterdir() if path.suffix == ".part"]))
        return replace(self, target)

    monkeypatch.setattr(Path, "replace", counted)
    write_whole({tmp_path / name: NEW for name in ("a", "b", "c")})
    assert waiting == [3, 2, 1]
