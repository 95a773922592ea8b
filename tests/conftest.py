"""Fixtures that every test may ask for."""

from tests.open_data import open_data_wheel

__all__ = ["open_data_wheel"]
