"""Tests that drive a real Chromium; a package, so that its fixtures end with it."""
