"""The command line as a maker meets it: what goes where, exit codes, and what is left on the disk."""

from __future__ import annotations

import io
import json
import os
import re
import signal
import subprocess
import sys
import tomllib
from pathlib import Path

import click
import click.testing
import pypdf
import pytest
from click.shell_completion import ShellComplete

from cli import VERSION
from cli.main import REMINDER, faces_to_print, main
from jigs.registry import SHEETS
from layout.paper import DEFAULT_MARGIN_MM, DEFAULT_OVERLAP_MM, DEFAULT_SIZE, SIZES_MM

STOOL = """
name = "Łódź stool"
[seat]
shape = "round"
diameter = 300
thickness = 40
height = 420
[[legs]]
name = "front"
at = [80, 80]
mirror = true
splay = 8
rake = 6
mortise = 25
[[legs]]
name = "back"
at = [0, 240]
splay = 0
rake = 12
mortise = 25
"""


@pytest.fixture
def folder(tmp_path, monkeypatch) -> Path:
    """A folder with a spec in it, where the command is run."""
    monkeypatch.chdir(tmp_path)
    (tmp_path / "stool.toml").write_text(STOOL, encoding="utf-8")
    return tmp_path


def run(*arguments: str) -> click.testing.Result:
    result = click.testing.CliRunner().invoke(main, arguments, prog_name="splaysheet")
    if result.exception and not isinstance(result.exception, SystemExit):
        raise result.exception
    return result


def sheets_of(data: bytes) -> list[str]:
    """The sheets in a PDF, by its bookmarks."""
    return [entry.title for entry in pypdf.PdfReader(io.BytesIO(data)).outline if not isinstance(entry, list)]


def process(folder: Path, *arguments: str, **options) -> subprocess.CompletedProcess:
    root = Path(__file__).resolve().parent.parent.parent
    environment = os.environ | {"PYTHONPATH": str(root), **options.pop("env", {})}
    command = [sys.executable, "-m", "cli.main", *arguments]
    return subprocess.run(command, cwd=folder, env=environment, capture_output=True, check=False, **options)


# Help


def test_version_is_the_projects(root):
    project = tomllib.loads((root / "pyproject.toml").read_text(encoding="utf-8"))["project"]
    assert project["version"] == VERSION
    assert run("--version").output == f"splaysheet {VERSION}\n"


def test_help_tells_of_every_sheet_paper_and_default():
    assert "slipway-stool.toml" in run("--help").output
    text = " ".join(run("make", "--help").output.split())
    listed = ", ".join(SHEETS[:-1]) + f" or {SHEETS[-1]}"
    assert listed in text
    assert ", ".join(SIZES_MM) in text
    assert f"Else {DEFAULT_SIZE}" in text
    assert f"Else {DEFAULT_MARGIN_MM:g} mm." in text
    assert f"Else {DEFAULT_OVERLAP_MM:g} mm." in text
    assert "100 %" in text


def test_help_keeps_to_narrow_terminals():
    for command in ([], ["make"], ["angles"]):
        assert max(map(len, run(*command, "--help").output.splitlines())) <= 80


@pytest.mark.parametrize(
    ("option", "start", "expected"),
    [
        ("--only", "s", ["setting-out", "scale", "strips"]),
        ("--paper", "let", ["letter"]),
        ("--face", "u", ["underside"]),
    ],
)
def test_the_shell_completes_names(option, start, expected):
    complete = ShellComplete(main, {}, "splaysheet", "_SPLAYSHEET_COMPLETE")
    assert [item.value for item in complete.get_completions(["make", option], start)] == expected


# make


def test_make_writes_the_pdf_here_under_the_specs_name(folder):
    (folder / "below").mkdir()
    (folder / "stool.toml").rename(folder / "below" / "stool.toml")
    result = run("make", "below/stool.toml")
    assert result.exit_code == 0
    assert sorted(path.name for path in folder.iterdir()) == ["below", "stool.pdf"]
    reader = pypdf.PdfReader(folder / "stool.pdf")
    assert reader.metadata == {"/Title": "Łódź stool", "/Producer": f"splaysheet {VERSION}"}
    assert [name.lower() for name in sheets_of((folder / "stool.pdf").read_bytes())] == list(SHEETS)


