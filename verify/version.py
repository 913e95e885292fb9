"""The version of the tool, for reports and ``--version``."""

from __future__ import annotations

VERSION = "0.1.0"
