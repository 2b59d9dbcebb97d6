"""Many solves with one question: positions, sweeps, search, service, tolerance."""
