"""Pages: the frames that browsers fill."""
