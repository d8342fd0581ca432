"""The spec file: the whole of it as frozen models, every length in millimetres and every angle in degrees.

Owns the top of the file and the reading. Imports `problems`, `quantities`, `spec_*`; no geometry. Whether the seat's
outline and the legs can be built is for the modules that build them.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from pathlib import Path
from typing import Annotated, Literal, get_args

from pydantic import BaseModel, BeforeValidator, Field, ValidationError, ValidationInfo, field_validator
from pydantic_core import ErrorDetails

from jigs import spec_values as values
from jigs.problems import Problem, SpecError, shown
from jigs.quantities import MM_PER_INCH, Units
from jigs.spec_base import (
    MOST_LEGS,
    MOST_STRETCHERS,
    ON_CENTRE_LINE_MM,
    SEAT_SIZE_MM,
    Name,
    Table,
)
from jigs.spec_legs import (
    LegSpec,
    Mortise,
    PostSpec,
    RingSpec,
    SpindleSpec,
    StretcherTable,
    WoodTable,
    twins,
)
from jigs.spec_problems import MOST_PROBLEMS, FileOrder, Keys, Loc, missing, place, problems_of, refusal
from jigs.spec_seats import (
    AnySeat,
    DSeat,
    OvalSeat,
    PathSeat,
    PolygonSeat,
    RectangleSeat,
    RoundSeat,
    Seat,
    SeatBase,
    ShieldSeat,
)
from jigs.spec_text import document, read_file

__all__ = [
    "ON_CENTRE_LINE_MM",
    "SEAT_SIZE_MM",
    "DSeat",
    "Furniture",
    "LegSpec",
    "Mortise",
    "OvalSeat",
    "PathSeat",
    "PolygonSeat",
    "RectangleSeat",
    "RoundSeat",
    "Seat",
    "SeatBase",
    "ShieldSeat",
    "leg_place",
    "parse_spec",
    "read_spec",
    "unprintable",
]

unprintable = values.unprintable
# Tables whose parts share one set of names, so that a name means one thing on every sheet.
_NAMED = ("legs", "rings", "posts", "spindles", "stretchers")


def _tables(name: str, least: int, most: int) -> BeforeValidator:
    """Reads a list of tables, so many of them."""

    def read(value: object) -> object:
        if isinstance(value, dict):
            called = "leg" if name == "legs" else "one"
            raise refusal("is not a list of tables", f"write [[{name}]], in double brackets, above each {called}")
        if isinstance(value, list) and not least <= len(value) <= most:
            rule = f"are not the {least} to {most} that a file may hold"
            raise refusal(rule, given=f"{len(value)} tables")
        return value

    return BeforeValidator(read)


class Furniture(Table):
    """A whole spec. `units` are those that the file was written in; the models are in mm all the same."""

    name: Name
    units: Units = "mm"
    use: Literal["dining", "counter", "bar", "low", "table"] | None = None
    wood: WoodTable = WoodTable()
    seat: Annotated[Seat, Field(discriminator="shape")]
    rings: Annotated[tuple[RingSpec, ...], _tables("rings", 0, 8)] = ()
    legs: Annotated[tuple[LegSpec, ...], _tables("legs", 1, MOST_LEGS)] = Field(default=None, validate_default=True)
    posts: Annotated[tuple[PostSpec, ...], _tables("posts", 0, MOST_LEGS)] = ()
    spindles: Annotated[tuple[SpindleSpec, ...], _tables("spindles", 0, 8)] = ()
    stretchers: Annotated[tuple[StretcherTable, ...], _tables("stretchers", 0, MOST_STRETCHERS)] = ()

    @field_validator("legs", mode="wrap")
    @classmethod
    def _stands_on_something(
        cls, value: object, read: Callable[[object], tuple[LegSpec, ...]], info: ValidationInfo
    ) -> tuple[LegSpec, ...]:
        if value is None:
            if not info.data.get("rings", True):
                raise missing(("legs",))
            return ()
        return read(value)

    @property
    def unit_mm(self) -> float:
        """Millimetres in one of the file's units."""
        return float(MM_PER_INCH) if self.units == "in" else 1.0


def _keys() -> Keys:
    seats = {f"seat.{get_args(seat.model_fields['shape'].annotation)[0]}": seat for seat in get_args(Seat)}
    tables: dict[str, type[BaseModel]] = {"": Furniture, **seats}
    _add_tables(tables, "", Furniture)
    return {table: ["shape", *keys] if table in seats else keys for table, keys in _fields(tables).items()}


