"""The version of recheck, where every room can read it."""

__version__ = "0.1.0"
