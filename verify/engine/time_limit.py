"""Ends the work on one record after a while, where the system offers a timer signal."""

from __future__ import annotations

import signal
import threading
from collections.abc import Iterator
from contextlib import contextmanager
from types import FrameType


class OutOfTimeError(BaseException):
    """Raised inside the work; no ``Exception``, so that nothing on the way takes it for its own fault."""


@contextmanager
def time_limit(seconds: float) -> Iterator[None]:
    """Raise OutOfTimeError inside the block after ``seconds``.

    There is no limit for 0, on systems without timer signals, or off the main thread. The signal is seen
    between two steps of Python: a long step inside a compiled library ends first.
    """
    if seconds <= 0 or not hasattr(signal, "setitimer") or not _on_main_thread():
        yield
        return
    before = signal.signal(signal.SIGALRM, _raise)
    signal.setitimer(signal.ITIMER_REAL, seconds)
    try:
        yield
    finally:
        signal.setitimer(signal.ITIMER_REAL, 0)
        signal.signal(signal.SIGALRM, before)


def _on_main_thread() -> bool:
    return threading.current_thread() is threading.main_thread()


def _raise(_number: int, _frame: FrameType | None) -> None:
    raise OutOfTimeError
