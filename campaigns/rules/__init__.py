"""Pure functions that judge plain values and return a list of problems."""
