"""The live channel: one hub of open screens per campaign in each process."""
