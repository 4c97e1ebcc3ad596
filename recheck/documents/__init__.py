"""A file becomes a document: passages in reading order, each character with its place."""

from recheck.documents.opening import open_document
from recheck.documents.typed.text import text_document

__all__ = ["open_document", "text_document"]
