"""What comes in: alert files and frame headers."""
