"""Who should look where and when, and how far that is from the best possible."""
