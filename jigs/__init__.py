"""Chairs: from the spec file to geometry to drawings in millimetres. No paper, no PDF, no command line."""
