"""Small data files of the package: TOML and CSV, each with its source inside."""

from pathlib import Path


def data_text(name: str) -> str:
    """Text of a data file of the package."""
    return Path(__file__).with_name(name).read_text(encoding="utf-8")
