"""What several tests share: the reader of PDFs, the repository and the demo specs."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest

from tests.reading import SeenPage, read_pages

ROOT = Path(__file__).resolve().parent.parent


@pytest.fixture(scope="session")
def see() -> Callable[[bytes], list[SeenPage]]:
    """The reader: a PDF's bytes to what its pages show, in mm."""
    return read_pages


@pytest.fixture(scope="session")
def root() -> Path:
    """The repository."""
    return ROOT


@pytest.fixture(scope="session")
def demo_specs() -> Path:
    """The folder of demo specs."""
    return ROOT / "demo_specs"
