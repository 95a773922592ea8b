"""Locations on the structure: geometry, reader, placer and writer (no database)."""
