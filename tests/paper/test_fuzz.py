"""Whatever a spec says, there is a valid PDF, or exit 1 with a message and no file; never a traceback."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import pypdf
from click.testing import CliRunner
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from cli.main import main as program

SIZES, LEANS = st.floats(250, 900), st.floats(-12, 22)
NAMES = st.sampled_from(["front", "back", "Ångström", "Łódź", "Ω Ж", "Škoda's 3rd", "x" * 60])
JUNK = st.one_of(
    st.sampled_from([0, -1, 1e300, float("inf"), float("nan"), "12 1/2 in", "1e9 mm", "12° 30'", "upright", True, []]),
    st.sampled_from(["\u202efront", "🪑", "x" * 10_000, {"bit": {"bit": 3}}, [[[[]]]], "../../front", "top", "side"]),
    st.floats(),
    st.text(max_size=20),
)
SHAPES = st.one_of(
    st.fixed_dictionaries({"shape": st.just("round"), "diameter": SIZES}),
    st.fixed_dictionaries({"shape": st.just("oval"), "width": SIZES, "depth": SIZES}),
    st.fixed_dictionaries({"shape": st.just("d"), "width": SIZES, "depth": SIZES}),
    st.fixed_dictionaries(
        {"shape": st.just("rectangle"), "width": SIZES, "depth": SIZES}, optional={"corner_radius": st.floats(0, 120)}
    ),
    st.fixed_dictionaries(
        {"shape": st.just("shield"), "width": SIZES, "depth": SIZES, "back_width": st.floats(200, 450)}
    ),
    st.fixed_dictionaries(
        {"shape": st.just("polygon"), "points": st.just([[-200, 0], [200, 0], [260, 150], [150, 380], [-150, 380]])}
    ),
    st.fixed_dictionaries(
        {"shape": st.just("path"), "path": st.just("M-200 0H200A60 40 0 0 1 200 300Q0 380 -200 300Z")}
    ),
)
MORTISES = st.one_of(
    st.floats(10, 32),
    st.fixed_dictionaries({"bit": st.floats(10, 28), "taper": st.floats(1, 9)}),
    st.fixed_dictionaries({"bit": st.floats(10, 28), "depth": st.floats(10, 60)}),
)


@st.composite
def specs(draw: st.DrawFn) -> str:
    """A spec file that a shop might write, with up to two of its values replaced by anything at all."""
    seat = {**draw(SHAPES), "thickness": draw(st.floats(20, 60)), "height": draw(st.floats(300, 800))}
    seat |= draw(
        st.fixed_dictionaries(
            {}, optional={"pitch": st.floats(-4, 12), "drill_from": st.sampled_from(["top", "underside"])}
        )
    )
    legs = [_leg(draw, number, seat) for number in range(draw(st.integers(1, 3)))]
    head: dict[str, Any] = {"name": draw(NAMES)}
    for _ in range(draw(st.sampled_from([0, 0, 1, 2]))):
        table = draw(st.sampled_from([head, seat, *legs]))
        table[draw(st.sampled_from([*table, "spaly"]))] = draw(JUNK)
    parts = [*_table(head), "[seat]", *_table(seat)]
    for leg in legs:
        parts += ["[[legs]]", *_table(leg)]
    return "\n".join(parts)


def _leg(draw: st.DrawFn, number: int, seat: dict[str, Any]) -> dict[str, Any]:
    across, deep = (seat.get(key, seat.get("diameter", 400)) for key in ("width", "depth"))
    where = [across * draw(st.floats(0.12, 0.36)), deep * (0.25 + 0.25 * number)]
    return {
        "name": f"{draw(NAMES)[:40]} {number}",
        "at": where,
        "mirror": draw(st.booleans()),
        "splay": draw(LEANS),
        "rake": draw(LEANS),
        "end": draw(st.sampled_from(["front", "back"])),
        "mortise": draw(MORTISES),
    }


def _table(table: dict[str, Any]) -> list[str]:
    return [f"{key} = {_toml(value)}" for key, value in table.items()]


def _toml(value: Any) -> str:
    if isinstance(value, dict):
        return "{ " + ", ".join(_table(value)) + " }"
    if isinstance(value, list | tuple):
        return "[" + ", ".join(map(_toml, value)) + "]"
    if isinstance(value, float):
        return repr(value)
    return json.dumps(value)


@settings(max_examples=100, deadline=None, suppress_health_check=list(HealthCheck))
@given(spec=specs(), paper=st.sampled_from(["either", "a4", "a2", "700x2000mm"]))
def test_a_random_spec_gives_a_valid_file_or_a_message(tmp_path_factory: Any, spec: str, paper: str) -> None:
    folder: Path = tmp_path_factory.mktemp("fuzz")
    source, target = folder / "spec.toml", folder / "spec.pdf"
    source.write_text(spec, encoding="utf-8", errors="surrogatepass")
    done = CliRunner().invoke(program, ["make", str(source), "-o", str(target), "--paper", paper])
    assert done.exit_code in (0, 1), done.output
    if done.exit_code == 1:
        assert isinstance(done.exception, SystemExit), "a message, no traceback"
        assert "spec.toml" in done.stderr or "paper" in done.stderr
        assert not target.exists()
    else:
        assert len(pypdf.PdfReader(target, strict=True).pages) > 3
    assert sorted(path.name for path in folder.iterdir()) in (["spec.toml"], ["spec.pdf", "spec.toml"])
