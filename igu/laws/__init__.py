"""One physical law, one pure function on arrays: SI units, no names, no classes."""
