"""A plain text table, and the interval of a measured share as the tool itself computes it."""

from __future__ import annotations

from collections.abc import Sequence

from verify.engine.shares import share_with_interval, wilson


def table(head: Sequence[str], rows: Sequence[Sequence[str]]) -> str:
    """Columns padded to their widest cell; the first column is left-aligned."""
    widths = [max(len(str(row[i])) for row in [head, *rows]) for i in range(len(head))]
    lines = []
    for row in [head, ["-" * width for width in widths], *rows]:
        rest = [str(cell).rjust(width) for cell, width in zip(row[1:], widths[1:], strict=True)]
        lines.append("  ".join([str(row[0]).ljust(widths[0]), *rest]))
    return "\n".join(lines)


__all__ = ["share_with_interval", "table", "wilson"]
