"""Progress of long work on stderr, where that is a terminal."""

from __future__ import annotations

import sys
import time
from typing import TextIO

WIDTH = 24


class Bar:
    """A bar with count, rate and time left; says nothing where stderr is not a terminal."""

    def __init__(self, what: str, stream: TextIO | None = None) -> None:
        self._what = what
        self._stream = stream or sys.stderr
        self._live = self._stream is not None and self._stream.isatty()
        self._start = time.monotonic()
        self._last = 0.0

    def __call__(self, done: int, total: int) -> None:
        """Show how far the work is, a few times a second."""
        now = time.monotonic()
        if not self._live or (now - self._last < 0.2 and done < total):
            return
        self._last = now
        spent = max(now - self._start, 1e-9)
        rate = done / spent
        left = (total - done) / rate if rate else 0.0
        full = WIDTH * done // max(total, 1)
        bar = "#" * full + "." * (WIDTH - full)
        self._stream.write(f"\r{self._what} {bar} {done}/{total}  {rate:.0f}/s  {_clock(left)} left ")
        self._stream.flush()

    def close(self) -> None:
        """Clear the line."""
        if self._live and self._last:
            self._stream.write("\r\x1b[K")
            self._stream.flush()


def _clock(seconds: float) -> str:
    minutes, rest = divmod(int(seconds + 0.5), 60)
    return f"{minutes}:{rest:02d}"
