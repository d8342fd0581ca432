"""The command line: reads arguments, calls `jigs` and `layout`, says what came of it. No geometry."""

# The same as in pyproject.toml, which a checkout that is not installed cannot be asked for.
VERSION = "0.1.0"
