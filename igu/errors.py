"""The family of errors of this package; foreign exceptions become one of these at the border."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from contextlib import contextmanager
from numbers import Real
from typing import Any


class IguError(Exception):
    """Base of every error this package raises on purpose; its text is a sentence for the user."""


class ModelError(IguError, ValueError):
    """A description that physics or the model's own rules exclude."""


class CaseError(IguError):
    """Everything wrong with one or more input files, one line a fault.

    Attributes
    ----------
    faults : tuple of str      One complete line each: file, key path, what was given, what is allowed.
    """

    def __init__(self, faults: tuple[str, ...]) -> None:
        super().__init__("\n".join(faults))
        self.faults = faults


class SolveError(IguError):
    """A heat balance that did not close; says by how much and what to try."""


class OutputError(IguError):
    """A result that could not be written where it was asked to go."""


@contextmanager
def about(file: str) -> Iterator[None]:
    """Put the file that a ModelError is about ahead of its sentence."""
    try:
        yield
    except ModelError as error:
        raise ModelError(f"{file}: {error}") from error


def require(good: bool, sentence: str) -> None:
    """Raise ModelError with this sentence unless the condition holds."""
    if not good:
        raise ModelError(sentence)


def require_number(place: str, value: object, low: float, high: float, unit: str = "", *, above: bool = False) -> None:
    """Raise ModelError unless the value is a number from low, or above it, to high."""
    real = isinstance(value, Real) and not isinstance(value, bool)
    if not (real and low <= value <= high and not (above and value == low)):  # type: ignore[operator]
        raise ModelError(
            f"{place}: given {value!r:.60}; allowed {'above ' if above else ''}{low:g} to {high:g} {unit}".rstrip()
        )


def require_choice(place: str, value: object, known: Iterable[str]) -> None:
    """Raise ModelError unless the value is one of the names known; says the one it resembles."""
    known = tuple(known)
    if isinstance(value, str) and value in known:
        return
    from difflib import get_close_matches

    near = get_close_matches(str(value), known, n=1)
    hint = f'; did you mean "{near[0]}"?' if near else ""
    raise ModelError(f"{place}: given {value!r:.60}; allowed {', '.join(known) or 'none'}{hint}")


def require_kind(place: str, value: object, kind: type) -> None:
    """Raise ModelError unless the value is of this class."""
    if not isinstance(value, kind):
        raise ModelError(f"{place}: given {_class(value)}; allowed a {kind.__name__}")


def all_of(place: str, values: Any, kind: type) -> tuple[Any, ...]:
    """The values as a tuple; ModelError unless they are a tuple or list of this class."""
    good = isinstance(values, tuple | list)
    odd = [_class(value) for value in values if not isinstance(value, kind)] if good else [_class(values)]
    if odd:
        raise ModelError(f"{place}: given {odd[0]}; allowed a tuple of {kind.__name__}")
    return tuple(values)


def _class(value: object) -> str:
    return f"{value!r:.60}" if isinstance(value, str | int | float | None) else f"a {type(value).__name__}"
