"""Directions, areas, times and HEALPix pixels on the sphere."""
