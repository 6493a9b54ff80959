"""The account of frames: what was imaged, what was searched, where it can still be."""
