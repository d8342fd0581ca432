"""From a stranger's file to a TOML document: what may be opened, how large, how deep, and what is wrong with its text.

Owns everything about the spec file that comes before its meaning. Imports `problems`; no models.
"""

from __future__ import annotations

import os
import re
import stat
import tomllib
from functools import cache
from pathlib import Path

from jigs.problems import Problem, SpecError, shown

LARGEST_FILE_BYTES = 256 * 1024
# A spec needs three levels. More than this would only exhaust the parser, which calls itself for each.
DEEPEST_NESTING = 12
MOST_KEY_PARTS = 12

# Strings and comments come first, so that their brackets and dots do not count. An open string runs on, as for the
# parser. Possessive repeats keep the scan linear.
_MARKS = r'''
    """(?:[^"\\]|\\.|"(?!""))*+(?:"{3,5})?
  | \'\'\'(?:[^']|'(?!''))*+(?:'{3,5})?
  | "(?:[^"\\\n]|\\[^\n])*+"?
  | '[^'\n]*+'?
  | \#[^\n]*+
  | [\[\]{}.=,\n]
'''

# What the standard library's parser says, by its first words, and how we say it: the rule, then what would do.
_SYNTAX = (
    ("Invalid value", "there is no TOML value here", 'text goes in quotes, such as "1 1/4 in"'),
    (
        "Expected newline or end",
        "the line goes on after its value",
        'text, fractions and units go in quotes, such as "1 1/4 in"',
    ),
    ("Invalid statement", "a line starts with a key, a [table] or a #", ""),
    ("Invalid initial character", "this is no key", "a key is letters, digits, - and _"),
    ("Expected '='", "a key is not followed by =", ""),
    ("Cannot overwrite", "this key or table is given twice", ""),
    ("Duplicate inline", "a key is given twice in this table", ""),
    ("Cannot declare", "this table is given twice", "write [[legs]], in double brackets, above each leg"),
    ("Cannot mutate", "this adds to a table or list that is closed", ""),
    ("Cannot redefine", "this adds to a table that is closed", ""),
    ("Unterminated string", "a text is not closed", ""),
    ("Expected \"'", "a text is not closed", ""),
    ("Unclosed array", "a list is not closed, or lacks a comma", ""),
    ("Unclosed inline", "a table in braces is not closed on its line, or lacks a comma", ""),
    ("Unescaped", "a backslash in double quotes starts an escape", "write two, or use single quotes"),
    ("Illegal character '\\n'", "a text is not closed on its line", ""),
    ("Illegal character", "TOML does not allow this character here", ""),
    ("Found invalid character", "TOML does not allow this character here", ""),
    ("Expected ']", "the name of the table is not closed with its brackets", ""),
)


def read_file(path: Path) -> bytes:
    """The bytes of a regular file of a sane size. Raises SpecError; never waits on a pipe and never reads a device."""
    try:
        # Looked at before it is opened, as opening a device can do things; and after, in case it was changed between.
        if not stat.S_ISREG(path.stat().st_mode):
            raise _file_error(path, "is a directory" if path.is_dir() else "is not a regular file")
        with os.fdopen(os.open(path, os.O_RDONLY | getattr(os, "O_NONBLOCK", 0)), "rb") as file:
            if not stat.S_ISREG(os.fstat(file.fileno()).st_mode):
                raise _file_error(path, "is not a regular file")
            return file.read(LARGEST_FILE_BYTES + 1)
    except FileNotFoundError:
        raise _file_error(path, "does not exist") from None
    except PermissionError:
        raise _file_error(path, "may not be read: permission denied") from None
    except OSError as error:
        raise _file_error(path, f"cannot be read: {error.strerror}") from None
    except ValueError:
        raise _file_error(path, "is not the name of a file") from None


def _file_error(path: Path, rule: str) -> SpecError:
    return SpecError(str(path), (Problem("", "the file", rule),))


def document(data: bytes, source: str) -> dict[str, object]:
    """The TOML document in the bytes. Raises SpecError with the one thing that keeps it from being read."""
    try:
        text = _decoded(data)
        _refuse_depth(text)
        return tomllib.loads(text)
    except _TextError as error:
        problem = error.problem
    except tomllib.TOMLDecodeError as error:
        problem = _syntax_problem(str(error))
    except RecursionError:
        problem = Problem("", "", "tables and lists are nested too deep")
    except ValueError:
        # The one error that the parser lets through: Python's own limit on the digits of a whole number.
        problem = Problem("", "", "a whole number has thousands of digits")
    raise SpecError(source, (problem,))


class _TextError(Exception):
    def __init__(self, problem: Problem) -> None:
        super().__init__(problem)
        self.problem = problem


def _decoded(data: bytes) -> str:
    """The text with plain line ends and without a byte order mark."""
    if len(data) > LARGEST_FILE_BYTES:
        raise _TextError(Problem("", "the file", f"is larger than {LARGEST_FILE_BYTES // 1024} KiB"))
    try:
        return data.decode("utf-8-sig").replace("\r\n", "\n")
    except UnicodeDecodeError as error:
        where = f"line {data.count(bytes([10]), 0, error.start) + 1}"
        raise _TextError(Problem(where, "", "the file is not UTF-8 text", "save it as UTF-8")) from None


@cache
def _marks() -> re.Pattern[str]:
    return re.compile(_MARKS, re.VERBOSE | re.DOTALL)


def _refuse_depth(text: str) -> None:
    """Raise for brackets or dotted keys deep enough to make the parser slow or exhaust it."""
    depth = parts = 0
    for found in _marks().finditer(text):
        mark = found[0]
        if mark == ".":
            parts += 1
        elif mark in "=,\n":
            parts = 0
        elif mark in "[{":
            depth += 1
        elif mark in "]}":
            depth -= 1
        if depth > DEEPEST_NESTING or parts >= MOST_KEY_PARTS:
            where = f"line {text.count(chr(10), 0, found.start()) + 1}"
            raise _TextError(Problem(where, "", "tables and lists are nested too deep", "a spec needs three levels"))


def _syntax_problem(message: str) -> Problem:
    """The parser's message, which ends in `(at line 3, column 5)`, in our words."""
    said, _, place = message.removesuffix(")").rpartition(" (at ")
    where = "end of the file" if place == "end of document" else place
    for start, rule, cure in _SYNTAX:
        if said.startswith(start):
            return Problem(where, "", rule, cure)
    return Problem(where, "", f"TOML cannot be read here: {shown(said)[1:-1]}")