def test_make_lists_the_pages_and_ends_with_the_reminder(folder):
    result = run("make", "stool.toml")
    count = len(pypdf.PdfReader(folder / "stool.pdf").pages)
    lines = result.stdout.splitlines()
    assert lines[0] == f"stool.pdf: {count} pages"
    assert lines[-1] == REMINDER
    numbers = [int(n) for line in lines[1:-1] for n in re.findall(r"\d+", line.partition("  ")[0])]
    assert (numbers[0], numbers[-1]) == (1, count)
    assert any(line.rstrip().endswith("card") for line in lines[1:-1])


def test_progress_and_warnings_go_to_standard_error(folder):
    result = run("make", "stool.toml")
    assert re.search(r"^stool\.toml: legs\[1\]: .+ \[[a-z-]+\]$", result.stderr, re.MULTILINE)
    assert "stool.pdf: writing" in result.stderr
    assert "legs[" not in result.stdout


def test_quiet_leaves_only_warnings(folder):
    result = run("make", "stool.toml", "--quiet")
    assert result.stdout == ""
    assert all(
        re.fullmatch(r"stool\.toml: [a-z.]+(\[\d\])?: .+ \[[a-z-]+\]", line) for line in result.stderr.splitlines()
    )
    assert (folder / "stool.pdf").exists()


@pytest.mark.parametrize(
    ("only", "expected"),
    [
        (["--only", "cards"], ["Cards"]),
        (["--only", "template,scale"], ["Scale", "Template"]),
        (["--only", "Strips", "--only", "cards, scale"], ["Scale", "Cards", "Strips"]),
    ],
)
def test_only_picks_sheets_and_keeps_their_order(folder, only, expected):
    assert run("make", "stool.toml", *only).exit_code == 0
    assert sheets_of((folder / "stool.pdf").read_bytes()) == expected


@pytest.mark.parametrize(
    ("asked", "drilled", "faces"),
    [
        ("drilled", "underside", ("underside",)),
        ("drilled", "top", ("top",)),
        ("underside", "underside", ("underside",)),
        ("top", "underside", ("underside", "top")),
        ("underside", "top", ("top", "underside")),
        ("both", "underside", ("underside", "top")),
        ("both", "top", ("top", "underside")),
    ],
)
def test_the_drilled_faces_template_is_always_printed_and_comes_first(asked, drilled, faces):
    assert faces_to_print(asked, (drilled,)) == faces


@pytest.mark.parametrize(("face", "names"), [("drilled", ["underside"]), ("both", ["underside", "top"])])
def test_faces_reach_the_sheets(folder, face, names):
    run("make", "stool.toml", "--only", "template", "--face", face, "--report", "r.json")
    report = json.loads((folder / "r.json").read_text(encoding="utf-8"))
    assert [piece["piece"] for piece in report["pieces"]] == [f"template {name}" for name in names]


def test_the_report_names_the_pdf_and_its_pages(folder):
    run("make", "stool.toml", "-o", "out.pdf", "--report", "where.json", "--paper", "letter")
    report = json.loads((folder / "where.json").read_text(encoding="utf-8"))
    assert (report["file"], report["paper"]) == ("out.pdf", "letter")
    pages = pypdf.PdfReader(folder / "out.pdf").pages
    assert len(report["pages"]) == len(pages)
    for told, page in zip(report["pages"], pages, strict=True):
        size = [float(page.mediabox.width) / 72 * 25.4, float(page.mediabox.height) / 72 * 25.4]
        assert told["size_mm"] == pytest.approx(size, abs=0.001)


