"""Writers of the package's data files: `python -m tests.regenerate.<name>` rewrites one in place."""
