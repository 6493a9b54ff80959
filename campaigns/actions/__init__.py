"""Use cases: one a file, each in one transaction."""
