"""Settings, addresses and the server."""
