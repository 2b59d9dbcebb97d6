"""The case file: TOML in, a case or every fault at once out."""