@pytest.mark.skipif(sys.platform != "linux", reason="names that are not Unicode are Linux's")
def test_a_name_that_is_not_unicode_is_a_name_all_the_same(folder):
    name = os.fsdecode(b"st\xfcl.pdf")
    done = process(folder, "make", "stool.toml", "-o", name, "--report", "r.json", "--only", "scale")
    assert done.returncode == 0, done.stderr
    assert (folder / name).exists()
    assert json.loads((folder / "r.json").read_text(encoding="utf-8"))["file"] == name


def test_lengths_are_read_as_makers_write_them(folder):
    contents = set()
    for margin in ("12.7", "12.7 mm", "1/2 in", '1/2"', "1.27cm"):
        assert run("make", "stool.toml", "--margin", margin, "--overlap", "15 mm", "--only", "template").exit_code == 0
        contents.add((folder / "stool.pdf").read_bytes())
    assert len(contents) == 1
    run("make", "stool.toml", "--only", "template")
    assert (folder / "stool.pdf").read_bytes() not in contents


def test_the_same_spec_and_options_give_the_same_bytes(folder):
    made = set()
    for zone in ("UTC", "Asia/Tokyo"):
        done = process(
            folder, "make", "stool.toml", "-o", f"{zone[:3]}.pdf", env={"TZ": zone, "PYTHONHASHSEED": "random"}
        )
        assert done.returncode == 0, done.stderr
        made.add((folder / f"{zone[:3]}.pdf").read_bytes())
    assert len(made) == 1


def test_the_oval_stool_is_a_small_file(folder, demo_specs):
    assert run("make", str(demo_specs / "slipway-stool.toml")).exit_code == 0
    assert (folder / "slipway-stool.pdf").stat().st_size <= 150_000


@pytest.mark.parametrize(("status", "words"), [(0, ""), (1, "could not be opened")])
def test_open_hands_the_written_file_to_the_viewer(folder, monkeypatch, status, words):
    opened = []

    def launch(path: str) -> int:
        opened.append((path, Path(path).exists()))
        return status

    monkeypatch.setattr(click, "launch", launch)
    result = run("make", "stool.toml", "--only", "scale", "--open")
    assert result.exit_code == 0
    assert opened == [("stool.pdf", True)]
    assert words in result.stderr


# angles


def test_angles_prints_a_table_of_80_columns(folder):
    result = run("angles", "stool.toml")
    assert result.exit_code == 0
    assert "front left" in result.stdout
    assert max(map(len, result.stdout.splitlines())) <= 80


def test_angles_gives_json_alone_on_standard_output(folder):
    result = run("angles", "stool.toml", "--json")
    found = json.loads(result.stdout)
    assert found["name"] == "Łódź stool"
    assert [leg["name"] for leg in found["legs"]] == ["front left", "front right", "back"]
    assert found["warnings"][0]["code"] in result.stderr


# What cannot be done


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        ([], "Missing argument 'SPEC'"),
        (["stool.toml", "--paper", "a44"], "'a44'"),
        (["stool.toml", "--paper", "100x100mm"], "at least 140 mm"),
        (["stool.toml", "--margin", "wide"], "'wide' is not a length"),
        (["stool.toml", "--margin", "50"], "margin"),
        (["stool.toml", "--margin", "-1"], "margin"),
        (["stool.toml", "--overlap", "1"], "overlap"),
        (["stool.toml", "--only", "cards,tiles"], "'tiles' is not a sheet; choose from setting-out, scale, template"),
        (["stool.toml", "--only", ""], "'' is not a sheet"),
        (["stool.toml", "--face", "side"], "'side' is not one of"),
        (["stool.toml", "-o", "stool.toml"], "the PDF would be written over the spec"),
        (["stool.toml", "-o", "./sub/../stool.toml"], "the PDF would be written over the spec"),
        (["stool.toml", "--report", "stool.toml"], "the report would be written over the spec"),
        (["stool.toml", "--report", "stool.pdf"], "the report would be written over the PDF"),
        (["stool.toml", "-o", "x", "--report", "./x"], "the report would be written over the PDF"),
        (["stool.toml", "--scale", "2"], "No such option"),
    ],
)
def test_a_wrong_command_line_is_2_and_writes_nothing(folder, arguments, words):
    (folder / "sub").mkdir()
    result = run("make", *arguments)
    assert result.exit_code == 2
    assert words in " ".join(result.stderr.split())
    assert result.stdout == ""
    assert sorted(path.name for path in folder.iterdir()) == ["stool.toml", "sub"]
    assert (folder / "stool.toml").read_text(encoding="utf-8") == STOOL


