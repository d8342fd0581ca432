"""What several tests share: the reader of PDFs, the repository and the demo specs."""

from __future__ import annotations

import os
from collections.abc import Callable
from pathlib import Path

import pytest
from hypothesis import HealthCheck, settings

from tests.reading import SeenPage, read_pages

# A run by hand looks at new cases; the check of a change looks at the same ones, lest it fail for what it left alone.
settings.register_profile(
    "shop",
    deadline=None,
    derandomize=bool(os.environ.get("CI")),
    suppress_health_check=[HealthCheck.too_slow],
)
settings.load_profile("shop")

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
