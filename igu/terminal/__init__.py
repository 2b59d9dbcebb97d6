"""Arguments in, exit code out: reports, tables, JSON, CSV, figures, progress."""
