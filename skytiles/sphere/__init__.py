"""Angles, vectors, HEALPix, and the doors to healpy and astropy."""
