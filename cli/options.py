"""What options are given as: lengths and names of sheets, completed by the shell; files, which must not be one another.

Owns the reading of the command line's words. Imports `jigs` and `layout` where they are used, so that help is quick.
"""

# ruff: noqa: PLC0415 - imports wait until they are used

from __future__ import annotations

import os
from collections.abc import Iterable
from pathlib import Path

import click
from click.shell_completion import CompletionItem


def length_mm(ctx: click.Context, param: click.Parameter, value: str | None) -> float | None:
    """A length as makers write it, in mm; a bare number is mm."""
    from jigs import quantities

    if value is None:
        return None
    try:
        return quantities.length_mm(value, "mm")
    except quantities.QuantityError as error:
        raise click.BadParameter(f"{value!r} {error}", ctx, param) from None


def sheets(ctx: click.Context, param: click.Parameter, value: tuple[str, ...]) -> frozenset[str]:
    """Names of sheets, given one by one or with commas; all of them where none is given."""
    from jigs.registry import SHEETS

    if not value:
        return frozenset(SHEETS)
    names = [part.strip().lower() for text in value for part in text.split(",")]
    for name in names:
        if name not in SHEETS:
            raise click.BadParameter(f"{name!r} is not a sheet; choose from {', '.join(SHEETS)}", ctx, param)
    return frozenset(names)


def complete_sheets(ctx: click.Context, param: click.Parameter, incomplete: str) -> list[CompletionItem]:
    """Names of sheets that go on from what is there."""
    from jigs.registry import SHEETS

    return _completions(SHEETS, incomplete)


def complete_paper(ctx: click.Context, param: click.Parameter, incomplete: str) -> list[CompletionItem]:
    """Names of papers that go on from what is there."""
    from layout.paper import SIZES_MM

    return _completions(SIZES_MM, incomplete)


def _completions(names: Iterable[str], incomplete: str) -> list[CompletionItem]:
    return [CompletionItem(name) for name in names if name.startswith(incomplete.lower())]


def same_file(one: Path, other: Path) -> bool:
    """Whether two names lead to one file, whether it is there yet or not."""
    try:
        return one.samefile(other)
    except (OSError, ValueError):
        names = (os.path.normcase(os.path.realpath(os.fsencode(path))) for path in (one, other))
        return len(set(names)) == 1


def refuse_shared(files: dict[str, Path | None]) -> None:
    """A usage error where two of the files, given by what they are for, are one."""
    given = [(name, path) for name, path in files.items() if path is not None]
    for index, (name, path) in enumerate(given):
        for earlier, other in given[:index]:
            if same_file(path, other):
                raise click.UsageError(f"{name} would be written over {earlier}: both are {path}")
