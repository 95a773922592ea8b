"""The small operator of the tests of records, for the rules as well."""

from tests.repairs.conftest import world

__all__ = ["world"]
