"""How the program talks: results to standard output, all else to standard error, refusals with exit code 1.

Owns streams and exit codes; knows nothing of what is said. Imports nothing of ours.
"""

from __future__ import annotations

import contextlib
import errno
import io
import os
import sys
from typing import IO, Any

import click

# Windows says EINVAL for a pipe that nobody reads any more.
_NOBODY_READS = (errno.EPIPE, errno.EINVAL)


class Refusal(click.ClickException):
    """The spec, the paper or the disk cannot give what was asked: said as it is, exit code 1."""

    exit_code = 1

    def show(self, file: IO[Any] | None = None) -> None:
        """Write the message, which names its own place, to standard error."""
        click.echo(self.message, file=file, err=file is None)


def prepare_streams() -> None:
    """Let a terminal that lacks a character show a question mark in its place, rather than fail."""
    for stream in (sys.stdout, sys.stderr):
        if isinstance(stream, io.TextIOWrapper):
            stream.reconfigure(errors="replace")


def result(text: str) -> None:
    """A line or more of what was asked for. A reader that has gone away (`| head`) is no error."""
    try:
        click.echo(text)
    except OSError as error:
        if error.errno not in _NOBODY_READS:
            raise Refusal(f"standard output: {error.strerror}") from None
        _drop(sys.stdout)


def remark(text: str) -> None:
    """A line or more beside the result: progress and warnings."""
    try:
        click.echo(text, err=True)
    except OSError:
        _drop(sys.stderr)


def _drop(stream: IO[Any]) -> None:
    """What is still to be written to the stream goes nowhere, at the end of the program too."""
    with contextlib.suppress(OSError, ValueError):
        nowhere = os.open(os.devnull, os.O_WRONLY)
        os.dup2(nowhere, stream.fileno())
        os.close(nowhere)


def leave(code: object) -> None:
    """Ends the process at once, with all that was said flushed; as `sys.exit` would, but for the taking down.

    A code that is neither a number nor None is said and counts as 1. Where the reader of our output has gone, nothing
    more can be said, and Python's own way out keeps quiet about it.
    """
    if not (code is None or isinstance(code, int)):
        sys.exit(str(code))
    try:
        sys.stdout.flush()
        sys.stderr.flush()
    except OSError:
        sys.exit(code)
    os._exit(code or 0)
