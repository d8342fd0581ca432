"""The tables of a whole piece as blocks of the setting-out sheet.

Owns the widths of their columns; what they say is `listings`'. Imports `assembly`, `blocks`, `listings`.
"""

from __future__ import annotations

from collections.abc import Iterator

from jigs.assembly import Assembly
from jigs.blocks import WIDTH_MM, Column, listed, plain, tables
from jigs.listings import (
    Listing,
    assembly_notes,
    clock_reading,
    finished_sizes,
    standing_notes,
    stretcher_lengths,
    stretcher_mortises,
    tipping_loads,
    wood_to_cut,
)
from layout.drawing import Drawing

Named = tuple[str, Drawing]

_LENGTHS_MM = (32.0, 38.0, 20.0, 24.0, 22.0, 22.0, 22.0)
_MORTISES_MM = (44.0, 44.0, 19.0, 19.0, 27.0, 27.0)
_CUT_MM = (55.0, 14.0, 24.0, 47.0, 18.0, 22.0)
_SIZES_MM = (62.0, 24.0, 24.0, 22.0, 24.0, 24.0)


def stretcher_blocks(assembly: Assembly) -> Iterator[Named]:
    """Lengths, mortises, how the clock is read, and how the stretchers go together; nothing where there are none."""
    if not assembly.stretchers:
        return
    yield from _table("stretchers", stretcher_lengths(assembly), _LENGTHS_MM)
    yield from _table("stretcher mortises", stretcher_mortises(assembly), _MORTISES_MM)
    yield "clock", plain(tuple(clock_reading(assembly)))
    notes = listed("How the stretchers go together", assembly_notes(assembly), numbered=True)
    yield from _numbered("assembly", notes)


def wood_blocks(assembly: Assembly) -> Iterator[Named]:
    """The wood to start from, and the sizes of what is bored into the seat when it is done."""
    yield from _table("wood", wood_to_cut(assembly), _CUT_MM)
    yield from _table("sizes", finished_sizes(assembly), _SIZES_MM)


def standing_blocks(assembly: Assembly) -> Iterator[Named]:
    """The tipping loads and the published case; nothing of fewer than three legs, which are a part of something."""
    loads = tipping_loads(assembly)
    if loads is not None:
        yield from _table("standing", loads, (WIDTH_MM / len(loads.heads),) * len(loads.heads))
    said = standing_notes(assembly)
    if said:
        yield "how it stands", plain(said)


def _table(name: str, listing: Listing, widths_mm: tuple[float, ...]) -> Iterator[Named]:
    columns = [
        Column(*head, width, words=k < listing.names)
        for k, (head, width) in enumerate(zip(listing.heads, widths_mm, strict=True))
    ]
    return _numbered(name, tables(listing.title, columns, listing.rows))


def _numbered(name: str, drawn: Iterator[Drawing]) -> Iterator[Named]:
    for k, drawing in enumerate(drawn, 1):
        yield f"{name} {k}", drawing
