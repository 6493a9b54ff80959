"""Tile grids, footprints of frames, and the pixels under them."""
