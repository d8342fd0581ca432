"""The program `splaysheet`: its commands, their help, and what each hands to `jigs` and `layout`.

Owns the commands. Libraries are imported where they are used, so that help and version come at once.
"""

# ruff: noqa: PLC0415 - imports wait until they are used

from __future__ import annotations

import contextlib
import gc
import json
from collections.abc import Iterator
from pathlib import Path
from typing import TYPE_CHECKING

import click

from cli import VERSION
from cli.options import complete_paper, complete_sheets, length_mm, refuse_shared, sheets
from cli.terminal import Refusal, leave, prepare_streams, remark, result

if TYPE_CHECKING:
    from jigs.assembly import Assembly, Face
    from layout.document import Document
    from layout.paper import Paper
    from layout.piece import Piece

PROGRAM = "splaysheet"
FILE = click.Path(path_type=Path)
REMINDER = 'Print at 100 % ("actual size"), never "fit to page". Measure the bars on the paper before you cut or bore.'


@click.group(context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 100})
@click.version_option(VERSION, prog_name=PROGRAM, message="%(prog)s %(version)s")
def main() -> None:
    """Paper at full size for boring the leaning legs of chairs, stools and benches.

    Write down what you know in a text file, the spec: the seat, its height, where the legs enter and how they lean.
    This program works out the angles and draws the sheets that you take to the bench: a seat template to prick
    through, cards that stand beside the bit, strips to sight along, and bars that prove the print's scale.

    \b
    An example:
      splaysheet angles slipway-stool.toml     show the settings for each leg
      splaysheet make slipway-stool.toml       write slipway-stool.pdf to print

    "splaysheet make --help" tells the rest.
    """
    prepare_streams()


@main.command()
@click.argument("spec", type=FILE)
@click.option("-o", "--output", type=FILE, metavar="FILE", help="The PDF to write. Else SPEC's name with .pdf, here.")
@click.option(
    "--paper",
    metavar="PAPER",
    shell_complete=complete_paper,
    help="either, a4, letter, legal, tabloid, a3, a2, or a size: 900x3000mm. Else either, which prints true on A4 and "
    "on Letter.",
)
@click.option(
    "--margin",
    metavar="LENGTH",
    callback=length_mm,
    help='Left white at each edge: 6, "6 mm" or "1/4 in". Else 6 mm.',
)
@click.option(
    "--overlap", metavar="LENGTH", callback=length_mm, help="Shared by pages that are taped together. Else 12 mm."
)
@click.option(
    "--only",
    multiple=True,
    metavar="SHEET",
    callback=sheets,
    shell_complete=complete_sheets,
    help="Make only this sheet: setting-out, scale, template, cards or strips. Give it again, or several with commas, "
    "for more.",
)
@click.option(
    "--face",
    type=click.Choice(["drilled", "top", "underside", "both"]),
    default="drilled",
    help="Faces to print a template for. The face that you drill is always printed; the other is added.",
)
@click.option("--report", "report_file", type=FILE, metavar="FILE", help="Also write what lies where, as JSON.")
@click.option("--open", "show", is_flag=True, help="Open the PDF when it is written.")
@click.option("-q", "--quiet", is_flag=True, help="Say nothing but warnings.")
def make(
    spec: Path,
    output: Path | None,
    paper: str | None,
    margin: float | None,
    overlap: float | None,
    only: frozenset[str],
    face: str,
    report_file: Path | None,
    show: bool,
    quiet: bool,
) -> None:
    """Draw the sheets for SPEC and write them as one PDF.

    Print it at 100 %, not fitted to the page. Then measure the bars on the paper before you bore.

    \b
    Examples:
      splaysheet make slipway-stool.toml
      splaysheet make slipway-stool.toml --paper a3 -o stool.pdf
      splaysheet make slipway-stool.toml --only template,cards --face both
    """
    output = output or Path(f"{spec.stem}.pdf")
    refuse_shared({"the spec": spec, "the PDF": output, "the report": report_file})
    tell = _silent if quiet else remark
    with _refusals(), _unharmed(output):
        sheet = _paper(paper, margin, overlap)
        tell(f"{spec}: working out the angles")
        assembly = _assembly(spec)
        _warn(spec, assembly)
        document = _document(assembly, sheet, only, face)
        tell(f"{output}: writing {_count(document)}")
        _write(document, output, report_file)
    if not quiet:
        _tell_pages(document, output)
    if show and click.launch(str(output)) != 0:
        remark(f"{output}: could not be opened; it is written")


