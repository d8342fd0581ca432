"""How long `splaysheet` takes, as ratios to a process that imports the same libraries and saves a blank PDF.

Run it by hand: `python tests/benchmark.py`. It prints ratios and judges nothing, since a busy machine has its moods;
the floor and the measured runs take turns so that both meet the same moods.
"""

from __future__ import annotations

import argparse
import json
import os
import subprocess
import sys
import tempfile
import time
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent
DEMOS = ROOT / "demo_specs"

COUNTER = """
name = "Sail loft counter"
[seat]
shape = "rectangle"
width = 4000
depth = 1000
corner_radius = 60
thickness = 60
height = 900
""" + "".join(
    f"""
[[legs]]
name = "{name} {end}"
at = [{x}, {y}]
mirror = true
splay = {splay}
rake = 6
mortise = 32
"""
    for name, x, splay in (("outer", 1780, 9), ("second", 1100, 5), ("inner", 400, 3))
    for end, y in (("front", 150), ("back", 850))
)

CHAIR = (
    (DEMOS / "mates-chair.toml")
    .read_text(encoding="utf-8")
    .replace("count = 7", "count = 9")
    .replace("deck = { width = 300,", "deck = { width = 320,")
)

LIST_MODULES = """
import json, sys
from cli.main import main
try:
    main(sys.argv[1:], standalone_mode=False)
finally:
    names = [n for n in sys.modules if n.split(".")[0] not in sys.stdlib_module_names]
    ours = ("cli", "jigs", "layout", "__main__")
    json.dump([n for n in names if n.split(".")[0] not in ours], open("modules.json", "w"))
"""

BLANK_PDF = """
from reportlab.pdfgen.canvas import Canvas
canvas = Canvas("blank.pdf")
canvas.showPage()
canvas.save()
"""


def seconds(command: list[str], folder: str) -> float:
    """Wall time of one process."""
    start = time.perf_counter()
    subprocess.run(command, cwd=folder, check=True, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
    return time.perf_counter() - start


def third_party(arguments: list[str], folder: str) -> list[str]:
    """The library modules that a run of the command imports, packages before what is in them."""
    subprocess.run(
        [sys.executable, "-c", LIST_MODULES, *arguments],
        cwd=folder,
        check=True,
        stdout=subprocess.DEVNULL,
        stderr=subprocess.DEVNULL,
    )
    return list(json.loads(Path(folder, "modules.json").read_text()))


def import_script(modules: list[str]) -> str:
    """A program that imports the modules."""
    imports = "import importlib\n" + f"for name in {modules!r}:\n    try: importlib.import_module(name)\n"
    return imports + "    except ImportError: pass\n"


def floor_script(modules: list[str]) -> str:
    """A program that imports the modules and saves a blank PDF."""
    return import_script(modules) + BLANK_PDF


def median(values: list[float]) -> float:
    """The middle value, or the upper of the two."""
    return sorted(values)[len(values) // 2]


def compare(commands: dict[str, list[str]], runs: int, folder: str) -> dict[str, float]:
    """Median seconds of each command, all of them run in turn."""
    times: dict[str, list[float]] = {name: [] for name in commands}
    for _ in range(runs + 1):
        for name, command in commands.items():
            times[name].append(seconds(command, folder))
    return {name: median(found[1:]) for name, found in times.items()}


def stages(spec: Path) -> str:
    """Where the time of one `make` goes inside a process that has its libraries."""
    code = f"""
import time
t0 = time.perf_counter()
import cli.main
from pathlib import Path
from layout import pages, paper, pdf, scale_check
from jigs import assembly, registry, spec
t1 = time.perf_counter()
furniture = spec.read_spec(Path({str(spec)!r}))
whole = assembly.assemble(furniture, "spec")
t2 = time.perf_counter()
sheet = paper.paper_from("either", 6.0, 12.0)
made = []
for name in registry.SHEETS:
    made += [scale_check.scale_check(sheet)] if name == registry.SCALE else []
    made += registry.pieces(whole, name, (whole.drilled,))
t3 = time.perf_counter()
document = pages.compose(furniture.name, made, sheet)
t4 = time.perf_counter()
data = pdf.pdf_bytes(document)
t5 = time.perf_counter()
names = ("import", "read and solve", "draw", "lay out", "write")
spans = [b - a for a, b in zip((t0, t1, t2, t3, t4), (t1, t2, t3, t4, t5))]
print("  ".join(f"{{n}} {{1000 * s:.0f}} ms" for n, s in zip(names, spans)), f" {{len(data) / 1000:.0f}} kB")
"""
    return subprocess.run(
        [sys.executable, "-c", code], cwd=ROOT, check=True, capture_output=True, text=True, encoding="utf-8"
    ).stdout.strip()


def main() -> None:
    """Print the ratios."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--runs", type=int, default=15)
    runs = parser.parse_args().runs
    os.environ["PYTHONPATH"] = str(ROOT)
    # An installed program is compiled once, not at every run; the first run, which is not counted, does it here.
    os.environ.pop("PYTHONDONTWRITEBYTECODE", None)
    with tempfile.TemporaryDirectory() as folder:
        counter = Path(folder, "counter.toml")
        counter.write_text(COUNTER, encoding="utf-8")
        stool = DEMOS / "slipway-stool.toml"
        make = [sys.executable, "-m", "cli.main", "make", "-o", "out.pdf"]
        floor = floor_script(third_party(["make", str(stool), "-o", "out.pdf"], folder))
        commands = {
            "floor": [sys.executable, "-c", floor],
            "stool": [*make, str(stool)],
            "counter": [*make, str(counter)],
        }
        chair = Path(folder, "chair.toml")
        chair.write_text(CHAIR, encoding="utf-8")
        commands |= {
            "imports": [sys.executable, "-c", import_script(third_party(["angles", str(chair)], folder))],
            "angles": [sys.executable, "-m", "cli.main", "angles", str(chair)],
        }
        found = compare(commands, runs, folder)
    print(f"floor (same libraries, blank PDF)          {1000 * found['floor']:.0f} ms")
    print(f"make on the oval stool over the floor      {found['stool'] / found['floor']:.2f}   (wanted: 1.6 or less)")
    print(f"4 m counter, twelve legs, over the stool   {found['counter'] / found['stool']:.2f}   (wanted: under 6)")
    print(
        f"angles of a whole chair over its imports   {found['angles'] / found['imports']:.2f}   (wanted: 1.3 or less)"
    )
    print(f"where the stool's time goes:               {stages(stool)}")


if __name__ == "__main__":
    main()
