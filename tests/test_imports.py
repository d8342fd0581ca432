"""Which way imports run: cli -> jigs and layout, jigs -> layout's ground, layout -> earlier layers of its own."""

from __future__ import annotations

import ast
import os
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parent.parent
HOUSE = ("cli", "jigs", "layout")

# Layout's modules from the ground up. Each may import those of earlier layers, and no others.
LAYERS = (
    {"geometry", "faces", "files"},
    {"curves", "lettering", "room", "cover", "flow"},
    {"drawing"},
    {"shapes", "operations", "piece", "ink", "seams"},
    {"labels", "grid"},
    {"document", "paper", "packing"},
    {"tiling", "furniture"},
    {"marks", "scale_check"},
    {"packed", "tile_map"},
    {"pages"},
)
# What a drawing is made with, which chairs may use too.
GROUND = {"geometry", "curves", "drawing", "shapes", "lettering", "operations", "piece", "labels"}
# One writer per kind of file: above everything, yet each reads a finished document and nothing of how it was laid out.
WRITERS = {"pdf", "report"}
WRITERS_READ = GROUND | {"document", "faces", "ink"}

SPEC = tuple(f"jigs/spec{part}.py" for part in ("", "_base", "_legs", "_problems", "_seats", "_values"))
# Where each library may be imported. An output library in its writer alone; numpy and shapely where there is geometry.
LIBRARIES = {
    "click": ("cli/",),
    "reportlab": ("layout/pdf.py",),
    "pydantic": SPEC,
    "pydantic_core": SPEC,
    "fontTools": ("jigs/path_data.py",),
    "numpy": ("jigs/", "layout/"),
    "shapely": ("jigs/", "layout/"),
}


def imported(source: str) -> Iterator[str]:
    """Every module that a source imports, at its head, inside functions or for types only."""
    for node in ast.walk(ast.parse(source)):
        match node:
            case ast.Import(names=names):
                yield from (alias.name for alias in names)
            case ast.ImportFrom(module=str(module), names=names, level=0):
                # `from layout import paper` imports layout.paper.
                yield from (f"{module}.{alias.name}" for alias in names) if module in HOUSE else (module,)
            case ast.ImportFrom():
                yield "a relative import"


def faults(path: str, source: str) -> list[str]:
    """What is wrong with the imports of one module, in words."""
    return [f"{path} imports {name}: {why}" for name in imported(source) if (why := fault(path, name))]


def fault(path: str, name: str) -> str | None:
    top, _, rest = name.partition(".")
    house = path.partition("/")[0]
    if top in HOUSE:
        return house_fault(house, Path(path).stem, top, rest.partition(".")[0])
    if top in sys.stdlib_module_names:
        return None
    if top not in LIBRARIES:
        return "not a library that this house knows; name it in LIBRARIES with the place that may use it"
    places = LIBRARIES[top]
    allowed = any(path == place or (place.endswith("/") and path.startswith(place)) for place in places)
    return None if allowed else f"{top} may be imported only in {', '.join(places)}"


def house_fault(house: str, module: str, top: str, other: str) -> str | None:
    if top == "cli" and house != "cli":
        return "nothing imports the command line"
    if house == "layout":
        return layout_fault(module, other) if top == "layout" else "layout knows nothing of chairs"
    if house == "jigs" and top == "layout" and other not in GROUND:
        return f"chairs may use only layout's ground ({', '.join(sorted(GROUND))})"
    return None


def layout_fault(module: str, other: str) -> str | None:
    if other in WRITERS:
        return "nothing in layout imports a writer"
    if module in WRITERS:
        return (
            None if other in WRITERS_READ else "a writer reads a finished document and nothing of how it was laid out"
        )
    own, its = layer(module), layer(other)
    if own is None or its is None:
        return (
            "it has no layer; give it one in LAYERS" if its is None else f"{module} has no layer; give it one in LAYERS"
        )
    return None if its < own else f"it is not in an earlier layer than {module}"


