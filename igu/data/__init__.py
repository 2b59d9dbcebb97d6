"""Small data files of the package: TOML and CSV, each with its source inside."""