def test_a_link_to_the_spec_is_the_spec(folder):
    (folder / "link").symlink_to(folder / "stool.toml")
    assert run("make", "stool.toml", "-o", "link").exit_code == 2
    os.link(folder / "stool.toml", folder / "hard")
    assert run("make", "stool.toml", "-o", "hard").exit_code == 2


def test_a_spec_called_pdf_is_not_written_over(folder):
    (folder / "stool.toml").rename(folder / "stool.pdf")
    result = run("make", "stool.pdf")
    assert result.exit_code == 2
    assert (folder / "stool.pdf").read_text(encoding="utf-8") == STOOL


def test_a_wrong_spec_is_1_with_a_line_for_each_problem(folder):
    wrong = STOOL.replace("splay = 8", "splay = 95").replace("height = 420", "height = 'tall'")
    (folder / "stool.toml").write_text(wrong, encoding="utf-8")
    for command in ("make", "angles"):
        result = run(command, "stool.toml")
        assert result.exit_code == 1
        assert result.stdout == ""
        lines = [line for line in result.stderr.splitlines() if "working" not in line]
        assert [line.split(": ")[:2] for line in lines] == [
            ["stool.toml", "seat.height"],
            ["stool.toml", "legs[0].splay"],
        ]
    assert not (folder / "stool.pdf").exists()


@pytest.mark.parametrize("command", ["make", "angles"])
def test_a_missing_spec_is_1(folder, command):
    result = run(command, "nowhere.toml")
    assert result.exit_code == 1
    assert "nowhere.toml: " in result.stderr


def test_paper_that_cannot_hold_a_piece_is_1_and_says_what_would(folder):
    (folder / "stool.pdf").write_bytes(b"as it was")
    (folder / "tall.toml").write_text(STOOL.replace("height = 420", "height = 1200"), encoding="utf-8")
    result = run("make", "tall.toml", "--paper", "140x210mm", "-o", "stool.pdf")
    assert result.exit_code == 1
    assert "mm" in result.stderr
    assert (folder / "stool.pdf").read_bytes() == b"as it was"


def test_an_output_that_cannot_be_written_is_1(folder):
    for output, words in (("nowhere/a.pdf", "there is no folder"), (".", "it is a folder")):
        result = run("make", "stool.toml", "-o", output, "--only", "scale")
        assert result.exit_code == 1
        assert words in result.stderr
        assert result.stdout == ""
    assert [path.name for path in folder.iterdir()] == ["stool.toml"]


def test_a_report_that_cannot_be_written_keeps_the_pdf_from_being_written(folder):
    assert run("make", "stool.toml", "--only", "scale", "--report", "nowhere/r.json").exit_code == 1
    assert [path.name for path in folder.iterdir()] == ["stool.toml"]


def test_a_bug_stays_a_traceback(folder, monkeypatch):
    def broken(*arguments: object) -> None:
        raise RuntimeError("a bug")

    monkeypatch.setattr("layout.pdf.pdf_bytes", broken)
    with pytest.raises(RuntimeError, match="a bug"):
        run("make", "stool.toml", "--only", "scale")


# Interrupts, pipes, terminals


