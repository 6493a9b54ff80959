"""Campaigns: alerts, tiles, claims, frames, and who watches them."""
