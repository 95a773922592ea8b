"""The small operator of the tests of records, for the reports as well."""

from tests.repairs.conftest import world

__all__ = ["world"]
