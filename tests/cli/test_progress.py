"""The progress bar: silent off a terminal and on short work, gone when the work is done."""

from __future__ import annotations

import io
from collections.abc import Iterator

import pytest
from rich.console import Console

from verify.cli.progress import Bar


def _clock(*times: float) -> Iterator[float]:
    yield from times
    while True:
        yield times[-1]


@pytest.mark.parametrize(("terminal", "seconds", "drawn"), [(True, 0.5, False), (False, 9.0, False), (True, 9.0, True)])
def test_drawn_only_on_a_terminal_after_a_while(terminal: bool, seconds: float, drawn: bool) -> None:
    file = io.StringIO()
    times = _clock(0.0, seconds)
    with Bar(Console(file=file, force_terminal=terminal, width=80), lambda: next(times)) as bar:
        bar.tell(10, 40)
        assert (bar.progress is not None) is drawn
        bar.tell(11, 40)
    assert ("judging" in file.getvalue()) is drawn


def test_taken_away_when_the_work_breaks() -> None:
    times = _clock(0.0, 5.0)
    bar = Bar(Console(file=io.StringIO(), force_terminal=True), lambda: next(times))

    def interrupted() -> None:
        with bar:
            bar.tell(1, 2)
            raise KeyboardInterrupt

    with pytest.raises(KeyboardInterrupt):
        interrupted()
    assert bar.progress is not None
    assert bar.progress.live.is_started is False
