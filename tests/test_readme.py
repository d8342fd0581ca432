"""Every example in README.md is run: what it tells a maker to type works, and what it shows is what comes."""

from __future__ import annotations

import re
import shlex
import shutil
from pathlib import Path

import pytest
from click.testing import CliRunner

from cli.main import main as program
from jigs.spec import Furniture, parse_spec

README = Path(__file__).resolve().parents[1] / "README.md"
TEXT = README.read_text(encoding="utf-8")


def blocks(language: str) -> list[str]:
    """The fenced blocks of one language."""
    return re.findall(rf"```{language}\n(.*?)```", TEXT, flags=re.DOTALL)


COMMANDS = [
    line.removeprefix("$ ") for block in blocks("console") for line in block.splitlines() if line.startswith("$ ")
]
SET_UP = blocks("sh")[0].splitlines()


def run(command: str, folder: Path, monkeypatch: pytest.MonkeyPatch) -> str:
    """What a command of the README prints, run in a folder that holds the demo specs."""
    shutil.copytree(README.parent / "demo_specs", folder / "demo_specs")
    monkeypatch.chdir(folder)
    done = CliRunner().invoke(program, shlex.split(command)[1:])
    assert done.exit_code == 0, done.output
    return done.stdout


@pytest.mark.parametrize("command", COMMANDS)
def test_a_command_of_the_readme_works(command: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    assert command.startswith("splaysheet ")
    assert run(command, tmp_path, monkeypatch)


def test_the_first_set_up_command_ends_by_making_the_sheets_that_it_promises(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    steps = SET_UP[0].split(" && ")
    assert steps[0] == "python3 -m venv .venv"
    command = steps[-1].removeprefix(".venv/bin/")
    run(command, tmp_path, monkeypatch)
    assert (tmp_path / "slipway-stool.pdf").read_bytes().startswith(b"%PDF-")


def test_the_second_set_up_command_installs_the_test_extra_and_runs_the_tests() -> None:
    steps = SET_UP[1].split(" && ")
    assert steps[0] == "python3 -m venv .venv"
    assert '".[test]"' in steps[1]
    assert steps[2] == ".venv/bin/pytest"


@pytest.mark.parametrize("block", blocks("toml"))
def test_the_spec_of_the_readme_can_be_read_and_its_sheets_made(
    block: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    assert isinstance(parse_spec(block.encode(), "README.md"), Furniture)
    (tmp_path / "readme.toml").write_text(block, encoding="utf-8")
    run("splaysheet make readme.toml", tmp_path, monkeypatch)
    assert (tmp_path / "readme.pdf").exists()


def test_every_picture_and_page_that_the_readme_names_is_there() -> None:
    links = re.findall(r"\]\(([^)]+)\)", TEXT)
    assert links
    assert all((README.parent / link).exists() for link in links)


def test_the_readme_names_every_shape_and_every_sheet() -> None:
    from typing import get_args

    from jigs.registry import SHEETS
    from jigs.spec import Seat

    shapes = [get_args(seat.model_fields["shape"].annotation)[0] for seat in get_args(Seat)]
    assert all(f"| `{shape}` |" in TEXT for shape in shapes)
    assert all(f"`{sheet}`" in TEXT for sheet in SHEETS)


def test_the_readme_names_every_key_of_a_spec() -> None:
    from typing import get_args

    from jigs import spec_legs
    from jigs.spec import Furniture, Seat
    from jigs.spec_base import Table

    tables = [model for model in vars(spec_legs).values() if isinstance(model, type) and issubclass(model, Table)]
    keys = {key for model in (*tables, Furniture, *get_args(Seat)) for key in model.model_fields}
    told = set(re.findall(r"[a-z_]+", TEXT))
    assert len(keys) > 50
    assert keys <= told, sorted(keys - told)


def test_the_readme_names_every_code_of_a_caution() -> None:
    """Codes are words in small letters that stand where cautions are made."""
    sources = [path.read_text(encoding="utf-8") for path in (README.parent / "jigs").glob("*.py")]
    made = re.compile(
        r'(?:Caution|Finding|_finding)\((?:[\w.\[\]]+, )?"([a-z-]+)"|code = "([a-z-]+)"|"(two-ways|picture)"'
    )
    codes = {code for text in sources for found in made.findall(text) for code in found if code}
    assert len(codes) >= 24
    told = set(re.findall(r"`([a-z-]+)`", TEXT))
    assert codes <= told, sorted(codes - told)
