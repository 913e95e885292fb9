"""A progress bar on long work: only on a terminal, and only after the first second."""

from __future__ import annotations

import time
from collections.abc import Callable
from types import TracebackType

from rich.console import Console
from rich.progress import BarColumn, MofNCompleteColumn, Progress, TextColumn, TimeRemainingColumn

PATIENCE = 1.0  # seconds; shorter work needs no bar


class Bar:
    """Told after every record; draws on a terminal once the work has lasted a while, and leaves no trace."""

    def __init__(self, console: Console, clock: Callable[[], float] = time.monotonic) -> None:
        self.console = console
        self.clock = clock
        self.start = clock()
        self.progress: Progress | None = None

    def __enter__(self) -> Bar:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        """Take the bar away, whatever happened."""
        if self.progress is not None:
            self.progress.stop()

    def tell(self, done: int, total: int) -> None:
        """``done`` of ``total`` records are judged."""
        if self.progress is None:
            if not self.console.is_terminal or self.clock() - self.start < PATIENCE:
                return
            self.progress = self._draw(total)
        elapsed = max(self.clock() - self.start, 1e-6)
        self.progress.update(self.progress.task_ids[0], completed=done, rate=f"{done / elapsed:.0f} a second")

    def _draw(self, total: int) -> Progress:
        columns = (
            TextColumn("judging"),
            BarColumn(bar_width=None, complete_style="#0072B2", finished_style="#0072B2"),
            MofNCompleteColumn(),
            TextColumn("{task.fields[rate]}"),
            TimeRemainingColumn(),
        )
        progress = Progress(*columns, console=self.console, transient=True)
        progress.add_task("", total=total, rate="")
        progress.start()
        return progress
