"""Published values against computed ones, each a row of data; `python -m tests.validation` writes docs/validation.md."""