def layer(module: str) -> int | None:
    return next((k for k, names in enumerate(LAYERS) if module in names), None)


def modules() -> list[str]:
    return sorted(str(path.relative_to(ROOT).as_posix()) for house in HOUSE for path in (ROOT / house).rglob("*.py"))


@pytest.mark.parametrize("path", modules())
def test_imports_run_the_right_way(path):
    assert faults(path, (ROOT / path).read_text(encoding="utf-8")) == []


def test_every_module_of_layout_has_a_layer():
    names = {Path(path).stem for path in modules() if path.startswith("layout/")} - {"__init__"}
    assert names <= set().union(WRITERS, *LAYERS)


@pytest.mark.parametrize(
    ("path", "source", "words"),
    [
        ("layout/grid.py", "from jigs.legs import Leg", "layout knows nothing of chairs"),
        ("layout/grid.py", "import jigs.legs", "layout knows nothing of chairs"),
        ("layout/grid.py", "def f():\n    from cli import VERSION", "nothing imports the command line"),
        ("layout/geometry.py", "from layout.drawing import Role", "not in an earlier layer"),
        ("layout/drawing.py", "from layout import shapes", "not in an earlier layer"),
        ("layout/pages.py", "from layout.pdf import pdf_bytes", "nothing in layout imports a writer"),
        ("layout/pdf.py", "from layout.tiling import Tiling", "nothing of how it was laid out"),
        ("layout/pdf.py", "from layout.paper import Paper", "nothing of how it was laid out"),
        ("layout/newcomer.py", "from layout.geometry import Box", "newcomer has no layer"),
        ("jigs/legs.py", "from layout.paper import Paper", "only layout's ground"),
        ("jigs/legs.py", "import click", "only in cli/"),
        ("jigs/legs.py", "from cli.main import main", "nothing imports the command line"),
        ("layout/report.py", "import reportlab.pdfgen.canvas", "only in layout/pdf.py"),
        ("jigs/cards.py", "from reportlab.pdfbase import pdfdoc", "only in layout/pdf.py"),
        ("jigs/legs.py", "from pydantic import BaseModel", "only in jigs/spec.py"),
        ("cli/main.py", "import numpy as np", "only in jigs/, layout/"),
        ("jigs/legs.py", "import requests", "not a library that this house knows"),
        ("jigs/legs.py", "from .frames import SeatFrame", "a relative import"),
    ],
)
def test_an_import_that_runs_the_wrong_way_is_told(path, source, words):
    (told,) = faults(path, source)
    assert told.startswith(f"{path} imports ")
    assert words in told


@pytest.mark.parametrize(
    ("path", "source"),
    [
        ("cli/main.py", "import click, json\nfrom jigs.spec import read_spec\nfrom layout import pages, pdf"),
        ("jigs/legs.py", "import math\nfrom layout.geometry import Point\nfrom jigs.frames import SeatFrame"),
        ("layout/pdf.py", "import reportlab\nfrom layout.document import Document\nfrom layout.ink import INKS"),
        ("layout/shapes.py", "from layout.drawing import Role"),
    ],
)
def test_an_import_that_runs_the_right_way_is_not_told(path, source):
    assert faults(path, source) == []


@pytest.mark.parametrize("argument", ["--version", "--help"])
def test_version_and_help_wait_for_no_library(argument):
    watch = f"""
import sys
from cli.main import main
try:
    main([{argument!r}])
finally:
    heavy = {{"numpy", "shapely", "reportlab", "pydantic", "fontTools", "jigs", "layout"}} & set(sys.modules)
    print("loaded:", sorted(heavy))
"""
    run = subprocess.run(
        [sys.executable, "-c", watch],
        cwd=ROOT,
        env=os.environ | {"PYTHONPATH": str(ROOT)},
        capture_output=True,
        text=True,
    )
    assert run.returncode == 0, run.stderr
    assert run.stdout.splitlines()[-1] == "loaded: []"