def test_ctrl_c_says_that_the_old_file_is_as_it_was(folder, monkeypatch):
    (folder / "stool.pdf").write_bytes(b"as it was")

    def interrupted(*arguments: object) -> None:
        raise KeyboardInterrupt

    monkeypatch.setattr("layout.pdf.pdf_bytes", interrupted)
    result = run("make", "stool.toml", "--only", "scale")
    assert result.exit_code == 1
    assert result.stderr.endswith("stopped: stool.pdf is as it was\n")
    assert (folder / "stool.pdf").read_bytes() == b"as it was"


@pytest.mark.skipif(os.name != "posix", reason="signals of POSIX")
def test_a_real_interrupt_leaves_no_trace(folder):
    """Standard error's first line comes before the work; the signal is sent on it."""
    environment = os.environ | {"PYTHONPATH": str(Path(__file__).resolve().parent.parent.parent)}
    command = [sys.executable, "-m", "cli.main", "make", "stool.toml"]
    with subprocess.Popen(command, cwd=folder, env=environment, stderr=subprocess.PIPE, text=True) as running:
        assert running.stderr is not None
        running.stderr.readline()
        running.send_signal(signal.SIGINT)
        told = running.stderr.read()
    assert running.returncode == 1
    assert "stopped: stool.pdf is as it was" in told
    assert "Traceback" not in told
    assert [path.name for path in folder.iterdir()] == ["stool.toml"]


@pytest.mark.skipif(os.name != "posix", reason="pipes of POSIX")
@pytest.mark.parametrize("arguments", [["angles", "stool.toml"], ["make", "stool.toml", "--only", "scale"]])
def test_a_reader_that_goes_away_is_no_error(folder, arguments):
    reading, writing = os.pipe()
    os.close(reading)
    root = Path(__file__).resolve().parent.parent.parent
    environment = os.environ | {"PYTHONPATH": str(root)}
    command = [sys.executable, "-m", "cli.main", *arguments]
    for stream in ("stdout", "stderr"):
        other = {"stdout": "stderr", "stderr": "stdout"}[stream]
        done = subprocess.run(
            command, cwd=folder, env=environment, check=False, **{stream: writing, other: subprocess.PIPE}
        )
        assert done.returncode == 0
        assert b"Traceback" not in (done.stderr or b"")
        assert b"Broken" not in (done.stderr or b"")
        assert arguments[0] == "angles" or (folder / "stool.pdf").exists()
        (folder / "stool.pdf").unlink(missing_ok=True)
    os.close(writing)


@pytest.mark.skipif(not Path("/dev/full").exists(), reason="a device of Linux")
def test_a_full_disk_behind_standard_output_is_1(folder):
    root = Path(__file__).resolve().parent.parent.parent
    command = [sys.executable, "-m", "cli.main", "angles", "stool.toml"]
    with Path("/dev/full").open("wb") as full:
        done = subprocess.run(
            command,
            cwd=folder,
            env=os.environ | {"PYTHONPATH": str(root)},
            stdout=full,
            stderr=subprocess.PIPE,
            check=False,
        )
    assert done.returncode == 1
    assert b"standard output: No space left" in done.stderr
    assert b"Traceback" not in done.stderr


@pytest.mark.parametrize("encoding", ["ascii", "cp1252", "utf-8"])
@pytest.mark.parametrize("arguments", [["angles", "stool.toml"], ["make", "stool.toml"]])
def test_no_terminal_is_too_poor_for_the_words(folder, arguments, encoding):
    done = process(folder, *arguments, env={"PYTHONIOENCODING": encoding, "PYTHONUTF8": "0"})
    assert done.returncode == 0, done.stderr
    # Where a terminal claims to know ASCII alone, click takes it for one that was set up badly and writes UTF-8.
    assert done.stdout.decode(encoding if encoding != "ascii" else "utf-8")


def test_json_is_the_same_bytes_whatever_the_terminal(folder):
    outputs = {
        process(folder, "angles", "stool.toml", "--json", env={"PYTHONIOENCODING": e}).stdout
        for e in ("ascii", "utf-8")
    }
    assert len(outputs) == 1
    assert json.loads(outputs.pop())["name"] == "Łódź stool"
