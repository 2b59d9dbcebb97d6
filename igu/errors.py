"""The family of errors of this package; foreign exceptions become one of these at the border."""

from __future__ import annotations


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


def require(good: bool, sentence: str) -> None:
    """Raise ModelError with this sentence unless the condition holds."""
    if not good:
        raise ModelError(sentence)
