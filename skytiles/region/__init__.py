"""From an alert to a region: constraints, their product, credible areas, map files."""
