"""Text that a person reads: the reports, the drawn section, sentences."""
