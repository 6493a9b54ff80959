"""Typed, sequenced events and the state that they change."""
