"""recheck tells whether the numbers printed in a manuscript can be true, without its raw data."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from recheck.auditing import audit, audit_text
    from recheck.errors import RecheckError
    from recheck.model import Audit

__version__ = "0.1.0"
__all__ = ["Audit", "RecheckError", "audit", "audit_text"]


def __getattr__(name: str) -> Any:
    """Import a public name when it is first asked for: numpy and scipy cost a third of a second."""
    if name in ("audit", "audit_text"):
        import recheck.auditing as home
    elif name == "RecheckError":
        import recheck.errors as home
    elif name == "Audit":
        import recheck.model as home
    else:
        raise AttributeError(f"module 'recheck' has no attribute {name!r}")
    return getattr(home, name)
