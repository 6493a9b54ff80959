"""Everything that must work before the first package is installed: standard library only."""
