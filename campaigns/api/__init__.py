"""The HTTP API: it translates, and decides nothing."""
