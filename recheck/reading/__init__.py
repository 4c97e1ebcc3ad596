"""Reading: a document's passages become claims.

First the assignments of every sentence (`t(22) = 1.71`, `p = .03`), then the claims they form.
"""

from recheck.reading.reader import read

__all__ = ["read"]
