"""Readers: they list and get, and guard what may be seen."""