@main.command()
@click.argument("spec", type=FILE)
@click.option("--json", "as_json", is_flag=True, help="As JSON, at full precision, for other programs.")
def angles(spec: Path, as_json: bool) -> None:
    """Show the settings for each leg of SPEC.

    The drilling angles come first: splay, rake, the true lean, the sightline and the bevel, measured from the seat.

    \b
    Example:
      splaysheet angles slipway-stool.toml
    """
    from jigs.settings import settings, table

    with _refusals():
        assembly = _assembly(spec)
    _warn(spec, assembly)
    # In ASCII, so that no terminal's encoding can spoil it.
    result(json.dumps(settings(assembly), indent=2) if as_json else table(assembly).rstrip("\n"))


# From files to pages


def _paper(name: str | None, margin_mm: float | None, overlap_mm: float | None) -> Paper:
    from layout.paper import DEFAULT_SIZE, paper_from

    given = {"margin_mm": margin_mm, "overlap_mm": overlap_mm}
    return paper_from(name or DEFAULT_SIZE, **{key: value for key, value in given.items() if value is not None})


def _assembly(spec: Path) -> Assembly:
    from jigs.assembly import assemble
    from jigs.spec import read_spec

    return assemble(read_spec(spec), str(spec))


def _document(assembly: Assembly, paper: Paper, only: frozenset[str], face: str) -> Document:
    from jigs.registry import SCALE, SHEETS, pieces
    from layout.pages import compose
    from layout.scale_check import scale_check

    faces = faces_to_print(face, assembly.drilled_faces)
    made: list[Piece] = []
    for name in SHEETS:
        if name in only:
            made += [scale_check(paper)] if name == SCALE else pieces(assembly, name, faces)
    return compose(assembly.furniture.name, made, paper)


def faces_to_print(asked: str, drilled: tuple[Face, ...]) -> tuple[Face, ...]:
    """The drilled faces first, always; then the other where it is asked for."""
    faces: tuple[Face, ...] = ("underside", "top")
    return (*drilled, *(face for face in faces if face not in drilled and asked in (face, "both")))


def _write(document: Document, output: Path, report_file: Path | None) -> None:
    from layout.files import write_whole
    from layout.pdf import pdf_bytes
    from layout.report import report

    files = {output: pdf_bytes(document, f"{PROGRAM} {VERSION}")}
    if report_file is not None:
        text = json.dumps(report(document, output.name), ensure_ascii=False, indent=1)
        # What a file system lets stand in a name and Unicode does not becomes JSON's own escape.
        files[report_file] = (text + "\n").encode("utf-8", "backslashreplace")
    write_whole(files)


# What is said


def _silent(text: str) -> None:
    pass


def _warn(spec: Path, assembly: Assembly) -> None:
    from jigs.checks import cautions
    from jigs.problems import safe

    for caution in cautions(assembly):
        remark(f"{safe(str(spec))}: {caution.where}: {caution.text} [{caution.code}]")


def _count(document: Document) -> str:
    count = len(document.pages)
    return f"{count} page{'' if count == 1 else 's'}"


def _tell_pages(document: Document, output: Path) -> None:
    from layout.pages import summary

    result("\n".join([f"{output}: {_count(document)}", *summary(document), REMINDER]))


# What goes wrong


@contextlib.contextmanager
def _refusals() -> Iterator[None]:
    """Turns what `jigs` and `layout` refuse into messages and exit codes; anything else is a bug and shows as one."""
    from jigs.problems import SpecError
    from layout.files import OutputError
    from layout.paper import DoesNotFitPaper, PaperError

    try:
        yield
    except PaperError as error:
        raise click.UsageError(str(error)) from None
    except (SpecError, DoesNotFitPaper, OutputError) as error:
        raise Refusal(str(error)) from None


@contextlib.contextmanager
def _unharmed(output: Path) -> Iterator[None]:
    """Says on Ctrl-C what became of the file."""
    try:
        yield
    except KeyboardInterrupt:
        raise Refusal(f"stopped: {output} is as it was") from None


def program() -> None:
    """The whole program. A run is over before there is anything worth collecting, and what a spec may ask is bounded.

    What it has written is closed by then, so it leaves without taking down what it has loaded, piece by piece.
    """
    gc.disable()
    try:
        main(prog_name=PROGRAM)
    except SystemExit as end:
        leave(end.code)


if __name__ == "__main__":
    program()
