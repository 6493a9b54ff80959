"""People, their sites and their instruments."""
