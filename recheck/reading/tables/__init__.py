"""Tables: from cells in rows and columns to claims."""

from recheck.reading.tables.placing import with_tables

__all__ = ["with_tables"]