def _add_tables(tables: dict[str, type[BaseModel]], place: str, model: type[BaseModel]) -> None:
    """The tables within a table, however deep, by their places without numbers."""
    for key, field in model.model_fields.items():
        if key != "seat":
            for inner in _models(field.annotation):
                where = f"{place}.{key}".removeprefix(".")
                tables[where] = inner
                _add_tables(tables, where, inner)


def _models(annotation: object) -> list[type[BaseModel]]:
    if isinstance(annotation, type) and issubclass(annotation, BaseModel):
        return [annotation]
    return [model for part in get_args(annotation) for model in _models(part)]


def _fields(tables: Mapping[str, type[BaseModel]]) -> dict[str, list[str]]:
    return {table: [key for key in model.model_fields if key != "shape"] for table, model in tables.items()}


def leg_place(index: int) -> str:
    """Where the spec's leg with this index stands in the file: `legs[0]`."""
    return place(("legs", index))


def read_spec(path: Path) -> Furniture:
    """The furniture that a file describes. Raises SpecError, and nothing else, for any file."""
    return parse_spec(read_file(path), str(path))


def parse_spec(data: bytes, source: str) -> Furniture:
    """The furniture that a file's bytes describe; `source` names the file in messages. Raises only SpecError."""
    tree = document(data, source)
    units = tree.get("units", "mm")
    known_units = units in ("mm", "in")
    names = _names_taken(tree)
    try:
        furniture = Furniture.model_validate(tree, context={"units": units if known_units else "mm"})
    except ValidationError as error:
        # Without units no length is too long or too short.
        found_errors = [*error.errors(include_url=False), *_of_unknown_shape(error, tree, units)]
        errors = [e for e in found_errors if known_units or e["type"] != "length_bounds"]
        found = [*problems_of(errors, tree, _keys()), *names]
        raise SpecError(source, _first(found, tree, len(errors) + len(names))) from None
    if names:
        raise SpecError(source, _first(names, tree, len(names)))
    return furniture


def _of_unknown_shape(error: ValidationError, tree: dict[str, object], units: object) -> list[ErrorDetails]:
    """What else is wrong with a seat whose shape is not known, which pydantic then looks at no further."""
    if not any(e["loc"] == ("seat",) and e["type"].startswith("union_tag") for e in error.errors(include_url=False)):
        return []
    try:
        AnySeat.model_validate(tree["seat"], context={"units": units if units in ("mm", "in") else "mm"})
    except ValidationError as seat_error:
        found = seat_error.errors(include_url=False)
        return [ErrorDetails(**{**e, "loc": ("seat", "", *e["loc"])}) for e in found]
    return []


def _first(found: list[tuple[Loc, Problem]], tree: dict[str, object], count: int) -> tuple[Problem, ...]:
    """The first problems in the file's order, and how many more there are."""
    order = FileOrder(tree)
    problems = [problem for _, problem in sorted(found, key=lambda pair: order.rank(pair[0]))][:MOST_PROBLEMS]
    more = [Problem("", "", f"and {count - MOST_PROBLEMS} more")] if count > MOST_PROBLEMS else []
    return (*problems, *more)


def _names_taken(tree: dict[str, object]) -> list[tuple[Loc, Problem]]:
    """Parts whose names an earlier part has; looked for in the file itself, so that other problems do not hide them."""
    owners: dict[str, tuple[Loc, str]] = {}
    found: list[tuple[Loc, Problem]] = []
    for loc, part in _named_parts(tree):
        for name, as_one in _names_in(part):
            owner, owned_as = owners.setdefault(name, (loc, as_one))
            if owner != loc:
                rule = f"is already the name of {owned_as}{place(owner)}"
                kind = "leg" if loc[0] == "legs" else "part"
                problem = Problem(place((*loc, "name")), shown(name), rule, f"give each {kind} a name of its own")
                found.append(((*loc, "name"), problem))
                break
    return found


def _named_parts(tree: dict[str, object]) -> Iterator[tuple[Loc, object]]:
    for table in _NAMED:
        parts = tree.get(table)
        for index, part in enumerate(parts[:MOST_LEGS] if isinstance(parts, list) else []):
            yield (table, index), part


def _names_in(part: object) -> list[tuple[str, str]]:
    """The names that a table takes, and how a part that has one of them is called; parts of a row are numbered."""
    if not isinstance(part, dict):
        return []
    try:
        name = values.name_text(part.get("name"))
    except ValueError:
        return []
    if part.get("mirror") is True:
        return [(twin, "a twin of ") for twin in twins(name, True)]
    count = part.get("count")
    many = min(count, MOST_LEGS) if isinstance(count, int) else 0
    return [(name, ""), *((f"{name} {number}", "one of ") for number in range(1, many + 1))]
